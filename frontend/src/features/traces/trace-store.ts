/** The samples of every probe of one run, growing outside React state. */
import type { TraceEvent } from "@heddle/backend/contract";

type Chunk = TraceEvent["traces"][number];

/** One probe's samples; sample i was taken at startNs + i·stepNs. */
export interface Trace {
  readonly probe: string;
  readonly unit: string;
  readonly startNs: number;
  readonly stepNs: number;
  /** Samples held; `values` may have room beyond. */
  readonly length: number;
  readonly values: Float64Array;
  /** Largest magnitude so far. */
  readonly peak: number;
}

type MutableTrace = { -readonly [K in keyof Trace]: Trace[K] };

export interface TraceStore {
  /** Every sample so far: replaces what was known. */
  reset(runId: string | null, chunks: readonly Chunk[]): void;
  /** Adds samples. False where they do not join on to what is known: the caller asks for everything anew. */
  append(runId: string, chunks: readonly Chunk[]): boolean;
  traces(): readonly Trace[];
  /** Time of the newest sample of all probes, ns. */
  endNs(): number;
  subscribe(listener: () => void): () => void;
}

const SMALLEST = 1024;

function extend(trace: MutableTrace, values: readonly number[], skip: number): void {
  const wanted = trace.length + values.length - skip;
  if (wanted > trace.values.length) {
    const larger = new Float64Array(Math.max(SMALLEST, 2 ** Math.ceil(Math.log2(wanted))));
    larger.set(trace.values.subarray(0, trace.length));
    trace.values = larger;
  }
  for (let i = skip; i < values.length; i += 1) {
    const value = values[i] ?? Number.NaN;
    trace.values[trace.length] = value;
    trace.length += 1;
    const magnitude = Math.abs(value);
    if (magnitude > trace.peak) trace.peak = magnitude;
  }
}

export function createTraceStore(): TraceStore {
  let run: string | null = null;
  let held: MutableTrace[] = [];
  const listeners = new Set<() => void>();
  const notify = (): void => {
    for (const listener of listeners) listener();
  };
  const empty = ({ probe, unit, startNs, stepNs }: Chunk): MutableTrace => ({
    probe,
    unit,
    startNs,
    stepNs,
    length: 0,
    values: new Float64Array(0),
    peak: 0,
  });
  return {
    reset(runId, chunks) {
      run = runId;
      held = chunks.map((chunk) => {
        const trace = empty(chunk);
        extend(trace, chunk.values, 0);
        return trace;
      });
      notify();
    },
    append(runId, chunks) {
      if (runId !== run) return true;
      for (const chunk of chunks) {
        let trace = held.find((candidate) => candidate.probe === chunk.probe);
        if (trace === undefined) {
          trace = empty(chunk);
          held.push(trace);
        }
        if (chunk.from > trace.length) return false;
        // Samples that are known already may come again after a join.
        const skip = trace.length - chunk.from;
        if (skip < chunk.values.length) extend(trace, chunk.values, skip);
      }
      notify();
      return true;
    },
    traces: () => held,
    endNs: () =>
      held.reduce(
        (end, trace) =>
          trace.length === 0 ? end : Math.max(end, trace.startNs + (trace.length - 1) * trace.stepNs),
        0,
      ),
    subscribe(listener) {
      listeners.add(listener);
      return () => {
        listeners.delete(listener);
      };
    },
  };
}
