/** How far the numbers of a run can be trusted: computed from its mesh and its end, never assumed. */
import { layerReflectionDb } from "../boundaries/index.js";
import type { Lattice } from "../lattice/index.js";
import { C0, SIDES, worstDispersionError } from "../lattice/index.js";
import type { ResolvedScene, SolveResult } from "../scene/index.js";
import { COURANT, cellsPerWavelength, hasPoles, isPerfect, shortestWavelengthMm } from "../scene/index.js";
import { layersOf } from "./plan.js";
import type { GridSummary } from "./session.js";

export interface QualityInput {
  resolved: ResolvedScene;
  lattice: Lattice;
  grid: GridSummary;
  energy: number;
  energyMax: number;
  warnings: readonly string[];
}

/** Waves are taken to meet the edges at up to this angle from their normal. */
const REFLECTION_DEGREES = [0, 15, 30, 45];

/**
 * The worst reflection of the absorbing edges for plane waves of the background up to 45° from normal, at the band's edges and
 * middle, from the layers' own coefficients; null where there is no such edge or the background is lossy or dispersive.
 */
function boundaryReflectionDb(input: QualityInput): number | null {
  const { resolved, lattice } = input;
  const sides = SIDES.filter((side) => lattice.edges[side] === "absorbing");
  const background = resolved.mediaById.get(resolved.background);
  if (sides.length === 0 || !background || isPerfect(background)) return null;
  if (background.conductivity > 0 || background.magneticLoss > 0 || hasPoles(background)) return null;
  const index = Math.sqrt(background.relativePermittivity * background.relativePermeability);
  const layers = layersOf(resolved, lattice);
  const { fromGHz, toGHz } = resolved.band;
  const values = sides.flatMap((side) =>
    [fromGHz, (fromGHz + toGHz) / 2, toGHz].flatMap((frequency) =>
      REFLECTION_DEGREES.map((degrees) =>
        layerReflectionDb(lattice, layers, { side, hz: frequency * 1e9, degrees, index }),
      ),
    ),
  );
  const worst = Math.max(...values);
  return Number.isFinite(worst) ? worst : null;
}

export function qualityOf(input: QualityInput): SolveResult["quality"] {
  const { resolved, lattice, grid, energy, energyMax } = input;
  const hz = resolved.band.toGHz * 1e9;
  // The slowest counted medium is the one of the shortest wavelength, λ·f.
  const speed = Math.min(C0, (shortestWavelengthMm(resolved) / 1000) * hz);
  const dispersion = worstDispersionError(lattice, speed, 2 * Math.PI * hz);
  const warnings = [...input.warnings];
  if (grid.courant < COURANT) {
    warnings.push(
      `The time step is ${grid.courant} of the stability limit in place of ${COURANT}, because metal cuts cells off the mesh lines.`,
    );
  }
  const reflection = boundaryReflectionDb(input);
  if (reflection === null && SIDES.some((side) => lattice.edges[side] === "absorbing")) {
    warnings.push(
      "The reflection of the absorbing edges is not stated: it is computed for a lossless background without poles only.",
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
    boundaryReflectionDb: reflection,
    energyLeft: energyMax > 0 ? energy / energyMax : null,
    warnings,
  };
}
