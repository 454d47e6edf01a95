/**
 * How a plane wave's time function changes on its way through the lattice, as filters.
 *
 * In the lattice a plane wave of frequency ω at angle φ has a wave number k(ω, φ) of its own. Where it has come s = m·δ far, with
 * δ = vΔt and v the lattice's velocity at low frequencies, w(t) has become w delayed by m whole steps and filtered by
 *
 *   T(ω)·R(ω)·exp(−j(k(ω, φ) − ω/v)s):
 *
 * what is left of the phase is the lattice's dispersion alone, so that it changes slowly with s and the filter is short. R is 1 for F
 * and the lattice's own wave admittance for gx and gy, which follows from their steps (see `lattice`):
 *
 *   gx/F = bx·sin(k sinφ Δy/2)/sin(ωΔt/2),   gy/F = −by·sin(k cosφ Δx/2)/sin(ωΔt/2).
 *
 * T takes away what the lattice does not carry: it is 1 within 10⁻⁶ from 8 cells per wavelength up (coarser meshes are refused) and
 * below 10⁻⁸ from 4 cells down, an integrated Gaussian between, so that its own answer is short too.
 */
import type { DispersionMesh } from "../lattice/index.js";
import { latticeWaveNumber } from "../lattice/index.js";

export interface WaveMedium {
  mesh: DispersionMesh;
  /** m/s in the medium, at low frequencies. */
  speed: number;
  /** Direction of travel, radians from +x. */
  angle: number;
  /** b of gx and gy there: Δt/κ·Δx/Δy and Δt/κ·Δy/Δx. */
  bGx: number;
  bGy: number;
}

export type WaveField = "f" | "gx" | "gy";

/** u[n] = Σ values[l]·w[n − first − l]. */
export interface WaveFilter {
  first: number;
  values: Float64Array;
}

/** Cells per wavelength v/f where T begins to fall, and where nothing is left. */
const KEPT_CELLS = 8;
const LOST_CELLS = 4;
/** Deviations from T's middle to where it is 1 within 10⁻⁶, and to where it is below 10⁻⁸. */
const KEPT_DEVIATIONS = 4.75;
const LOST_DEVIATIONS = 5.61;
/** Values of a filter below this share of its largest are left out. */
const NEGLIGIBLE = 1e-9;
/** Interpolation between two places may be off by this share of what T leaves (see `lagrange.ts`). */
const INTERPOLATION_ERROR = 1e-7;
const LAGRANGE_CONSTANT = 0.0011;
/** The spacing's limit, so that places at the ends lie little beyond what is asked for. */
export const MOST_SPACING = 64;

export class WaveFilters {
  /** Steps δ between places whose filters may be interpolated between. */
  readonly spacing: number;
  /** ω·Δt of the spectral lines from 0 on, their T, residual phase per δ, and R of gx and gy. */
  private readonly lines: number;
  private readonly period: number;
  private readonly taper: Float64Array;
  private readonly residual: Float64Array;
  private readonly admittance: Readonly<Record<WaveField, Float64Array>>;
  private readonly cosines: Float64Array;
  private readonly sines: Float64Array;
  /** Steps by which the highest line comes later per δ. */
  private readonly delay: number;

  /** @param reach the largest |m| that is asked for */
  constructor(
    private readonly medium: WaveMedium,
    reach: number,
  ) {
    const { mesh, speed } = medium;
    const cell = Math.max(mesh.dx, mesh.dy);
    const thetaOf = (cells: number): number => (2 * Math.PI * speed * mesh.dt) / (cells * cell);
    const deviation = (thetaOf(LOST_CELLS) - thetaOf(KEPT_CELLS)) / (KEPT_DEVIATIONS + LOST_DEVIATIONS);
    const middle = thetaOf(KEPT_CELLS) + KEPT_DEVIATIONS * deviation;
    const last = thetaOf(LOST_CELLS);
    // T's answer lasts about as long as a Gaussian of deviation 1/`deviation` steps; dispersion delays the highest line by so many more per δ.
    const ownSteps = Math.ceil((2 * LOST_DEVIATIONS * 1.15) / deviation);
    this.delay = (this.residualAt(last) - this.residualAt(0.98 * last)) / (0.02 * last);
    this.period = Math.ceil(1.25 * (ownSteps + Math.abs(this.delay) * (reach + 1)));
    const turn = (2 * Math.PI) / this.period;
    this.lines = Math.floor(last / turn) + 1;
    const theta = Float64Array.from({ length: this.lines }, (_, q) => q * turn);
    this.taper = taperOf(theta, middle, deviation);
    this.residual = theta.map((value) => this.residualAt(value));
    this.admittance = {
      f: new Float64Array(this.lines).fill(1),
      gx: theta.map((value) => this.admittanceAt("gx", value)),
      gy: theta.map((value) => this.admittanceAt("gy", value)),
    };
    this.cosines = Float64Array.from({ length: this.period }, (_, n) => Math.cos(n * turn));
    this.sines = Float64Array.from({ length: this.period }, (_, n) => Math.sin(n * turn));
    this.spacing = this.spacingFor();
  }

