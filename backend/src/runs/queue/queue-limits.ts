/** How much the server takes on at once. The queue is bounded everywhere; what is over a bound is refused with the number. */
import { availableParallelism, totalmem } from "node:os";

/** Injection token of the {@link QueueLimits}. */
export const QUEUE_LIMITS = Symbol("queue limits");

export interface QueueLimits {
  /** Runs that are stepped at the same time. */
  running: number;
  /** Runs that wait, of everyone together. */
  queued: number;
  queuedPerPerson: number;
  /** Paused runs; each keeps its thread and memory but steps nothing. */
  paused: number;
  /** Ended runs whose last field can still be looked at. */
  lingering: number;
  lingerMs: number;
  /** Bytes of all solvers together, by the kernels' estimate. */
  memoryBytes: number;
}

/** Share of the machine's memory that solvers may take; the rest is the database's, the server's and the system's. */
const MEMORY_SHARE = 0.6;

/** The memory that this process may use: a container's limit where it is the smaller. */
function machineMemory(): number {
  // 0 or a number beyond any machine where no limit is set.
  const constrained = process.constrainedMemory();
  return constrained > 0 ? Math.min(constrained, totalmem()) : totalmem();
}

export const defaultQueueLimits = (): QueueLimits => ({
  running: Math.max(1, availableParallelism() - 1),
  queued: 100,
  queuedPerPerson: 20,
  paused: 8,
  lingering: 3,
  lingerMs: 5 * 60_000,
  memoryBytes: Math.floor(MEMORY_SHARE * machineMemory()),
});

/** Gigabytes with one decimal, for sentences. */
export const gigabytes = (bytes: number): string => `${(bytes / 1e9).toFixed(1)} GB`;
