/**
 * How a medium is hatched: strokes falling to the right for electric loss, rising to the right for magnetic loss,
 * closer for more. Losses are put on one scale by duality (σ against σ*·ε₀/μ₀), so that a matched absorber shows as
 * an even cross-hatch; a pole counts with the conductivity it comes to where its loss is largest.
 */
import type { FillMedium, Medium, Pole } from "@heddle/kernels/scene";
import { isPerfect } from "@heddle/kernels/scene";

const EPSILON_0 = 8.8541878188e-12;
const MU_0 = 1.25663706127e-6;
/** Spacing in px of the weakest and the strongest loss drawn. */
const WIDEST_PX = 9;
const CLOSEST_PX = 3;
/** Decades of S/m between them. */
const WEAKEST = 1e-4;
const STRONGEST = 1e2;

export interface Hatch {
  /** Cut metal: 45° strokes over a tint. A perfect magnetic conductor is its mirror image. */
  perfect: "electric" | "magnetic" | null;
  /** Spacing in px of strokes falling to the right; null without electric loss. */
  fallingPx: number | null;
  /** Spacing in px of strokes rising to the right; null without magnetic loss. */
  risingPx: number | null;
  /** Strength 0…1 of the flat tint by relative permittivity and permeability; 0 is vacuum. */
  tint: number;
}

/** χ″·ω where it is largest, over 2π·10⁹ for Lorentz frequencies: a rate that multiplies ε₀ or μ₀ to a loss. */
const poleRate = (pole: Pole): number => {
  if (pole.kind === "debye") return pole.delta / (pole.tauNs * 1e-9);
  const damping = Math.max(pole.dampingGHz, pole.resonanceGHz * 1e-3);
  return (2 * Math.PI * 1e9 * pole.delta * pole.resonanceGHz ** 2) / damping;
};

const spacing = (siemensPerMetre: number): number | null => {
  if (!(siemensPerMetre > 0)) return null;
  const share = Math.log(siemensPerMetre / WEAKEST) / Math.log(STRONGEST / WEAKEST);
  return WIDEST_PX - (WIDEST_PX - CLOSEST_PX) * Math.min(1, Math.max(0, share));
};

const rateOf = (poles: readonly Pole[]): number => poles.reduce((sum, pole) => sum + poleRate(pole), 0);

const tintOf = (medium: FillMedium): number => {
  const index = Math.sqrt(medium.relativePermittivity * medium.relativePermeability);
  return Math.min(1, Math.log(index) / Math.log(8));
};

export function hatchOf(medium: Medium): Hatch {
  if (isPerfect(medium)) return { perfect: medium.perfect, fallingPx: null, risingPx: null, tint: 1 };
  return {
    perfect: null,
    fallingPx: spacing(medium.conductivity + EPSILON_0 * rateOf(medium.electricPoles)),
    risingPx: spacing(((medium.magneticLoss + MU_0 * rateOf(medium.magneticPoles)) * EPSILON_0) / MU_0),
    tint: tintOf(medium),
  };
}
