/** Stored field energy of the section, from the fields and the coefficients alone. */
import { firstColumn, firstRow, sectionColumns, sectionRows } from "../lattice/index.js";
import { halfStorage } from "../media/index.js";
import type { Engine } from "../stepping/index.js";
import { rowCoefficients } from "../stepping/index.js";

/**
 * Joules per metre of height: ½ΣM·v² over the section, F at step·Δt and G half a step earlier. Of dispersive media it counts ε (μ) and what
 * answers at once, not what their poles hold; that decays with the field, so the sum tells when a run has died out.
 */
export function storedEnergy(engine: Engine): number {
  const { lattice } = engine;
  const left = firstColumn(lattice);
  const right = left + sectionColumns(lattice) - 1;
  const bottom = firstRow(lattice);
  const top = bottom + sectionRows(lattice) - 1;
  if (engine.energyOf) return engine.energyOf(bottom - 1, top, left - 1, right);
  const { f, gx, gy } = engine.fields;
  const row = rowCoefficients(lattice.stride);
  let energy = 0;
  for (let j = bottom - 1; j <= top; j += 1) {
    engine.readCoefficients(j, row);
    const base = j * lattice.stride;
    let sum = 0;
    for (let i = left - 1; i <= right; i += 1) {
      const k = base + i;
      sum += halfStorage(row.aGx[i], row.bGx[i], lattice.dt) * gx[k] * gx[k];
      sum += halfStorage(row.aGy[i], row.bGy[i], lattice.dt) * gy[k] * gy[k];
      sum += halfStorage(row.aF[i], row.bF[i], lattice.dt) * f[k] * f[k];
    }
    energy += sum;
  }
  return energy;
}
