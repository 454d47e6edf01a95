import { mkdtempSync, readdirSync, readFileSync, rmSync, writeFileSync } from "node:fs";
import { tmpdir } from "node:os";
import { join } from "node:path";
import { Writable } from "node:stream";
import { afterEach, beforeEach, describe, expect, it } from "vitest";
import { modesDocumentSchema } from "../modes/index.js";
import type { SceneInput } from "../scene/index.js";
import { type ModesIo, runModes } from "./modes.js";
import { EXIT, type ExitStatus } from "./solve.js";

class Collected extends Writable {
  text = "";
  isTTY = false;
  override _write(chunk: Buffer, _encoding: string, done: () => void): void {
    this.text += chunk.toString("utf8");
    done();
  }
}

/** A closed box that nothing drives: modes need no source. */
const scene = (changes: Partial<SceneInput> = {}): SceneInput => ({
  format: "heddle-scene",
  version: 1,
  name: "Box",
  polarization: "TEz",
  section: { widthMm: 30, heightMm: 20 },
  band: { fromGHz: 4, toGHz: 12 },
  mesh: { cellMm: 2 },
  edges: { left: "electric", right: "electric", bottom: "electric", top: "electric" },
  ...changes,
});

let folder = "";
beforeEach(() => {
  folder = mkdtempSync(join(tmpdir(), "heddle-modes-"));
});
afterEach(() => {
  rmSync(folder, { recursive: true, force: true });
});

const write = (name: string, document: unknown): string => {
  const path = join(folder, name);
  writeFileSync(path, JSON.stringify(document));
  return path;
};

interface Ran {
  status: ExitStatus;
  stdout: string;
  stderr: string;
}
const run = async (args: readonly string[], changes: Partial<ModesIo> = {}, tty = false): Promise<Ran> => {
  const stdout = new Collected();
  const stderr = new Collected();
  stderr.isTTY = tty;
  const io: ModesIo = { stdout, stderr, interrupt: new AbortController().signal, ...changes };
  return { status: await runModes(args, io), stdout: stdout.text, stderr: stderr.text };
};
const linesOf = (text: string): string[] => text.split("\n").filter((line) => line !== "");

describe("modes", () => {
  it("prints the document, ten modes unless told otherwise, and nothing else", async () => {
    const ran = await run([write("s.json", scene())]);
    expect(ran).toMatchObject({ status: EXIT.done, stderr: "" });
    const document = modesDocumentSchema.parse(JSON.parse(ran.stdout));
    expect(document.grid).toMatchObject({ nx: 15, ny: 10, dxMm: 2, dyMm: 2 });
    expect(document.modes).toHaveLength(10);
    // c/2a of 30 mm.
    expect(document.modes[0].cutoffGHz).toBeCloseTo(4.99654, 4);
  });

  it("writes the same document to a file, and only as many modes as asked for", async () => {
    const path = write("s.json", scene());
    const out = join(folder, "m.json");
    const ran = await run([path, "--count", "3", "--out", out]);
    expect(ran).toEqual({ status: EXIT.done, stdout: "", stderr: "" });
    expect(readdirSync(folder).sort()).toEqual(["m.json", "s.json"]);
    const written = modesDocumentSchema.parse(JSON.parse(readFileSync(out, "utf8")));
    expect(written.modes).toHaveLength(3);
  });

  it("draws a bar on a terminal and wipes it at the end", async () => {
    const ran = await run([write("s.json", scene())], {}, true);
    expect(ran.status).toBe(EXIT.done);
    expect(ran.stderr).toMatch(/\[[█·]+\] \d+ % {2}looking for modes/);
    expect(ran.stderr.endsWith("\r\u001b[K")).toBe(true);
  });

  it("refuses with status 2 an open section, a bad scene, bad options; nothing is left at --out", async () => {
    const out = join(folder, "m.json");
    const open = write("open.json", scene({ edges: { ...scene().edges, top: "absorbing" } }));
    const refused = await run([open, "--out", out]);
    expect(refused).toMatchObject({ status: EXIT.refused, stdout: "" });
    expect(refused.stderr).toMatch(
      /^edges\.top: The top edge absorbs and 30 mm of it are not covered by metal/,
    );
    const bad = await run([write("bad.json", { ...scene(), background: "sand" })]);
    expect(linesOf(bad.stderr)).toEqual([
      'background: There is no medium "sand"; add it to "media" or choose one that is there.',
    ]);
    const options = await run(["a.json", "b.json", "--count", "0"]);
    expect(options.status).toBe(EXIT.refused);
    expect(linesOf(options.stderr).map((line) => line.split(":")[0])).toEqual(["options", "--count"]);
    expect((await run([join(folder, "none.json")])).stderr).toContain("There is no such file");
    expect(readdirSync(folder).sort()).toEqual(["bad.json", "open.json"]);
  });

  it("fails with status 3 and one line where the result cannot be written", async () => {
    const ran = await run([write("s.json", scene()), "--out", join(folder, "no", "m.json")]);
    expect(ran.status).toBe(EXIT.failed);
    expect(linesOf(ran.stderr)).toHaveLength(1);
  });

  it("stops with status 130 at an interrupt and leaves nothing", async () => {
    const interrupt = new AbortController();
    const stderr = new Collected();
    stderr.isTTY = true;
    stderr._write = (_chunk, _encoding, done): void => {
      interrupt.abort();
      done();
    };
    const out = join(folder, "m.json");
    const ran = await run([write("s.json", scene({ mesh: { cellMm: 0.5 } })), "--out", out], {
      interrupt: interrupt.signal,
      stderr,
    });
    expect(ran.status).toBe(EXIT.interrupted);
    expect(readdirSync(folder)).toEqual(["s.json"]);
  });
});
