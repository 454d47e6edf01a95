/** A field component at a point, bilinear between its own field points, at its own sample times. */
import { bilinear } from "../drives/index.js";
import type { Lattice } from "../lattice/index.js";
import {
  cellOfColumn,
  cellOfRow,
  columnShare,
  firstColumn,
  firstRow,
  rowShare,
  sectionColumns,
  sectionRows,
} from "../lattice/index.js";
import type { EngineField, Tap } from "../stepping/index.js";

export type Component = "Ez" | "Hx" | "Hy" | "Hz" | "Ex" | "Ey";

/** Where a component is kept in the engine's arrays; null where the polarization does not have it. */
export function engineFieldOf(
  lattice: Lattice,
  component: Component,
): { field: EngineField; sign: 1 | -1 } | null {
  if (lattice.polarization === "TMz") {
    if (component === "Ez") return { field: "f", sign: 1 };
    if (component === "Hx") return { field: "gx", sign: 1 };
    if (component === "Hy") return { field: "gy", sign: 1 };
    return null;
  }
  if (component === "Hz") return { field: "f", sign: 1 };
  if (component === "Ex") return { field: "gx", sign: -1 };
  if (component === "Ey") return { field: "gy", sign: -1 };
  return null;
}

/** Time of the first sample over Δt: F is recorded at Δt, 2Δt, …, G at ½Δt, 1½Δt, …. */
export const firstSampleStep = (field: EngineField): number => (field === "f" ? 1 : 0.5);

export const unitOf = (component: Component): string => (component.startsWith("E") ? "V/m" : "A/m");

/** Taps of a point probe. Throws a RangeError for a component that the polarization does not have. */
export function pointProbeTaps(
  lattice: Lattice,
  component: Component,
  xMm: number,
  yMm: number,
  record: number,
): Tap[] {
  const place = engineFieldOf(lattice, component);
  if (!place) throw new RangeError(`${lattice.polarization} has no ${component}.`);
  const { field, sign } = place;
  const left = firstColumn(lattice);
  const bottom = firstRow(lattice);
  const right = left + sectionColumns(lattice) - 1;
  const top = bottom + sectionRows(lattice) - 1;
  const onNodes = lattice.polarization === "TMz";
  // gy lies half a cell right of F, gx half a cell above; on nodes there is one fewer, on centres one more on the walls.
  const columns =
    field === "gy"
      ? {
          origin: cellOfColumn(lattice, 0) + 0.5,
          first: onNodes ? left : left - 1,
          last: onNodes ? right - 1 : right,
        }
      : { origin: cellOfColumn(lattice, 0), first: left, last: right };
  const rows =
    field === "gx"
      ? {
          origin: cellOfRow(lattice, 0) + 0.5,
          first: onNodes ? bottom : bottom - 1,
          last: onNodes ? top - 1 : top,
        }
      : { origin: cellOfRow(lattice, 0), first: bottom, last: top };
  const shares = bilinear(columns, rows, xMm / 1000 / lattice.dx, yMm / 1000 / lattice.dy);
  return shares.map(({ row, column, weight }) => {
    const length =
      field === "gx"
        ? lattice.dx * columnShare(lattice, column)
        : field === "gy"
          ? lattice.dy * rowShare(lattice, row)
          : 1;
    return { row, column, field, weight: (sign * weight) / length, record };
  });
}
