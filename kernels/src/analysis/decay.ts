/** How far a trace has rung down. */

/**
 * Level of the end of a trace below its largest value, in dB: largest magnitude in the last twentieth over the largest of
 * all. Infinite for a trace that is zero throughout or ends in zeros.
 */
export function fallenDb(values: Float64Array): number {
  let largest = 0;
  let tail = 0;
  const tailStart = Math.floor(values.length * 0.95);
  for (let n = 0; n < values.length; n += 1) {
    const magnitude = Math.abs(values[n]);
    if (magnitude > largest) largest = magnitude;
    if (n >= tailStart && magnitude > tail) tail = magnitude;
  }
  if (largest === 0 || tail === 0) return Number.POSITIVE_INFINITY;
  return -20 * Math.log10(tail / largest);
}
