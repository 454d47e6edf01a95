/** A z-directed line current, spread bilinearly over the nearest points of F of the section. */
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
import { bilinear } from "./spreading.js";

/**
 * @param xMm position in the section
 * @param signal index of the source's current among a step's signals
 */
export function lineSourcePoints(lattice: Lattice, xMm: number, yMm: number, signal: number): DrivePoint[] {
  const left = firstColumn(lattice);
  const bottom = firstRow(lattice);
  const columns = {
    origin: cellOfColumn(lattice, 0),
    first: left,
    last: left + sectionColumns(lattice) - 1,
  };
  const rows = { origin: cellOfRow(lattice, 0), first: bottom, last: bottom + sectionRows(lattice) - 1 };
  const x = xMm / 1000 / lattice.dx;
  const y = yMm / 1000 / lattice.dy;
  return bilinear(columns, rows, x, y).map((share) => ({ ...share, signal }));
}
