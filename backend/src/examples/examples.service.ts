import { existsSync } from "node:fs";
import { readdir, readFile } from "node:fs/promises";
import { join } from "node:path";
import { Injectable, Logger } from "@nestjs/common";
import { readScene } from "@heddle/kernels/scene";
import { notFound } from "../common/refusal.js";
import { PATHS } from "../config/paths.js";
import type { ExampleDto } from "../contract/scenes.js";

/** The first heading and the first paragraph of a README. */
export function titleAndParagraph(markdown: string): { title: string | null; paragraph: string } {
  const title = /^#\s+(.+)$/m.exec(markdown)?.[1]?.trim() ?? null;
  const paragraph = markdown
    .split(/\n\s*\n/)
    .map((block) => block.trim())
    .find((block) => block !== "" && !/^(#|!\[|```|\||<)/.test(block));
  return { title, paragraph: (paragraph ?? "").replace(/\s*\n\s*/g, " ") };
}

/** The scenes that come with Heddle: a folder each, with the scene, a paragraph and a picture. */
@Injectable()
export class ExamplesService {
  private readonly logger = new Logger("Examples");
  private loaded: Promise<ExampleDto[]> | undefined;

  /** By folder name; one that cannot be read is logged and left out. */
  list(): Promise<ExampleDto[]> {
    this.loaded ??= this.load();
    return this.loaded;
  }

  /** @throws Refusal "not-found" */
  async get(name: string): Promise<ExampleDto> {
    const found = (await this.list()).find((example) => example.name === name);
    if (found === undefined) throw notFoundExample(name);
    return found;
  }

  /** Path of the picture. @throws Refusal "not-found" */
  async thumbnail(name: string): Promise<string> {
    const { name: folder } = await this.get(name);
    const file = join(PATHS.examples, folder, "thumbnail.png");
    if (!existsSync(file)) throw notFound("picture of an example");
    return file;
  }

  private async load(): Promise<ExampleDto[]> {
    if (!existsSync(PATHS.examples)) return [];
    const folders = (await readdir(PATHS.examples, { withFileTypes: true }))
      .filter((entry) => entry.isDirectory())
      .map((entry) => entry.name)
      .sort();
    const examples: ExampleDto[] = [];
    for (const name of folders) {
      const scene = join(PATHS.examples, name, "scene.json");
      if (!existsSync(scene)) continue;
      const outcome = readScene(await readFile(scene, "utf8"));
      if (!outcome.ok) {
        const first = outcome.problems.at(0);
        this.logger.warn(`Example ${name} is left out: ${first?.path ?? ""} ${first?.sentence ?? ""}`);
        continue;
      }
      const readme = join(PATHS.examples, name, "README.md");
      const text = existsSync(readme) ? await readFile(readme, "utf8") : "";
      const { title, paragraph } = titleAndParagraph(text);
      examples.push({ name, title: title ?? outcome.scene.name, paragraph, document: outcome.scene });
    }
    return examples;
  }
}

const notFoundExample = (name: string) => notFound(`example as "${name.slice(0, 100)}"`);
