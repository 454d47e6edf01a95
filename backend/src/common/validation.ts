import { StandardSchemaValidationPipe } from "@nestjs/common";
import type { PipeTransform } from "@nestjs/common";
import { z } from "zod";
import type { ProblemDto } from "../contract/errors.js";
import { notFound, Refusal } from "./refusal.js";

/** An issue of any schema library that follows the standard. */
interface Issue {
  readonly message: string;
  readonly path?: readonly (PropertyKey | { readonly key: PropertyKey })[] | undefined;
}

/** `paint[3].points[0]` from the steps of a path. */
export const pathText = (path: Issue["path"] = []): string =>
  path
    .map((step) => (typeof step === "object" ? step.key : step))
    .map((key, at) => (typeof key === "number" ? `[${key}]` : `${at === 0 ? "" : "."}${String(key)}`))
    .join("");

export const problemsOf = (issues: readonly Issue[]): ProblemDto[] =>
  issues.map((issue) => ({ path: pathText(issue.path), sentence: issue.message }));

/** Judges every parameter that carries a schema and hands on what the schema made of it. */
export const contractPipe = (): StandardSchemaValidationPipe =>
  new StandardSchemaValidationPipe({
    exceptionFactory: (issues) => {
      const problems = problemsOf(issues);
      const first = problems.at(0);
      const where = first === undefined || first.path === "" ? "" : `${first.path}: `;
      return new Refusal("bad-request", `The request does not fit: ${where}${first?.sentence ?? ""}`, {
        problems,
      });
    },
  });

/** Pipe for an id in a path: what is no UUID names nothing, so it is not found. */
export class IdPipe implements PipeTransform<string, string> {
  /** @param what the noun, as in "scene" */
  constructor(private readonly what: string) {}

  transform(value: string): string {
    const id = z.uuid().safeParse(value);
    if (!id.success) throw notFound(this.what);
    return id.data;
  }
}
