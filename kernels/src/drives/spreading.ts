/** Points between field points: bilinear weights, for sources and for probes. */
export interface LatticeShare {
  column: number;
  row: number;
  weight: number;
}

/** An axis of field points: point n lies at `origin + n` cells; only `first` … `last` may be used. */
export interface PointAxis {
  origin: number;
  first: number;
  last: number;
}

/** Points within this of a field point (in cells) are taken to lie on it: rounding adds no neighbours. */
const ON_POINT = 1e-9;

/** The one or two points around a position in cells; beyond the ends the last point alone. */
function along(axis: PointAxis, position: number): { index: number; weight: number }[] {
  const at = Math.min(axis.last, Math.max(axis.first, position - axis.origin));
  const low = Math.floor(at + ON_POINT);
  const share = at - low;
  if (share < ON_POINT) return [{ index: low, weight: 1 }];
  return [
    { index: low, weight: 1 - share },
    { index: low + 1, weight: share },
  ];
}

/** The up to four points around (x, y) in cells, with weights that sum to 1; lower row first. */
export function bilinear(columns: PointAxis, rows: PointAxis, x: number, y: number): LatticeShare[] {
  return along(rows, y).flatMap((row) =>
    along(columns, x).map((column) => ({
      row: row.index,
      column: column.index,
      weight: row.weight * column.weight,
    })),
  );
}
