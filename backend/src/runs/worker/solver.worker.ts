/** The thread of one run: reads the scene, opens the solver's session and turns the loop until it is ended. */
import { setPriority } from "node:os";
import { parentPort, workerData } from "node:worker_threads";
import { encodeFrame, frameByteLength, type FieldSample } from "@heddle/kernels/frames";
import { readScene, sceneSha256, type Scene } from "@heddle/kernels/scene";
import { openSession } from "@heddle/kernels/solving";
import type { FromThread, Problem, SolverTask, ToThread } from "./protocol.js";
import { SolverLoop } from "./solver-loop.js";

/** A paced or idle loop looks up at least this often, to report progress. */
const LONGEST_SLEEP_MS = 200;
/** On Linux a priority belongs to a thread: solving then gives way to the server's own work. */
const NICENESS = 5;

function main(): void {
  const port = parentPort;
  if (port === null) throw new Error("The solver's thread was started as a program of its own.");
  const task = workerData as SolverTask;
  const post = (message: FromThread, transfer: ArrayBuffer[] = []): void =>
    port.postMessage(message, transfer);
  if (process.platform === "linux") setPriority(NICENESS);

  const loop = guarded(post, () => open(task, post));
  if (loop === null) return;

  let immediate: NodeJS.Immediate | undefined;
  let timer: NodeJS.Timeout | undefined;
  const turn = (): void => {
    immediate = undefined;
    const waitMs = guarded(post, () => ({ waitMs: loop.turn() }))?.waitMs ?? null;
    if (waitMs === null) return;
    if (waitMs === 0) immediate = setImmediate(turn);
    else timer = setTimeout(turn, Math.min(waitMs, LONGEST_SLEEP_MS));
  };
  const wake = (): void => {
    clearTimeout(timer);
    immediate ??= setImmediate(turn);
  };
  port.on("message", (message: ToThread) => {
    guarded(post, () => loop.receive(message));
    wake();
  });
  wake();
}

function read(document: unknown): { scene: Scene; sha256: string } | { problems: Problem[] } {
  const outcome = readScene(document, { purpose: "run" });
  if (!outcome.ok) return { problems: outcome.problems.map(({ path, sentence }) => ({ path, sentence })) };
  return { scene: outcome.scene, sha256: sceneSha256(outcome.scene) };
}

function open(
  task: SolverTask,
  post: (message: FromThread, transfer?: ArrayBuffer[]) => void,
): SolverLoop | null {
  const scene = read(task.document);
  if ("problems" in scene) {
    post({ kind: "refused", problems: scene.problems });
    return null;
  }
  const session = openSession(scene.scene);
  return new SolverLoop(
    { session, scene: scene.scene, post, read, encode, now: () => performance.now() },
    task,
  );
}

/** Into memory of its own, which travels to the server without a copy. */
function encode(sample: FieldSample, range: number | null, sequence: number): Uint8Array<ArrayBuffer> {
  const target = new Uint8Array(frameByteLength(sample.width, sample.height));
  encodeFrame(sample, { range, sequence, target });
  return target;
}

/** What nobody foresaw ends the run with a sentence and leaves the thread in order. */
function guarded<T>(post: (message: FromThread) => void, work: () => T): T | null {
  try {
    return work();
  } catch (error) {
    post({ kind: "failed", sentence: sentenceFor(error), progress: null });
    return null;
  }
}

function sentenceFor(error: unknown): string {
  if (error instanceof RangeError && /allocation|array length/i.test(error.message)) {
    return "The server ran out of memory for this run: use larger cells or a smaller section.";
  }
  return `The solver stopped on a fault of its own (${error instanceof Error ? error.message : String(error)}): please report it with the scene.`;
}

main();
