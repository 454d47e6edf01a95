/** How far the numbers of a run can be trusted: computed from its mesh and its end, never assumed. */
import { C0, worstDispersionError } from "../lattice/index.js";
import type { ResolvedScene, SolveResult } from "../scene/index.js";
import { cellsPerWavelength, shortestWavelengthMm } from "../scene/index.js";
import type { Engine } from "../stepping/index.js";
import type { GridSummary } from "./session.js";

export interface QualityInput {
  resolved: ResolvedScene;
  engine: Engine;
  grid: GridSummary;
  energy: number;
  energyMax: number;
  warnings: readonly string[];
}

export function qualityOf(input: QualityInput): SolveResult["quality"] {
  const { resolved, engine, grid, energy, energyMax } = input;
  const { lattice } = engine;
  const hz = resolved.band.toGHz * 1e9;
  // The slowest counted medium is the one of the shortest wavelength, λ·f.
  const speed = Math.min(C0, (shortestWavelengthMm(resolved) / 1000) * hz);
  const dispersion = worstDispersionError(lattice, speed, 2 * Math.PI * hz);
  const warnings = [...input.warnings];
  const absorbing = Object.values(resolved.edges).includes("absorbing");
  if (absorbing) {
    warnings.push(
      "The reflection of the absorbing edges was not measured in this run; kernels/ACCURACY.md states it for this layer.",
    );
  }
  if (Number.isNaN(dispersion)) {
    warnings.push(
      "The mesh is too coarse to carry the band's upper edge in the slowest medium in every direction.",
    );
  }
  return {
    cellsPerWavelength: cellsPerWavelength(resolved, grid),
    dispersionError: Number.isNaN(dispersion) ? 1 : dispersion,
    boundaryReflectionDb: null,
    energyLeft: energyMax > 0 ? energy / energyMax : null,
    warnings,
  };
}
