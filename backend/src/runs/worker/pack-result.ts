/** Takes the longest traces out of a result, so that what the database keeps stays small. */
import { createHash } from "node:crypto";
import type { SolveResult } from "@heddle/kernels/scene";
import type { PackedResult } from "./protocol.js";

/** Bytes of all traces together, at eight bytes a value, that stay inside the document. */
export const MAX_INLINE_TRACE_BYTES = 1024 * 1024;
const BYTES_PER_VALUE = 8;

export function packResult(result: SolveResult, maxInlineBytes = MAX_INLINE_TRACE_BYTES): PackedResult {
  const longestFirst = [...result.probes].sort((a, b) => b.trace.values.length - a.trace.values.length);
  let inlineBytes = longestFirst.reduce((sum, { trace }) => sum + trace.values.length * BYTES_PER_VALUE, 0);
  const taken = new Set<number[]>();
  for (const { trace } of longestFirst) {
    if (inlineBytes <= maxInlineBytes) break;
    taken.add(trace.values);
    inlineBytes -= trace.values.length * BYTES_PER_VALUE;
  }

  const arrays: PackedResult["arrays"] = [];
  const probes = result.probes.map((probe) => {
    const { values } = probe.trace;
    if (!taken.has(values)) return probe;
    const bytes = float64LittleEndian(values);
    const sha256 = createHash("sha256").update(bytes).digest("hex");
    arrays.push({ sha256, bytes });
    return { ...probe, trace: { ...probe.trace, values: { array: sha256, length: values.length } } };
  });
  return { text: JSON.stringify({ ...result, probes }), arrays };
}

function float64LittleEndian(values: readonly number[]): Uint8Array<ArrayBuffer> {
  const bytes = new Uint8Array(values.length * BYTES_PER_VALUE);
  const view = new DataView(bytes.buffer);
  values.forEach((value, index) => view.setFloat64(index * BYTES_PER_VALUE, value, true));
  return bytes;
}
