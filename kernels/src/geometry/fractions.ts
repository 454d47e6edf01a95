/** Material shares for a picture of the mesh: what the editor's preview draws. */
import { CoverageSweep } from "./coverage.js";
import type { PaintedArea, Raster } from "./edge-table.js";

/**
 * Share (0…1) of one medium in every raster cell, row-major from the lower-left corner. Exact as `CoverageSweep` is.
 *
 * @param medium index as used in `areas` and `background`
 */
export function materialFraction(
  areas: readonly PaintedArea[],
  background: number,
  raster: Raster,
  medium: number,
): Float32Array {
  const fractions = new Float32Array(raster.columns * raster.rows);
  const sweep = new CoverageSweep(areas, background, raster);
  for (let r = 0; r < raster.rows; r += 1) {
    const row = sweep.row(r);
    for (let cell = 0; cell < raster.columns; cell += 1) {
      const only = row.medium[cell];
      const share =
        only >= 0
          ? Number(only === medium)
          : (row.shares(cell).find((entry) => entry.medium === medium)?.share ?? 0);
      fractions[r * raster.columns + cell] = share;
    }
  }
  return fractions;
}
