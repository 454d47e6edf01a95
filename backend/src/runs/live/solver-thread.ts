/** The thread of one run as the server sees it, and how one is made. */
import { Worker } from "node:worker_threads";
import { Injectable } from "@nestjs/common";
import type { FromThread, SolverTask, ToThread } from "../worker/protocol.js";

export interface SolverThread {
  post(message: ToThread): void;
  /** Ends the thread at once, whatever it does. */
  kill(): Promise<void>;
}

export interface ThreadEvents {
  message: (message: FromThread) => void;
  /** The thread is gone; `error` where something was thrown that nobody caught. */
  gone: (error: Error | null) => void;
}

/** Makes threads; tests put one in its place that needs no compiled code. */
export abstract class SolverThreads {
  abstract start(task: SolverTask, events: ThreadEvents): SolverThread;
}

/** JavaScript's own objects in a solver thread; field data lies outside this heap. */
const HEAP_MB = 1024;

@Injectable()
export class WorkerSolverThreads extends SolverThreads {
  start(task: SolverTask, events: ThreadEvents): SolverThread {
    const worker = new Worker(new URL("../worker/solver.worker.js", import.meta.url), {
      workerData: task,
      name: `run ${task.runId.slice(0, 8)}`,
      resourceLimits: { maxOldGenerationSizeMb: HEAP_MB },
    });
    let thrown: Error | null = null;
    worker.on("message", (message: FromThread) => events.message(message));
    worker.on("error", (error: unknown) => {
      thrown = error instanceof Error ? error : new Error(String(error));
    });
    worker.on("exit", () => events.gone(thrown));
    return {
      post: (message) => worker.postMessage(message),
      kill: async () => {
        await worker.terminate();
      },
    };
  }
}
