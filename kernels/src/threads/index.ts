/** Helper threads on Node: the one place beside the command line that knows the platform. */
import { availableParallelism } from "node:os";
import { Worker } from "node:worker_threads";
import type { SpawnHelper } from "../stepping/index.js";

/** What a helper does, as text: a file of its own would have to be found again by every bundler and test runner. */
const HELPER = `
const { workerData } = require("node:worker_threads");
const { module, memory } = workerData;
new WebAssembly.Instance(module, { env: { memory } }).exports.serve();
`;

/** Starts a worker thread that helps the wasm engine until the engine is disposed of. It keeps no process alive. */
export const spawnHelper: SpawnHelper = (task) => {
  new Worker(HELPER, { eval: true, workerData: task, stdin: false }).unref();
};

/** Threads for one run that leave a core to the rest of the process: all cores but one, at least one. */
export const threadsForOneRun = (): number => Math.max(1, availableParallelism() - 1);

/** All cores. */
export const allThreads = (): number => availableParallelism();
