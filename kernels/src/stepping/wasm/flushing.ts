/**
 * When small numbers are set to zero, and what is small: 2⁻⁵⁶ (−337 dB) of the largest wave that any drive has put in so far. It
 * depends on the count of steps and the signals alone, so not on how steps are dealt out.
 */
import type { Lattice } from "../../lattice/index.js";
import { ETA0 } from "../../lattice/index.js";
import type { EngineField } from "../engine.js";
import type { Arena } from "./arena.js";
import type { DriveShare } from "./drive-shares.js";
import * as at from "./layout.js";

const SMALL = 2 ** -56;
/**
 * Steps from flush to flush. Ahead of a front numbers fall by a bit a step in air and by two in εμ = 4; G, in SI units, may lie 19 bits
 * below F. So between two flushes they stay above the least normal number, 2⁻¹²⁶, for drives of ordinary strength;
 * but for a few where a front crosses oblique interfaces, whose weak couplings run ahead of it.
 */
const FLUSH_STEPS = 32;

export class Flushing {
  /** The largest wave so far, in units of F: for snapshots. */
  readonly largest = new Float64Array(1);
  private readonly plans: number;
  /** By signal: the largest wave for a signal of 1, in units of F. */
  private strengths = new Float64Array(0);
  private readonly units: Readonly<Record<EngineField, number>>;

  constructor(
    private readonly arena: Arena,
    lattice: Lattice,
    jobSteps: number,
    stripBytes: number,
  ) {
    this.plans = arena.reserve(jobSteps * at.FLUSH_BYTES, at.CACHE_LINE_BYTES);
    arena.i32[at.FLUSHES / 4] = this.plans;
    arena.i32[at.STRIP_BYTES / 4] = stripBytes;
    const admittance = lattice.polarization === "TMz" ? 1 / ETA0 : ETA0;
    this.units = { f: 1, gx: admittance * lattice.dx, gy: admittance * lattice.dy };
  }

  setDrives(shares: readonly DriveShare[], signals: number): void {
    this.strengths = new Float64Array(signals);
    for (const { field, signal, factor } of shares) {
      this.strengths[signal] = Math.max(this.strengths[signal], Math.abs(factor) / this.units[field]);
    }
  }

  /** Writes the plans of a job's steps, which begin after `taken` steps. */
  plan(taken: number, steps: number, signals: Float64Array): void {
    const { f32 } = this.arena;
    const count = this.strengths.length;
    for (let t = 0; t < steps; t += 1) {
      for (let signal = 0; signal < count; signal += 1) {
        const wave = this.strengths[signal] * Math.abs(signals[t * count + signal]);
        if (wave > this.largest[0]) this.largest[0] = wave;
      }
      const word = (this.plans + t * at.FLUSH_BYTES) / 4;
      const due = (taken + t + 1) % FLUSH_STEPS === 0 && Number.isFinite(this.largest[0]);
      const limit = due ? this.largest[0] * SMALL : 0;
      f32[word + at.FLUSH_LIMIT_F / 4] = limit;
      f32[word + at.FLUSH_LIMIT_GX / 4] = limit * this.units.gx;
      f32[word + at.FLUSH_LIMIT_GY / 4] = limit * this.units.gy;
    }
  }
}
