/** Figures of media that meshes and warnings need: complex ε and μ, wavelength, loss tangent, skin depth. */
import type { FillMedium, Pole } from "./schema-media.js";

/** m/s, exact. */
export const SPEED_OF_LIGHT = 299_792_458;
/** H/m. CODATA 2018, as in the solver's own constants. */
export const VACUUM_PERMEABILITY = 1.25663706212e-6;
/** F/m, from c and μ₀. */
export const VACUUM_PERMITTIVITY = 1 / (VACUUM_PERMEABILITY * SPEED_OF_LIGHT ** 2);

/** A complex number; with exp(+jωt) a passive medium has im ≤ 0. */
export interface Complex {
  re: number;
  im: number;
}

/** χ of one pole at f. */
export const susceptibility = (pole: Pole, frequencyGHz: number): Complex => {
  if (pole.kind === "debye") {
    const wt = 2 * Math.PI * frequencyGHz * pole.tauNs;
    const scale = pole.delta / (1 + wt * wt);
    return { re: scale, im: -scale * wt };
  }
  // Δω₀²/(ω₀² − ω² + jωδ): the 2π of all three frequencies cancels.
  const re = pole.resonanceGHz ** 2 - frequencyGHz ** 2;
  const im = frequencyGHz * pole.dampingGHz;
  const scale = (pole.delta * pole.resonanceGHz ** 2) / (re * re + im * im);
  return { re: scale * re, im: -scale * im };
};

const sum = (constant: number, loss: number, poles: readonly Pole[], frequencyGHz: number): Complex =>
  poles
    .map((pole) => susceptibility(pole, frequencyGHz))
    .reduce((total, chi) => ({ re: total.re + chi.re, im: total.im + chi.im }), { re: constant, im: -loss });

/** ε/ε₀ at f, with σ and the electric poles. */
export const complexPermittivity = (medium: FillMedium, frequencyGHz: number): Complex =>
  sum(
    medium.relativePermittivity,
    medium.conductivity / (2 * Math.PI * frequencyGHz * 1e9 * VACUUM_PERMITTIVITY),
    medium.electricPoles,
    frequencyGHz,
  );

/** μ/μ₀ at f, with σ* and the magnetic poles. */
export const complexPermeability = (medium: FillMedium, frequencyGHz: number): Complex =>
  sum(
    medium.relativePermeability,
    medium.magneticLoss / (2 * Math.PI * frequencyGHz * 1e9 * VACUUM_PERMEABILITY),
    medium.magneticPoles,
    frequencyGHz,
  );

/** The larger of the electric and the magnetic loss tangent at f. */
export const lossTangent = (medium: FillMedium, frequencyGHz: number): number => {
  const tangent = ({ re, im }: Complex): number => (re > 0 ? -im / re : Number.POSITIVE_INFINITY);
  return Math.max(
    tangent(complexPermittivity(medium, frequencyGHz)),
    tangent(complexPermeability(medium, frequencyGHz)),
  );
};

export interface Propagation {
  /** Phase constant over ω/c. */
  phase: number;
  /** Attenuation constant over ω/c. */
  attenuation: number;
}

/** √(εμ) = phase − j·attenuation, on the branch that decays. */
export const propagation = (medium: FillMedium, frequencyGHz: number): Propagation => {
  const e = complexPermittivity(medium, frequencyGHz);
  const m = complexPermeability(medium, frequencyGHz);
  const re = e.re * m.re - e.im * m.im;
  const im = e.re * m.im + e.im * m.re;
  const magnitude = Math.hypot(re, im);
  return {
    phase: Math.sqrt(Math.max(0, (magnitude + re) / 2)),
    attenuation: Math.sqrt(Math.max(0, (magnitude - re) / 2)),
  };
};

/** mm; the wavelength 2π/β of a plane wave in the medium. */
export const wavelengthMm = (medium: FillMedium, frequencyGHz: number): number =>
  (SPEED_OF_LIGHT * 1e-6) / (frequencyGHz * propagation(medium, frequencyGHz).phase);

/** mm; the depth 1/α at which a plane wave has fallen to 1/e. */
export const skinDepthMm = (medium: FillMedium, frequencyGHz: number): number =>
  (SPEED_OF_LIGHT * 1e-6) / (2 * Math.PI * frequencyGHz * propagation(medium, frequencyGHz).attenuation);
