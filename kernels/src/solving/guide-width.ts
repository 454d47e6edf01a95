/** Frequencies of an E-plane part in its guide. */
import { C0 } from "../lattice/index.js";
import type { FillMedium, ResolvedScene } from "../scene/index.js";
import { isPerfect } from "../scene/index.js";

const isLossless = ({ conductivity, magneticLoss, electricPoles, magneticPoles }: FillMedium): boolean =>
  conductivity === 0 && magneticLoss === 0 && electricPoles.length === 0 && magneticPoles.length === 0;

/** ε_r·μ_r of the one lossless fill of the section; null where there are several, lossy ones or films. */
function onlyFill({ background, paint, mediaById }: ResolvedScene): number | null {
  if (paint.some(({ kind }) => kind === "film")) return null;
  const ids = new Set([background, ...paint.flatMap((patch) => ("medium" in patch ? [patch.medium] : []))]);
  const fills = [...ids].flatMap((id) => {
    const medium = mediaById.get(id);
    return medium && !isPerfect(medium) ? [medium] : [];
  });
  const first = fills.at(0);
  const alike = ({ relativePermittivity, relativePermeability }: FillMedium): boolean =>
    relativePermittivity === first?.relativePermittivity &&
    relativePermeability === first.relativePermeability;
  if (!first || !fills.every((fill) => isLossless(fill) && alike(fill))) return null;
  return first.relativePermittivity * first.relativePermeability;
}

export const SEVERAL_FILLS =
  "The guide's frequencies are not given: a section's figures hold at √(f² + f_c²) only where one lossless medium fills it.";

/**
 * Where in a guide of width a the figures of its E-plane section hold: f = √(f₂D² + f_c²), f_c = c/(2a√(ε_rμ_r)), exact for metal and one
 * fill uniform across the width, since the fields vary as sin(πx/a) there and λ becomes λ_g (N. Marcuvitz, Waveguide Handbook, 1951,
 * ch. 6 on E-plane parts; from memory). Undefined where the scene is no such part, null where it has no single lossless fill.
 */
export function guideFrequencies(
  scene: ResolvedScene,
  frequenciesGHz: readonly number[],
): number[] | null | undefined {
  const { outOfPlane } = scene;
  if (outOfPlane.kind !== "guide-width") return undefined;
  const fill = onlyFill(scene);
  if (fill === null) return null;
  const cutoffGHz = C0 / (2 * (outOfPlane.mm / 1000) * Math.sqrt(fill)) / 1e9;
  return frequenciesGHz.map((frequency) => Math.hypot(frequency, cutoffGHz));
}
