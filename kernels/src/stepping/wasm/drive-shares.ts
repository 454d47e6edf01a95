/**
 * Drives as the kernel knows them: after a row's step, `factor·signal` is taken off single numbers of that row. A drive on gx or gy
 * comes before F in a step, so F's answer is taken along: F += bF·((gy − gy[left]) − gx …) is linear in both.
 */
import type { AbsorbingLayers, AxisStretch } from "../../boundaries/index.js";
import type { Lattice } from "../../lattice/index.js";
import type { DrivePoint, Engine, EngineField } from "../engine.js";
import { rowCoefficients } from "../engine.js";

export interface DriveShare {
  field: EngineField;
  row: number;
  column: number;
  signal: number;
  factor: number;
}

/** @param sorted drives by rising rows */
export function driveShares(
  engine: Pick<Engine, "lattice" | "readCoefficients">,
  sorted: readonly DrivePoint[],
): DriveShare[] {
  const shares: DriveShare[] = [];
  const row = rowCoefficients(engine.lattice.stride);
  let read = -1;
  for (const drive of sorted) {
    if (drive.row !== read) engine.readCoefficients(drive.row, row);
    read = drive.row;
    const { column, weight, signal } = drive;
    const add = (field: EngineField, at: number, factor: number): void => {
      if (factor !== 0) shares.push({ field, row: read, column: at, signal, factor });
    };
    if (drive.field === "gx") {
      const taken = row.bGx[column] * weight;
      add("gx", column, taken);
      add("f", column, -row.bF[column] * taken);
    } else if (drive.field === "gy") {
      const taken = row.bGy[column] * weight;
      add("gy", column, taken);
      add("f", column, row.bF[column] * taken);
      add("f", column + 1, -row.bF[column + 1] * taken);
    } else add("f", column, row.bF[column] * weight);
  }
  return shares;
}

/** Throws a RangeError for a point outside the lattice. */
export function checkOnLattice(
  points: readonly { row: number; column: number }[],
  { rows, columns }: Lattice,
): void {
  for (const { row, column } of points) {
    if (!(row >= 0 && row <= rows + 1 && column >= 0 && column <= columns + 1)) {
      throw new RangeError(
        `Row ${row}, column ${column} lies outside the lattice of ${rows} rows, ${columns} columns.`,
      );
    }
  }
}

const holds = (stretch: AxisStretch, index: number): boolean =>
  stretch.ranges.some(([first, last]) => index >= first && index <= last);

/** Throws a RangeError for a drive on gx or gy whose F is in an absorbing layer: its memory would not feel the drive. */
export function checkOutsideLayers(drives: readonly DrivePoint[], layers: AbsorbingLayers): void {
  for (const { field, row, column } of drives) {
    if (field === undefined || field === "f") continue;
    const inside =
      holds(layers.rowsF, row) ||
      holds(layers.columnsF, column) ||
      (field === "gy" && holds(layers.columnsF, column + 1));
    if (inside)
      throw new RangeError(
        `A drive on ${field} lies in an absorbing layer, at row ${row}, column ${column}.`,
      );
  }
}
