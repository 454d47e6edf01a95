/** ndarray views of the padded arrays; no number is copied. Axis 0 is y (rows upward), axis 1 is x. */
import ndarray from "ndarray";
import type { NdArray } from "ndarray";
import type { Lattice } from "./lattice.js";
import { firstColumn, firstRow, sectionColumns, sectionRows } from "./lattice.js";

export type FieldArray = Float64Array | Float32Array;

/** F's points of the section: shape [ny + 1, nx + 1] (TMz) or [ny, nx] (TEz). */
export function sectionView<T extends FieldArray>(lattice: Lattice, values: T): NdArray<T> {
  const start = firstRow(lattice) * lattice.stride + firstColumn(lattice);
  return ndarray(values, [sectionRows(lattice), sectionColumns(lattice)], [lattice.stride, 1], start);
}

/** The whole array with its ring and padding: shape [rows + 2, stride]. */
export const paddedView = <T extends FieldArray>(lattice: Lattice, values: T): NdArray<T> =>
  ndarray(values, [lattice.rows + 2, lattice.stride]);
