/** `solve`: a scene file in, a result document out; exit statuses as in the contract of the command line. */
import type { Writable } from "node:stream";
import { setImmediate as nextTurn } from "node:timers/promises";
import { readScene, type Scene, SceneError, type SolveResult } from "../scene/index.js";
import type { SessionOptions, SolveSession } from "../solving/session.js";
import { allThreads, spawnHelper } from "../threads/index.js";
import { readSceneFile, say, sayProblems } from "./messages.js";
import { parseSolveOptions, type SolveOptions } from "./options.js";
import { OutputError, OutputFile, writeStream } from "./output.js";
import { Progress } from "./progress.js";

export const EXIT = { done: 0, refused: 2, failed: 3, interrupted: 130 } as const;
export type ExitStatus = (typeof EXIT)[keyof typeof EXIT];

/** Signals are seen between two turns of about this length. */
const TURN_MS = 100;
const FIRST_STEPS = 8;

export interface SolveIo {
  stdout: Writable;
  stderr: Writable & { isTTY?: boolean };
  /** Aborted by the first interrupt. */
  interrupt: AbortSignal;
  openSession: (scene: Scene, options: SessionOptions) => Promise<SolveSession>;
}

type RunEnd = { kind: "ended" } | { kind: "interrupted" } | { kind: "failed"; sentence: string };

/** Runs to the end, to the first interrupt or to a failure. */
const runToEnd = async (io: SolveIo, session: SolveSession): Promise<RunEnd> => {
  const progress = new Progress(io.stderr, session.grid.maxSteps, session.grid.nx * session.grid.ny);
  let steps = FIRST_STEPS;
  try {
    for (;;) {
      const before = performance.now();
      const outcome = session.advance(steps);
      if (outcome.kind === "failed") return { kind: "failed", sentence: outcome.failure.sentence };
      if (outcome.kind === "ended") return { kind: "ended" };
      const took = performance.now() - before;
      steps = Math.max(1, Math.round(steps * Math.min(4, TURN_MS / Math.max(took, 1))));
      progress.update(session.step);
      await nextTurn();
      if (io.interrupt.aborted) return { kind: "interrupted" };
    }
  } finally {
    progress.clear();
  }
};

/** One run to its end: its result, or the status to leave with. */
const runScene = async (
  io: SolveIo,
  scene: Scene,
  options: SolveOptions,
): Promise<SolveResult | ExitStatus> => {
  const session = await io.openSession(scene, {
    ...(options.engine && { engine: options.engine }),
    ...(options.precision && { precision: options.precision }),
    twoMesh: options.twoMesh,
    shielding: options.shielding,
    threads: options.threads ?? allThreads(),
    spawnHelper,
    log: (sentence) => say(io, sentence),
    ...(options.frequenciesGHz === null ? {} : { frequenciesGHz: options.frequenciesGHz }),
  });
  try {
    const end = await runToEnd(io, session);
    if (end.kind === "ended") return session.result();
    if (end.kind === "interrupted") return EXIT.interrupted;
    say(io, end.sentence);
    return EXIT.failed;
  } finally {
    session.dispose();
  }
};

const solveScene = async (
  io: SolveIo,
  scene: Scene,
  options: SolveOptions,
  file: OutputFile | null,
): Promise<ExitStatus> => {
  const result = await runScene(io, scene, options);
  if (typeof result === "number") return result;
  const text = `${JSON.stringify(result)}\n`;
  if (file === null) await writeStream(io.stdout, text);
  else file.write(text);
  return EXIT.done;
};

/**
 * Solves the scene that `args` name. Resolves with the exit status: 0 done, 2 refused (one line a problem),
 * 3 failed (one line), 130 interrupted. Nothing is left at `--out` unless the status is 0.
 */
export const solve = async (args: readonly string[], io: SolveIo): Promise<ExitStatus> => {
  const parsed = parseSolveOptions(args);
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
  const outcome = readScene(read.text, { purpose: "run" });
  if (!outcome.ok) {
    sayProblems(io, outcome.problems);
    return EXIT.refused;
  }
  let file: OutputFile | null = null;
  try {
    file = options.out === null ? null : new OutputFile(options.out);
    return await solveScene(io, outcome.scene, options, file);
  } catch (error) {
    if (error instanceof SceneError) {
      sayProblems(io, error.problems);
      return EXIT.refused;
    }
    if (error instanceof OutputError) say(io, error.message);
    else say(io, `The run failed: ${error instanceof Error ? error.message : "for an unknown reason"}.`);
    return EXIT.failed;
  } finally {
    file?.discard();
  }
};
