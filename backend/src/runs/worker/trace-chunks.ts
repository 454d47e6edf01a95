/** Trace samples on their way to viewers: plain numbers, rounded, and bounded in number. */
import type { TraceIncrement } from "@heddle/kernels/solving";
import type { TraceChunk } from "./protocol.js";

/** Values of all probes together in one answer; a longer history is sent from a later `from`. */
export const MAX_TRACE_VALUES = 400_000;
const WIRE_DIGITS = 7;

export function toChunks(increments: readonly TraceIncrement[], maxValues = MAX_TRACE_VALUES): TraceChunk[] {
  const perProbe = Math.max(1, Math.floor(maxValues / Math.max(1, increments.length)));
  return increments.map(({ probe, unit, startNs, stepNs, from, values }) => {
    const skipped = Math.max(0, values.length - perProbe);
    const kept = Array.from(values.subarray(skipped), (value) => Number(value.toPrecision(WIRE_DIGITS)));
    return { probe, unit, startNs, stepNs, from: from + skipped, values: kept };
  });
}

/** Index after the newest sample, the same for all probes of a session. */
export const endOf = (increments: readonly TraceIncrement[], otherwise: number): number =>
  increments.reduce((end, { from, values }) => Math.max(end, from + values.length), otherwise);
