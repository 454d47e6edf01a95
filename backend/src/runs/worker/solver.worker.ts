/** The thread of one run: reads the scene, opens the solver's session and turns the loop until it is ended. */
import { getPriority, setPriority } from "node:os";
import { parentPort, workerData } from "node:worker_threads";
import { encodeFrame, frameByteLength, type FieldSample } from "@heddle/kernels/frames";
import { readScene, SceneError, sceneSha256, type Scene } from "@heddle/kernels/scene";
import { openSession } from "@heddle/kernels/solving";
import { spawnHelper, threadsForOneRun } from "@heddle/kernels/threads";
import type { FromThread, Problem, SolverTask, ToThread } from "./protocol.js";
import { SolverLoop } from "./solver-loop.js";

/** A paced or idle loop looks up at least this often, to report progress. */
const LONGEST_SLEEP_MS = 200;
/** On Linux a priority belongs to a thread: solving gives way to the server's own work by this much. */
const NICER_BY = 5;
const NICEST = 19;

type Post = (message: FromThread, transfer?: ArrayBuffer[]) => void;

async function main(): Promise<void> {
  const port = parentPort;
  if (port === null) throw new Error("The solver's thread was started as a program of its own.");
  const post: Post = (message, transfer = []) => port.postMessage(message, transfer);
  if (process.platform === "linux") setPriority(Math.min(NICEST, getPriority() + NICER_BY));

  // What comes while the section is being opened waits its turn.
  const early: ToThread[] = [];
  let hear = (message: ToThread): void => void early.push(message);
  port.on("message", (message: ToThread) => hear(message));

  const loop = await open(workerData as SolverTask, post);
  if (loop === null) return;
  const wake = turning(loop, post);
  hear = (message) => {
    guarded(post, () => loop.receive(message));
    wake();
  };
  for (const message of early) hear(message);
  wake();
}

/** Turns the loop for as long as it has work; the function given back wakes it from its sleep. */
function turning(loop: SolverLoop, post: Post): () => void {
  let immediate: NodeJS.Immediate | undefined;
  let timer: NodeJS.Timeout | undefined;
  const turn = (): void => {
    immediate = undefined;
    const waitMs = guarded(post, () => loop.turn());
    if (waitMs === null) return;
    if (waitMs === 0) immediate = setImmediate(turn);
    else timer = setTimeout(turn, Math.min(waitMs, LONGEST_SLEEP_MS));
  };
  return () => {
    clearTimeout(timer);
    immediate ??= setImmediate(turn);
  };
}

const told = (problems: readonly Problem[]): Problem[] =>
  problems.map(({ path, sentence }) => ({ path, sentence }));

function read(document: unknown): { scene: Scene; sha256: string } | { problems: Problem[] } {
  const outcome = readScene(document, { purpose: "run" });
  if (!outcome.ok) return { problems: told(outcome.problems) };
  return { scene: outcome.scene, sha256: sceneSha256(outcome.scene) };
}

/** Null where the run could not be opened; the server has been told why. */
async function open(task: SolverTask, post: Post): Promise<SolverLoop | null> {
  try {
    const found = read(task.document);
    if ("problems" in found) {
      post({ kind: "refused", problems: found.problems });
      return null;
    }
    const { scene } = found;
    const log = (sentence: string): void => console.error(sentence);
    const { twoMesh, shielding } = task;
    const threads = threadsForOneRun();
    const session = await openSession(scene, { threads, spawnHelper, log, twoMesh, shielding });
    const now = (): number => performance.now();
    return new SolverLoop({ session, scene, post, read, encode, now }, task);
  } catch (error) {
    if (error instanceof SceneError) post({ kind: "refused", problems: told(error.problems) });
    else post({ kind: "failed", sentence: sentenceFor(error), progress: null });
    return null;
  }
}

/** Into memory of its own, which travels to the server without a copy. */
function encode(sample: FieldSample, range: number | null, sequence: number): Uint8Array<ArrayBuffer> {
  const target = new Uint8Array(frameByteLength(sample.width, sample.height));
  encodeFrame(sample, { range, sequence, target });
  return target;
}

/** What nobody foresaw ends the run with a sentence; the server then ends the thread. */
function guarded<T>(post: Post, work: () => T): T | null {
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
  const what = error instanceof Error ? error.message : String(error);
  return `The solver stopped on a fault of its own (${what}): please report it with the scene.`;
}

await main();
