/** How the points of a row are walked through: in runs of one medium, and apart where absorbing layers lie. */
import type { Lattice } from "../lattice/index.js";
import type { EngineField } from "../stepping/index.js";
import type { QuarterRow } from "./quarters.js";

/**
 * Walks the points of a row from column `first` to `last`. Point i's left quarters are number 2i + `origin` of the rows below and
 * above it: points whose four quarters are of one medium in runs [from, to), the others singly.
 */
export function walkRuns(
  lower: QuarterRow,
  upper: QuarterRow,
  first: number,
  last: number,
  origin: number,
  single: (i: number, left: number) => void,
  run: (medium: number, from: number, to: number) => void,
): void {
  const end = lower.medium.length;
  let i = first;
  while (i <= last) {
    const left = origin + 2 * i;
    // Quarters outside the section repeat the outermost ones.
    const l = Math.min(end - 1, Math.max(0, left));
    const medium = lower.medium[l];
    const runEnd = Math.min(lower.runEnd[l], upper.runEnd[l]);
    const reach = runEnd === end ? Number.POSITIVE_INFINITY : runEnd;
    if (medium < 0 || upper.medium[l] !== medium || left + 1 >= reach) {
      single(i, left);
      i += 1;
      continue;
    }
    const count = Math.min(last + 1 - i, Math.floor((reach - left) / 2));
    run(medium, i, i + count);
    i += count;
  }
}

/** Columns from … to, and whether they lie in an absorbing layer. */
type Zone = readonly [from: number, to: number, inLayer: boolean];

const beyond = (index: number, low: number, high: number, count: number): boolean =>
  (low > 0 && index <= low) || (high > 0 && index > count - high);

/** Whether a point lies in an absorbing layer. G counts as in one where an F beside it is. */
export function isInLayer(
  { layers, columns, rows }: Lattice,
  field: EngineField,
  j: number,
  i: number,
): boolean {
  const row = (at: number): boolean => beyond(at, layers.bottom, layers.top, rows);
  const column = (at: number): boolean => beyond(at, layers.left, layers.right, columns);
  return row(j) || column(i) || (field === "gx" && row(j + 1)) || (field === "gy" && column(i + 1));
}

/** A field's columns `first` to `last` of row j, cut at the absorbing layers. */
export function layerZones(
  { layers, columns, rows }: Lattice,
  field: EngineField,
  j: number,
  first: number,
  last: number,
): Zone[] {
  const inRow = (row: number): boolean => beyond(row, layers.bottom, layers.top, rows);
  if (inRow(j) || (field === "gx" && inRow(j + 1))) return [[first, last, true]];
  const left = layers.left > 0 ? layers.left + 1 : first;
  const right = layers.right > 0 ? columns - layers.right - (field === "gy" ? 1 : 0) : last;
  const zones: Zone[] = [
    [first, left - 1, true],
    [left, right, false],
    [right + 1, last, true],
  ];
  return zones.filter(([from, to]) => from <= to);
}
