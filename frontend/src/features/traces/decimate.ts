/**
 * Smallest and largest sample of each of `columns` equal spans of [firstNs, lastNs], so that no peak is lost however
 * many samples share a pixel. `lows` and `highs` hold a column's extremes; NaN where no sample falls into it.
 * Each column also reaches back to the sample before it, so that neighbouring columns join.
 */
export function decimate(
  trace: { startNs: number; stepNs: number; length: number; values: Float64Array },
  firstNs: number,
  lastNs: number,
  lows: Float64Array,
  highs: Float64Array,
): void {
  const columns = lows.length;
  lows.fill(Number.NaN);
  highs.fill(Number.NaN);
  if (trace.length === 0 || !(lastNs > firstNs) || columns === 0) return;
  const perColumn = (lastNs - firstNs) / columns / trace.stepNs;
  const origin = (firstNs - trace.startNs) / trace.stepNs;
  for (let column = 0; column < columns; column += 1) {
    const from = Math.max(0, Math.floor(origin + column * perColumn));
    const to = Math.min(trace.length - 1, Math.floor(origin + (column + 1) * perColumn));
    if (to < from || origin + column * perColumn > trace.length - 1) continue;
    let low = Number.POSITIVE_INFINITY;
    let high = Number.NEGATIVE_INFINITY;
    for (let i = from; i <= to; i += 1) {
      const value = trace.values[i] ?? Number.NaN;
      if (value < low) low = value;
      if (value > high) high = value;
    }
    if (low <= high) {
      lows[column] = low;
      highs[column] = high;
    }
  }
}

/** The value nearest to a time; null outside the samples. */
export function sampleAt(
  trace: { startNs: number; stepNs: number; length: number; values: Float64Array },
  timeNs: number,
): number | null {
  const index = Math.round((timeNs - trace.startNs) / trace.stepNs);
  return index < 0 || index >= trace.length ? null : (trace.values[index] ?? null);
}

const LADDER = [1, 1.2, 1.5, 2, 2.5, 3, 4, 5, 6, 8, 10];

/** The end of a time axis that holds `timeNs` and moves seldom: 1, 1.2, 1.5, 2 … times a power of ten. */
export function axisEnd(timeNs: number): number {
  if (!(timeNs > 0)) return 1;
  const decade = 10 ** Math.floor(Math.log10(timeNs));
  const factor = LADDER.find((candidate) => candidate * decade >= timeNs * 1.001) ?? 12;
  return Number((factor * decade).toPrecision(6));
}

/** About `wanted` round places of an axis within [from, to]. */
export function ticks(from: number, to: number, wanted: number): number[] {
  const span = to - from;
  if (!(span > 0) || wanted < 1) return [];
  const rough = span / wanted;
  const decade = 10 ** Math.floor(Math.log10(rough));
  const step = decade * ([1, 2, 5].find((factor) => factor * decade >= rough) ?? 10);
  const places: number[] = [];
  for (let i = Math.ceil(from / step - 1e-9); i * step <= to + step * 1e-9; i += 1)
    places.push(Number((i * step).toPrecision(12)));
  return places;
}
