/** What the commands say on standard error, and how they read a scene's file. */
import { readFileSync } from "node:fs";
import type { Problem } from "../scene/index.js";

interface Listener {
  stderr: { write: (text: string) => unknown };
}

/** One line. */
export const say = (io: Listener, line: string): void => {
  io.stderr.write(`${line.replaceAll(/\s*\n\s*/g, " ")}\n`);
};

/** One line a problem, `path: sentence`. */
export const sayProblems = (io: Listener, problems: readonly Problem[]): void => {
  for (const { path, sentence } of problems) say(io, `${path === "" ? "scene" : path}: ${sentence}`);
};

/** The text of a scene's file, or why it cannot be had. */
export const readSceneFile = (path: string): { text: string } | { problem: Problem } => {
  try {
    return { text: readFileSync(path, "utf8") };
  } catch (error) {
    const code = error instanceof Error && "code" in error ? error.code : undefined;
    const reason =
      code === "ENOENT"
        ? "There is no such file"
        : code === "EISDIR"
          ? "It is a folder, not a file"
          : `It cannot be read (${String(code)})`;
    return { problem: { path, sentence: `${reason}; name a scene document.` } };
  }
};
