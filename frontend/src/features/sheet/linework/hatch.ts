import {
  complexPermeability,
  complexPermittivity,
  type FillMedium,
  isPerfect,
  type Medium,
  VACUUM_PERMEABILITY,
  VACUUM_PERMITTIVITY,
} from "@heddle/kernels/scene";

/** One family of parallel 45° strokes. `falling` runs down to the right, `rising` up to the right. */
export interface Strokes {
  direction: "falling" | "rising";
  /** CSS pixels between strokes, measured across them. */
  spacingPx: number;
  /** Drawn in pairs: a perfect magnetic conductor. */
  paired: boolean;
}

/** How an area of a medium is drawn. */
export interface Hatching {
  /** Hides what lies below: perfect conductors do, for there is no field in them. */
  opaque: boolean;
  /** Share of ink mixed into the ground: cut metal, or a dielectric by its εr. */
  tint: number;
  /** Share of the sheet's colour laid over the field so that strokes stay readable. */
  wash: number;
  strokes: Strokes[];
  /** Pixels of the outline. */
  outlinePx: number;
}

export const HATCH = {
  metalSpacingPx: 5,
  weakSpacingPx: 9,
  strongSpacingPx: 3,
  /** σ in S/m, or σ* over η₀², at which the spacing is widest and narrowest. */
  weakest: 1e-4,
  strongest: 1e2,
  /** σ/ε and σ* /μ within this share of each other count as matched. */
  matchedWithin: 0.05,
  metalOutlinePx: 1.3,
  outlinePx: 1,
} as const;

/** η₀² in Ω²: σ* divided by it is the σ that loses as much in vacuum, since the rates σ/ε₀ and (σ*)/μ₀ are then equal. */
const IMPEDANCE_SQUARED = VACUUM_PERMEABILITY / VACUUM_PERMITTIVITY;

/** Spacing across the strokes in CSS pixels, on a log scale of σ (S/m) from 9 px, weak, to 3 px, strong. */
export function spacingOf(sigma: number): number {
  const { weakest, strongest, weakSpacingPx, strongSpacingPx } = HATCH;
  const share = Math.log(sigma / weakest) / Math.log(strongest / weakest);
  return weakSpacingPx + (strongSpacingPx - weakSpacingPx) * Math.min(1, Math.max(0, share));
}

export interface Losses {
  /** σ that gives the medium's electric loss at the frequency, poles included, in S/m. */
  sigma: number;
  /** σ* that gives its magnetic loss, in Ω/m. */
  sigmaStar: number;
  /** σ/ε = σ* /μ: waves enter without reflection. */
  matched: boolean;
}

/** Effective losses at `GHz`: σ = ωε₀ε″ and σ* = ωμ₀μ″, which are the constants themselves where there are no poles. */
export function lossesOf(medium: FillMedium, GHz: number): Losses {
  const omega = 2 * Math.PI * GHz * 1e9;
  const epsilon = complexPermittivity(medium, GHz);
  const mu = complexPermeability(medium, GHz);
  const sigma =
    medium.electricPoles.length === 0 ? medium.conductivity : -epsilon.im * omega * VACUUM_PERMITTIVITY;
  const sigmaStar =
    medium.magneticPoles.length === 0 ? medium.magneticLoss : -mu.im * omega * VACUUM_PERMEABILITY;
  const electric = sigma / (epsilon.re * VACUUM_PERMITTIVITY);
  const magnetic = sigmaStar / (mu.re * VACUUM_PERMEABILITY);
  const matched =
    electric > 0 && Math.abs(electric - magnetic) <= HATCH.matchedWithin * Math.max(electric, magnetic);
  return { sigma, sigmaStar, matched };
}

const stroke = (direction: Strokes["direction"], spacingPx: number, paired = false): Strokes => ({
  direction,
  spacingPx,
  paired,
});

/** Share of ink for a relative permittivity: none for air, a quarter from 30 on, on a log scale. */
export const tintOf = (relativePermittivity: number): number =>
  relativePermittivity <= 1 ? 0 : 0.05 + 0.2 * Math.min(1, Math.log(relativePermittivity) / Math.log(30));

/** How the medium is drawn at the middle of the band. Undefined: a medium the document does not have. */
export function hatchingOf(medium: Medium | undefined, GHz: number): Hatching {
  if (medium === undefined)
    return { opaque: false, tint: 0, wash: 0, strokes: [], outlinePx: HATCH.outlinePx };
  if (isPerfect(medium))
    return {
      opaque: true,
      tint: 0.14,
      wash: 0,
      strokes: [stroke("rising", HATCH.metalSpacingPx, medium.perfect === "magnetic")],
      outlinePx: HATCH.metalOutlinePx,
    };
  const { sigma, sigmaStar, matched } = lossesOf(medium, GHz);
  const electric = sigma;
  const magnetic = sigmaStar / IMPEDANCE_SQUARED;
  const strokes: Strokes[] = [];
  if (matched) {
    // An even cross-hatch says "matched" at a glance, whatever ε and μ make of the two figures.
    const spacing = spacingOf(Math.sqrt(electric * magnetic));
    strokes.push(stroke("falling", spacing), stroke("rising", spacing));
  } else {
    if (electric > 0) strokes.push(stroke("falling", spacingOf(electric)));
    if (magnetic > 0) strokes.push(stroke("rising", spacingOf(magnetic)));
  }
  const lossless = strokes.length === 0;
  return {
    opaque: false,
    tint: lossless ? tintOf(medium.relativePermittivity) : 0,
    // Enough paper over the field that a tint shows on its darkest lobes too.
    wash: lossless ? (medium.relativePermittivity > 1 ? 0.22 : 0) : 0.45,
    strokes,
    outlinePx: HATCH.outlinePx,
  };
}

/** The frequency at which losses with poles are drawn: the middle of the band. */
export const bandMiddleGHz = (band: { fromGHz: number; toGHz: number }): number =>
  (band.fromGHz + band.toGHz) / 2;
