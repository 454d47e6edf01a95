/**
 * What a medium means to a plane wave at one frequency: the figures that a designer compares before painting with it.
 *
 * With exp(+jωt), ε = ε′ − jε″ and μ = μ′ − jμ″ hold σ, σ* and the poles; a wave travels as exp(−jkx) with
 * k = (ω/c)√(ε_r μ_r) = β − jα, sees the impedance η = η₀√(μ_r/ε_r) and is reflected from a half-space of the medium,
 * coming from air at right angles, by Γ = (η − η₀)/(η + η₀).
 * Source: D. M. Pozar, Microwave Engineering, sections 1.4 and 1.5 (plane waves in lossy media and at a plane
 * interface); the magnetic loss enters by duality.
 */
import {
  complexPermeability,
  complexPermittivity,
  VACUUM_PERMEABILITY,
  VACUUM_PERMITTIVITY,
} from "../scene/media-figures.js";
import type { Complex } from "../scene/media-figures.js";
import type { FillMedium } from "../scene/schema-media.js";

const SPEED_MM_GHZ = 299.792_458;
/** Ω, of vacuum. */
const VACUUM_IMPEDANCE_OHM = Math.sqrt(VACUUM_PERMEABILITY / VACUUM_PERMITTIVITY);
const DB_PER_NEPER = 20 * Math.LOG10E;

export interface MediumFigures {
  /** ε_r at this frequency, conductivity and poles included; im ≤ 0. */
  permittivity: Complex;
  /** μ_r at this frequency, magnetic loss and poles included; im ≤ 0. */
  permeability: Complex;
  /** 1/α in mm: the depth at which the field has fallen to 1/e. Infinity without loss. */
  skinDepthMm: number;
  /** Attenuation of a plane wave. */
  attenuationDbPerMm: number;
  /** 2π/β. Infinity where the wave does not travel. */
  wavelengthMm: number;
  /** η in Ω. */
  impedanceOhm: Complex;
  /** 20·lg|Γ| at a half-space, from air, at right angles; −Infinity where nothing is reflected. */
  reflectionDb: number;
  /** ε″/ε′. */
  electricLossTangent: number;
  /** μ″/μ′. */
  magneticLossTangent: number;
  /**
   * (σ* over μ) over (σ over ε), all losses at f counted: 1 is matched (a real impedance, no reflection by loss),
   * 0 is loss by σ alone, Infinity by σ* alone; null without loss.
   */
  matchRatio: number | null;
  /** Ω/m; the σ* that would match this medium's electric losses. */
  matchedMagneticLoss: number;
}

/** √z on the branch with a non-negative real part; precise for a small imaginary part. */
function squareRoot({ re, im }: Complex): Complex {
  const magnitude = Math.hypot(re, im);
  if (magnitude === 0) return { re: 0, im: 0 };
  if (re >= 0) {
    const root = Math.sqrt((magnitude + re) / 2);
    return { re: root, im: im / (2 * root) };
  }
  const root = Math.sqrt((magnitude - re) / 2);
  return { re: Math.abs(im) / (2 * root), im: im > 0 ? root : -root };
}

const product = (a: Complex, b: Complex): Complex => ({
  re: a.re * b.re - a.im * b.im,
  im: a.re * b.im + a.im * b.re,
});

const quotient = (a: Complex, b: Complex): Complex => {
  const scale = b.re * b.re + b.im * b.im;
  return { re: (a.re * b.re + a.im * b.im) / scale, im: (a.im * b.re - a.re * b.im) / scale };
};

/**
 * The figures of a medium at a frequency.
 * @param frequencyGHz finite and above zero
 * @throws {RangeError} at a frequency that is not
 */
export function mediumFigures(medium: FillMedium, frequencyGHz: number): MediumFigures {
  if (!(frequencyGHz > 0 && Number.isFinite(frequencyGHz))) {
    throw new RangeError(`A frequency must be a number of GHz above zero, not ${frequencyGHz}.`);
  }
  const permittivity = complexPermittivity(medium, frequencyGHz);
  const permeability = complexPermeability(medium, frequencyGHz);
  // A passive medium's k lies in the fourth quadrant: im ≤ 0 (−0 counts) picks the branch that decays.
  const index = squareRoot(product(permittivity, permeability));
  const waveNumberPerMm = (2 * Math.PI * frequencyGHz) / SPEED_MM_GHZ;
  const attenuationPerMm = -index.im * waveNumberPerMm;
  const relativeImpedance = squareRoot(quotient(permeability, permittivity));
  const { re, im } = relativeImpedance;
  const electricLossTangent = -permittivity.im / permittivity.re;
  const magneticLossTangent = -permeability.im / permeability.re;
  const radPerSecond = 2 * Math.PI * frequencyGHz * 1e9;
  return {
    permittivity,
    permeability,
    skinDepthMm: attenuationPerMm > 0 ? 1 / attenuationPerMm : Number.POSITIVE_INFINITY,
    attenuationDbPerMm: attenuationPerMm > 0 ? attenuationPerMm * DB_PER_NEPER : 0,
    wavelengthMm: index.re > 0 ? SPEED_MM_GHZ / (frequencyGHz * index.re) : Number.POSITIVE_INFINITY,
    impedanceOhm: { re: re * VACUUM_IMPEDANCE_OHM, im: im * VACUUM_IMPEDANCE_OHM },
    reflectionDb: 10 * Math.log10(((re - 1) ** 2 + im * im) / ((re + 1) ** 2 + im * im)),
    electricLossTangent,
    magneticLossTangent,
    matchRatio:
      permittivity.im === 0 && permeability.im === 0 ? null : magneticLossTangent / electricLossTangent,
    matchedMagneticLoss: radPerSecond * VACUUM_PERMEABILITY * permeability.re * electricLossTangent,
  };
}
