/**
 * The guide as a line of its own, in float64: ψ is driven at its first point and travels with the mode's own phase on the
 * lattice (see port-mode.ts). The second point stands on the port's line; behind it an absorbing layer ends the line.
 *
 * What drives is w less what of it lies at the cut-off, w ← δ²w + λw in steps of Δt, zero at 4 sin²(ωΔt/2) = λ: waves there hardly
 * travel, and would go on ringing long after all others have left. Where λ = 0 (TEM) it is w itself.
 *
 * Drive points on the port's line put the wave into the fields on the inward side alone: F there lacks the line's g half
 * a step behind it, and the g behind it must not feel the line's F (total and scattered field; A. Taflove and S. C. Hagness,
 * Computational Electrodynamics, 3rd ed. (2005), ch. 5; from memory).
 */
import type { AxisStretch } from "../boundaries/index.js";
import { absorbingLayers } from "../boundaries/index.js";
import type { CompiledWaveform, SignalGenerator } from "../drives/index.js";
import type { Lattice } from "../lattice/index.js";
import { buildLattice, C0 } from "../lattice/index.js";
import type { DrivePoint } from "../stepping/index.js";
import type { PortMode } from "./port-mode.js";

const LAYER_CELLS = 60;
/** Between the waveform and the layer: the port's point and one to spare. */
const OPEN_CELLS = 3;

/** What an absorbing layer does to the line's points and half points, with the grading of the section's own layers. */
function lineLayers(
  lattice: Lattice,
  mode: PortMode,
  bandFromHz: number,
): { f: AxisStretch; g: AxisStretch } {
  const { dx, dy, courant } = lattice;
  const along = mode.cell === dx ? dx : dy;
  const line = buildLattice({
    polarization: "TMz",
    nx: OPEN_CELLS,
    ny: 1,
    dx: along,
    dy: along === dx ? dy : dx,
    edges: { left: "electric", right: "absorbing", bottom: "electric", top: "electric" },
    layerCells: LAYER_CELLS,
    courant,
  });
  const index = (C0 * lattice.dt) / (along * Math.sqrt(mode.r));
  const sides = { left: index, right: index, bottom: index, top: index };
  const { columnsF, columnsG } = absorbingLayers(line, bandFromHz, sides);
  return { f: columnsF, g: columnsG };
}

/** λ of a mode without a cut-off, up to rounding. */
const TEM = 1e-9;
/** Steps by which the line drives longer than its waveform. */
export const LATER_STEPS = 3;

/** What drives the line at a frequency, over the waveform's own spectrum: its magnitude. */
export const drivingGain = (mode: PortMode, dt: number, hz: number): number =>
  mode.lambda <= TEM ? 1 : Math.abs(mode.lambda - 4 * Math.sin(Math.PI * hz * dt) ** 2);

export class GuideLine implements SignalGenerator {
  readonly signals = 2;
  private readonly count = OPEN_CELLS + LAYER_CELLS;
  /** ψ at points 0 … count, γ and its layer's memory at half points, Θ and its layer's memory at points; and the next step. */
  private readonly psi = new Float64Array(this.count + 1);
  private readonly gamma = new Float64Array(this.count);
  private readonly theta = new Float64Array(this.count + 1);
  private readonly memoryF = new Float64Array(this.count + 1);
  private readonly memoryG = new Float64Array(this.count);
  private readonly layers: { f: AxisStretch; g: AxisStretch };

  constructor(
    lattice: Lattice,
    private readonly mode: PortMode,
    bandFromHz: number,
    private readonly waveform: CompiledWaveform,
    private readonly amplitude: number,
  ) {
    this.dt = lattice.dt;
    this.layers = lineLayers(lattice, mode, bandFromHz);
  }

  private readonly dt: number;

  /** Writes ψ at nΔt and then γ at (n+½)Δt, both at the port. */
  write(first: number, steps: number, out: Float64Array, width: number, column: number): void {
    for (let t = 0; t < steps; t += 1) {
      out[t * width + column] = this.psi[1];
      this.stepGamma();
      out[t * width + column + 1] = this.gamma[0];
      this.stepPsi();
      this.psi[0] = this.amplitude * this.driving((first + t + 1) * this.dt);
    }
  }

  private driving(time: number): number {
    const { dt, mode, waveform } = this;
    const here = waveform.valueAt(time);
    if (mode.lambda <= TEM) return here;
    const before = waveform.valueAt(time - dt);
    return here - (2 - mode.lambda) * before + waveform.valueAt(time - 2 * dt);
  }

  private stepGamma(): void {
    const { psi, gamma, theta, memoryG } = this;
    const { decay, gain, stretch } = this.layers.g;
    for (let i = 0; i < gamma.length; i += 1) {
      // The lattice counts its columns from 1.
      const difference = psi[i + 1] - psi[i];
      memoryG[i] = decay[i + 1] * memoryG[i] + gain[i + 1] * difference;
      gamma[i] += difference * (1 + stretch[i + 1]) + memoryG[i];
    }
    for (let i = 1; i < psi.length; i += 1) theta[i] += psi[i];
  }

  private stepPsi(): void {
    const { psi, gamma, theta, memoryF } = this;
    const { decay, gain, stretch } = this.layers.f;
    const { r, lambda } = this.mode;
    for (let i = 1; i < gamma.length; i += 1) {
      const difference = gamma[i] - gamma[i - 1];
      memoryF[i] = decay[i + 1] * memoryF[i] + gain[i + 1] * difference;
      psi[i] += r * (difference * (1 + stretch[i + 1]) + memoryF[i]) - lambda * theta[i];
    }
  }

  private get state(): readonly Float64Array[] {
    return [this.psi, this.gamma, this.theta, this.memoryF, this.memoryG];
  }

  save(): Float64Array {
    return Float64Array.from(this.state.flatMap((values) => [...values]));
  }

  load(state: Float64Array): void {
    const size = this.state.reduce((sum, { length }) => sum + length, 0);
    if (state.length !== size) throw new RangeError("The snapshot has other ports.");
    let offset = 0;
    for (const values of this.state) {
      values.set(state.subarray(offset, offset + values.length));
      offset += values.length;
    }
  }
}

/** @param signal index of the line's first signal among a step's signals */
export function portDrivePoints(mode: PortMode, signal: number): DrivePoint[] {
  const { points, behind, field, sign, profile, weight } = mode;
  return points.flatMap((point, n): DrivePoint[] => [
    { field, ...behind[n], weight: sign * profile[n], signal },
    { ...point, weight: weight[n] * profile[n], signal: signal + 1 },
  ]);
}
