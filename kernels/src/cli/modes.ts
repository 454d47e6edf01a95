/** `modes`: a scene file in, its cut-off frequencies out; exit statuses as `solve`'s. */
import type { Writable } from "node:stream";
import { setImmediate as nextTurn } from "node:timers/promises";
import { parseArgs } from "node:util";
import type { ModesDocument } from "../modes/index.js";
import { DEFAULT_MODES, MOST_MODES, solveModes } from "../modes/index.js";
import { type Problem, readScene, type Scene, SceneError } from "../scene/index.js";
import { readSceneFile, say, sayProblems } from "./messages.js";
import { OutputError, OutputFile, writeStream } from "./output.js";
import { progressBar } from "./progress.js";
import { EXIT, type ExitStatus } from "./solve.js";

export interface ModesIo {
  stdout: Writable;
  stderr: Writable & { isTTY?: boolean };
  /** Aborted by the first interrupt. */
  interrupt: AbortSignal;
}

export const MODES_USAGE = "npm run --silent modes -- SCENE.json [--out MODES.json] [--count 10]";

interface ModesOptions {
  sceneFile: string;
  out: string | null;
  count: number;
}

type Parsed = { ok: true; options: ModesOptions } | { ok: false; problems: Problem[] };

const parseOptions = (args: readonly string[]): Parsed => {
  let parsed;
  try {
    parsed = parseArgs({
      args: [...args],
      allowPositionals: true,
      options: { out: { type: "string" }, count: { type: "string" } },
    });
  } catch (error) {
    const reason =
      error instanceof Error ? (error.message.split(/\.(?:\s|$)/)[0] ?? "") : "they cannot be read";
    return { ok: false, problems: [{ path: "options", sentence: `${reason}. Usage: ${MODES_USAGE}` }] };
  }
  const { values, positionals } = parsed;
  const problems: Problem[] = [];
  const [sceneFile, ...more] = positionals;
  if (positionals.length === 0)
    problems.push({ path: "options", sentence: `Name the scene. Usage: ${MODES_USAGE}` });
  if (more.length > 0)
    problems.push({ path: "options", sentence: `One scene at a time; "${more[0]}" is one too many.` });
  const count = Number(values.count ?? String(DEFAULT_MODES));
  if (!Number.isInteger(count) || count < 1 || count > MOST_MODES)
    problems.push({
      path: "--count",
      sentence: `"${values.count ?? ""}" is no number of modes; give 1 to ${String(MOST_MODES)}.`,
    });
  if (values.out === "") problems.push({ path: "--out", sentence: "Name the file that the modes go to." });
  if (problems.length > 0) return { ok: false, problems };
  return { ok: true, options: { sceneFile, out: values.out ?? null, count } };
};

/** Runs to the end or to the first interrupt (null), with a bar on a terminal. */
const runToEnd = async (io: ModesIo, scene: Scene, count: number): Promise<ModesDocument | null> => {
  const steps = solveModes(scene, count);
  const terminal = io.stderr.isTTY === true;
  try {
    for (;;) {
      const { done, value } = steps.next();
      if (done === true) return value;
      const what = value.stage === "mesh" ? "meshing the section" : "looking for modes";
      // Carriage return and "erase to the end of the line".
      if (terminal)
        io.stderr.write(
          `\r\u001b[K${progressBar(value.share)} ${String(Math.floor(value.share * 100))} %  ${what}`,
        );
      await nextTurn();
      if (io.interrupt.aborted) return null;
    }
  } finally {
    if (terminal) io.stderr.write("\r\u001b[K");
  }
};

/**
 * Finds the modes of the scene that `args` name. Resolves with the exit status: 0 done, 2 refused (one line a problem),
 * 3 failed (one line), 130 interrupted. Nothing is left at `--out` unless the status is 0.
 */
export const runModes = async (args: readonly string[], io: ModesIo): Promise<ExitStatus> => {
  const parsed = parseOptions(args);
  if (!parsed.ok) {
    sayProblems(io, parsed.problems);
    return EXIT.refused;
  }
  const { options } = parsed;
  const read = readSceneFile(options.sceneFile);
  if ("problem" in read) {
    sayProblems(io, [read.problem]);
    return EXIT.refused;
  }
  // Modes need neither sources nor what only time stepping computes.
  const outcome = readScene(read.text, { purpose: "document" });
  if (!outcome.ok) {
    sayProblems(io, outcome.problems);
    return EXIT.refused;
  }
  let file: OutputFile | null = null;
  try {
    file = options.out === null ? null : new OutputFile(options.out);
    const document = await runToEnd(io, outcome.scene, options.count);
    if (document === null) return EXIT.interrupted;
    const text = `${JSON.stringify(document)}\n`;
    if (file === null) await writeStream(io.stdout, text);
    else file.write(text);
    return EXIT.done;
  } catch (error) {
    if (error instanceof SceneError) {
      sayProblems(io, error.problems);
      return EXIT.refused;
    }
    if (error instanceof OutputError) say(io, error.message);
    else
      say(
        io,
        `The modes were not found: ${error instanceof Error ? error.message : "for an unknown reason"}`,
      );
    return EXIT.failed;
  } finally {
    file?.discard();
  }
};
