/** The field points of a rectangle of the section, each with the share of its cell that lies in it. */
import type { Lattice } from "../lattice/index.js";
import {
  cellOfColumn,
  cellOfRow,
  firstColumn,
  firstRow,
  sectionColumns,
  sectionRows,
} from "../lattice/index.js";
import { halfStorage, lossOf } from "../media/index.js";
import type { Engine, EngineField } from "../stepping/index.js";
import { rowCoefficients } from "../stepping/index.js";

export interface AreaBox {
  /** mm, in the section. */
  x: number;
  y: number;
  width: number;
  height: number;
}

export interface AreaPoints {
  field: EngineField;
  indices: Int32Array;
  /** Share of the point's cell (as far as it lies in the section or its layers) within the rectangle. */
  shares: Float64Array;
  /** By point, of the share: power is loss·v², energy storage·v². */
  loss: Float64Array;
  storage: Float64Array;
}

interface Axis {
  first: number;
  shares: number[];
}

/** Points of one axis whose cell, of one unit about `position(n)`, overlaps [low, high] cells. */
function axisOf(
  first: number,
  last: number,
  position: (n: number) => number,
  range: [number, number],
  limits: [number, number],
): Axis {
  const shares: number[] = [];
  for (let n = first; n <= last; n += 1) {
    const from = Math.max(limits[0], position(n) - 0.5);
    const to = Math.min(limits[1], position(n) + 0.5);
    const overlap = Math.min(range[1], to) - Math.max(range[0], from);
    shares.push(to > from ? Math.max(0, overlap) / (to - from) : 0);
  }
  return { first, shares };
}

/** The cells of an axis that fields can be in: as far as the section, and on without end where it is absorbing. */
const limitsOf = (cells: number, low: string, high: string): [number, number] => [
  low === "absorbing" ? Number.NEGATIVE_INFINITY : 0,
  high === "absorbing" ? Number.POSITIVE_INFINITY : cells,
];

/** The points of F, gx and gy in a rectangle, with the figures of the engine's coefficients as they are now. */
export function areaPoints(engine: Engine, box: AreaBox): AreaPoints[] {
  const { lattice } = engine;
  const { dx, dy, nx, ny, edges, stride, dt } = lattice;
  const xs: [number, number] = [box.x / 1000 / dx, (box.x + box.width) / 1000 / dx];
  const ys: [number, number] = [box.y / 1000 / dy, (box.y + box.height) / 1000 / dy];
  const columnLimits = limitsOf(nx, edges.left, edges.right);
  const rowLimits = limitsOf(ny, edges.bottom, edges.top);
  const left = firstColumn(lattice);
  const right = left + sectionColumns(lattice) - 1;
  const bottom = firstRow(lattice);
  const top = bottom + sectionRows(lattice) - 1;
  const columns = (shift: number): Axis =>
    axisOf(left - 1, right, (i) => cellOfColumn(lattice, i) + shift, xs, columnLimits);
  const rows = (shift: number): Axis =>
    axisOf(bottom - 1, top, (j) => cellOfRow(lattice, j) + shift, ys, rowLimits);
  const axes: Readonly<Record<EngineField, [Axis, Axis]>> = {
    f: [columns(0), rows(0)],
    gx: [columns(0), rows(0.5)],
    gy: [columns(0.5), rows(0)],
  };
  const row = rowCoefficients(stride);
  const found = { f: collector(), gx: collector(), gy: collector() };
  for (let j = bottom - 1; j <= top; j += 1) {
    const fields = (["f", "gx", "gy"] as const).filter((field) => axes[field][1].shares[j - bottom + 1] > 0);
    if (fields.length === 0) continue;
    engine.readCoefficients(j, row);
    for (const field of fields) {
      const [across, along] = axes[field];
      const a = { f: row.aF, gx: row.aGx, gy: row.aGy }[field];
      const b = { f: row.bF, gx: row.bGx, gy: row.bGy }[field];
      for (let n = 0; n < across.shares.length; n += 1) {
        const share = across.shares[n] * along.shares[j - along.first];
        const i = across.first + n;
        if (share === 0 || b[i] === 0) continue;
        const { indices, shares, loss, storage } = found[field];
        indices.push(j * stride + i);
        shares.push(share);
        loss.push(share * lossOf(a[i], b[i]));
        storage.push(share * halfStorage(a[i], b[i], dt));
      }
    }
  }
  return (["f", "gx", "gy"] as const).map((field) => ({
    field,
    indices: Int32Array.from(found[field].indices),
    shares: Float64Array.from(found[field].shares),
    loss: Float64Array.from(found[field].loss),
    storage: Float64Array.from(found[field].storage),
  }));
}

const collector = (): Record<"indices" | "shares" | "loss" | "storage", number[]> => ({
  indices: [],
  shares: [],
  loss: [],
  storage: [],
});

/** Those points for which `wanted` holds. */
export function pointsWhere(points: AreaPoints, wanted: (n: number) => boolean): AreaPoints {
  const chosen = Array.from(points.indices.keys()).filter(wanted);
  const of = (values: Float64Array): Float64Array => Float64Array.from(chosen, (n) => values[n]);
  return {
    field: points.field,
    indices: Int32Array.from(chosen, (n) => points.indices[n]),
    shares: of(points.shares),
    loss: of(points.loss),
    storage: of(points.storage),
  };
}

/** Whether a field is E in this lattice. */
export const isElectric = (lattice: Lattice, field: EngineField): boolean =>
  (field === "f") === (lattice.polarization === "TMz");