  private waveNumber(theta: number): number {
    const { mesh, speed, angle } = this.medium;
    return theta === 0 ? 0 : latticeWaveNumber(mesh, speed, theta / mesh.dt, angle);
  }

  /** (k − ω/v)·δ. */
  private residualAt(theta: number): number {
    const { mesh, speed } = this.medium;
    return this.waveNumber(theta) * speed * mesh.dt - theta;
  }

  private admittanceAt(field: "gx" | "gy", theta: number): number {
    const { mesh, speed, angle, bGx, bGy } = this.medium;
    const [b, reach] = field === "gx" ? [bGx, Math.sin(angle) * mesh.dy] : [-bGy, Math.cos(angle) * mesh.dx];
    if (theta === 0) return (b * reach) / (speed * mesh.dt);
    return (b * Math.sin((this.waveNumber(theta) * reach) / 2)) / Math.sin(theta / 2);
  }

  private spacingFor(): number {
    let most = Number.POSITIVE_INFINITY;
    for (let q = 1; q < this.lines; q += 1) {
      const allowed = (INTERPOLATION_ERROR / (LAGRANGE_CONSTANT * this.taper[q])) ** (1 / 8);
      most = Math.min(most, allowed / Math.abs(this.residual[q]));
    }
    return Math.max(1, Math.floor(Math.min(most, MOST_SPACING)));
  }

  /** The filter at s = m·δ: F at whole steps, gx and gy half a step later. */
  at(field: WaveField, m: number): WaveFilter {
    const { period, lines, cosines, sines } = this;
    const turn = (2 * Math.PI) / period;
    const half = field === "f" ? 0 : 0.5;
    const re = new Float64Array(lines);
    const im = new Float64Array(lines);
    for (let q = 0; q < lines; q += 1) {
      const phase = half * q * turn - this.residual[q] * m;
      const size = ((q === 0 ? 1 : 2) * this.taper[q] * this.admittance[field][q]) / period;
      re[q] = size * Math.cos(phase);
      im[q] = size * Math.sin(phase);
    }
    // The answer repeats with the period: it is told about the middle of where it lasts.
    const delay = this.delay * m;
    const first = Math.floor(Math.min(0, delay) - (period - Math.abs(delay)) / 2);
    const values = new Float64Array(period);
    for (let n = 0; n < period; n += 1) {
      const l = (((first + n) % period) + period) % period;
      let sum = 0;
      for (let q = 0, at = 0; q < lines; q += 1) {
        sum += re[q] * cosines[at] - im[q] * sines[at];
        at += l;
        if (at >= period) at -= period;
      }
      values[n] = sum;
    }
    return trimmed({ first, values });
  }
}

/** 1 minus the normalized running sum of a Gaussian. */
function taperOf(theta: Float64Array, middle: number, deviation: number): Float64Array {
  const bell = theta.map((value) => Math.exp(-0.5 * ((value - middle) / deviation) ** 2));
  const whole = bell.reduce((sum, value) => sum + value, 0);
  let passed = 0;
  return bell.map((value) => {
    passed += value / whole;
    return Math.max(0, 1 - passed + value / whole / 2);
  });
}

/** Without the negligible values at both ends. */
function trimmed({ first, values }: WaveFilter): WaveFilter {
  const floor = NEGLIGIBLE * values.reduce((most, value) => Math.max(most, Math.abs(value)), 0);
  let from = 0;
  let to = values.length;
  while (from < to - 1 && Math.abs(values[from]) <= floor) from += 1;
  while (to > from + 1 && Math.abs(values[to - 1]) <= floor) to -= 1;
  return { first: first + from, values: values.slice(from, to) };
}
