/**
 * Forward and backward waves of a port's mode from two Fourier sums on the lattice: of ψ on the line and of γ half a step behind it.
 *
 * With z = exp(jωΔt) the guide's step (port-mode.ts) gives sin²(κ/2) = (4 sin²(ωΔt/2) − λ)/(4r) for waves exp(∓jκu), and
 *
 *   ψ = A + B,   γ·sin(ωΔt/2)/sin(κ/2) = −A·exp(jκ/2) + B·exp(−jκ/2),
 *
 * so that A and B are exact on the lattice. The power of A is ½·Σb_G·φ²·sin(κ)/(2 sin(ωΔt/2))·|A|², the part of ½Re ΣF·g* that
 * is the same everywhere along a lossless guide.
 */
import type { ComplexValues } from "../analysis/index.js";
import type { Lattice } from "../lattice/index.js";
import type { Tap } from "../stepping/index.js";
import type { PortMode } from "./port-mode.js";

/** Records that a port takes of a step: ψ on the line and, of the scattered field, γ half a step behind it. */
export const PORT_RECORDS = 2;

/** ψ is recorded at Δt, 2Δt, …, γ at ½Δt, 1½Δt, …. */
export const PORT_FIRST_SAMPLES: readonly [number, number] = [1, 0.5];

export function portTaps(mode: PortMode, firstRecord: number): Tap[] {
  const { points, behind, field, sign, profile, weight, norm } = mode;
  return points.flatMap((point, n): Tap[] => [
    { ...point, field: "f", weight: (weight[n] * profile[n]) / norm, record: firstRecord },
    { ...behind[n], field, weight: (sign * profile[n]) / norm, record: firstRecord + 1 },
  ]);
}

export interface GuidePhase {
  /** κ per step along the guide, in radians. */
  kappa: number;
  /** √(W/m) per unit of A. */
  root: number;
}

/** Null below the mode's cut-off, and where the lattice carries no such wave. */
export function guidePhase(lattice: Lattice, mode: PortMode, hz: number): GuidePhase | null {
  const half = Math.sin(Math.PI * hz * lattice.dt);
  const squared = (4 * half * half - mode.lambda) / (4 * mode.r);
  if (!(squared > 0 && squared < 1)) return null;
  const kappa = 2 * Math.asin(Math.sqrt(squared));
  return { kappa, root: Math.sqrt((mode.norm * Math.sin(kappa)) / (4 * half)) };
}

/** Cut-off of the mode on the lattice, in Hz: 4 sin²(ωΔt/2) = λ. */
export const latticeCutoff = (lattice: Lattice, mode: PortMode): number =>
  Math.asin(Math.sqrt(Math.max(0, mode.lambda)) / 2) / (Math.PI * lattice.dt);

export interface PortWaves {
  /** Power waves in √(W/m)·s toward the inside and outward, by frequency, at the port's own place; NaN below cut-off. */
  a: ComplexValues;
  b: ComplexValues;
  /** Radians from there to the reference plane. */
  shift: Float64Array;
}

/** @param psi Fourier sums at each frequency; γ with that of the incident wave added where the port is driven */
export function portWaves(
  lattice: Lattice,
  mode: PortMode,
  frequenciesHz: readonly number[],
  psi: ComplexValues,
  gamma: ComplexValues,
): PortWaves {
  const count = frequenciesHz.length;
  const nothing = (): ComplexValues => ({
    re: new Float64Array(count).fill(Number.NaN),
    im: new Float64Array(count).fill(Number.NaN),
  });
  const [a, b] = [nothing(), nothing()];
  const shift = new Float64Array(count);
  frequenciesHz.forEach((hz, n) => {
    const phase = guidePhase(lattice, mode, hz);
    if (!phase) return;
    const { kappa, root } = phase;
    const ratio = Math.sin(Math.PI * hz * lattice.dt) / Math.sin(kappa / 2);
    const [c, s] = [Math.cos(kappa / 2), Math.sin(kappa / 2)];
    const [qr, qi] = [gamma.re[n] * ratio, gamma.im[n] * ratio];
    const [fr, fi] = [psi.re[n], psi.im[n]];
    // A = (ψ·exp(−jκ/2) − q)/(2 cos(κ/2)) and B = (ψ·exp(jκ/2) + q)/(2 cos(κ/2)), then moved to the port's own place.
    const along = kappa * mode.planeCells;
    const put = (to: ComplexValues, re: number, im: number, angle: number, sign: number): void => {
      const scale = (sign * root) / (2 * c);
      to.re[n] = scale * (re * Math.cos(angle) - im * Math.sin(angle));
      to.im[n] = scale * (re * Math.sin(angle) + im * Math.cos(angle));
    };
    put(a, fr * c + fi * s - qr, fi * c - fr * s - qi, -along, mode.inwardE);
    put(b, fr * c - fi * s + qr, fi * c + fr * s + qi, along, mode.outwardE);
    shift[n] = kappa * mode.shiftCells;
  });
  return { a, b, shift };
}
