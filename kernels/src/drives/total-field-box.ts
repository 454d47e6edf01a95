/**
 * The closed line within which a plane wave is part of the field: inside, F and G are total, outside they are scattered. What a
 * difference across the line lacks of the incident wave is a drive (see `DrivePoint`): on gx and gy just outside the incident F
 * of the box's outermost points, on those points of F the incident gx or gy just outside.
 */
import type { Lattice } from "../lattice/index.js";
import {
  cellOfColumn,
  cellOfRow,
  firstColumn,
  firstRow,
  sectionColumns,
  sectionRows,
} from "../lattice/index.js";
import type { DrivePoint } from "../stepping/index.js";
import type { WavePlace } from "./plane-wave.js";
import type { WaveField } from "./wave-filters.js";

/** F's outermost points of the total field. */
export interface TotalFieldBox {
  left: number;
  right: number;
  bottom: number;
  top: number;
}

/** Points this close to the inset (in cells) lie within the box. */
const ON_LINE = 1e-6;
/** Distances along the wave that agree to this share of a cell share a signal. */
const SAME_PLACE = 1e-7;

/**
 * The box `insetMm` inside the section, a cell at the least, so that its drives lie outside the absorbing layers. Throws a RangeError
 * where no point lies in it.
 */
export function totalFieldBox(lattice: Lattice, insetMm: number): TotalFieldBox {
  const range = (
    first: number,
    count: number,
    position: (index: number) => number,
    cells: number,
    cellMm: number,
  ): [number, number] => {
    const inset = insetMm / cellMm;
    let from = first + 1;
    let to = first + count - 2;
    while (from <= to && position(from) < inset - ON_LINE) from += 1;
    while (to >= from && position(to) > cells - inset + ON_LINE) to -= 1;
    if (from > to)
      throw new RangeError(`The box of a plane wave, ${insetMm} mm inside, holds no field point.`);
    return [from, to];
  };
  const [left, right] = range(
    firstColumn(lattice),
    sectionColumns(lattice),
    (i) => cellOfColumn(lattice, i),
    lattice.nx,
    lattice.dx * 1000,
  );
  const [bottom, top] = range(
    firstRow(lattice),
    sectionRows(lattice),
    (j) => cellOfRow(lattice, j),
    lattice.ny,
    lattice.dy * 1000,
  );
  return { left, right, bottom, top };
}

/**
 * Drives of a plane wave that travels at `angle` radians from +x, and the places of its signals.
 *
 * @param firstSignal index of the first of them among a step's signals
 */
export function planeWavePoints(
  lattice: Lattice,
  box: TotalFieldBox,
  angle: number,
  firstSignal: number,
): { points: DrivePoint[]; places: WavePlace[] } {
  const { dx, dy } = lattice;
  const [cosine, sine] = [Math.cos(angle), Math.sin(angle)];
  const points: DrivePoint[] = [];
  const places: WavePlace[] = [];
  const known = new Map<string, number>();
  const scale = 1 / (SAME_PLACE * Math.min(dx, dy));
  const signalAt = (field: WaveField, column: number, row: number): number => {
    const x = (cellOfColumn(lattice, column) + (field === "gy" ? 0.5 : 0)) * dx;
    const y = (cellOfRow(lattice, row) + (field === "gx" ? 0.5 : 0)) * dy;
    const distance = x * cosine + y * sine;
    const key = `${field} ${Math.round(distance * scale)}`;
    const signal = known.get(key) ?? firstSignal + places.length;
    if (!known.has(key)) {
      known.set(key, signal);
      places.push({ field, distance });
    }
    return signal;
  };
  /** G just outside lacks the incident F of the point; the point lacks the incident G just outside. */
  const across = (field: "gx" | "gy", at: [number, number], of: [number, number], weight: 1 | -1): void => {
    const [column, row] = at;
    points.push({ field, column, row, weight, signal: signalAt("f", of[0], of[1]) });
  };
  const onF = (field: "gx" | "gy", at: [number, number], of: [number, number], weight: 1 | -1): void => {
    points.push({ column: of[0], row: of[1], weight, signal: signalAt(field, at[0], at[1]) });
  };
  const { left, right, bottom, top } = box;
  for (let row = bottom; row <= top; row += 1) {
    across("gy", [left - 1, row], [left, row], 1);
    onF("gy", [left - 1, row], [left, row], 1);
    across("gy", [right, row], [right, row], -1);
    onF("gy", [right, row], [right, row], -1);
  }
  for (let column = left; column <= right; column += 1) {
    across("gx", [column, bottom - 1], [column, bottom], -1);
    onF("gx", [column, bottom - 1], [column, bottom], -1);
    across("gx", [column, top], [column, top], 1);
    onF("gx", [column, top], [column, top], 1);
  }
  return { points, places };
}
