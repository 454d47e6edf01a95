/**
 * Fourier sums of many field points, fed with whole frames between two sweeps of the engine. A frame is looked at every M steps: the
 * sums are those of all samples as long as nothing of the drive reaches the frequencies that are folded into the wanted ones.
 */
import type { EngineField, EngineFields } from "../stepping/index.js";

export interface FramePoints {
  field: EngineField;
  /** Indices into the engine's array of that field. */
  indices: Int32Array;
}

/** One array after the other. */
export function concat(parts: readonly Float64Array[]): Float64Array {
  const all = new Float64Array(parts.reduce((sum, { length }) => sum + length, 0));
  let at = 0;
  for (const part of parts) {
    all.set(part, at);
    at += part.length;
  }
  return all;
}

/** Views of one frequency's sums: the loop over them is ten times as fast as one with offsets into all of them. */
function addTurned(values: Float64Array, re: Float64Array, im: Float64Array, c: number, s: number): void {
  for (let n = 0; n < values.length; n += 1) {
    const value = values[n];
    re[n] = re[n] + value * c;
    im[n] = im[n] + value * s;
  }
}

export class FrameTransform {
  /** Points of all groups. */
  readonly points: number;
  /** Frequency-major: points × frequencies sums each. */
  readonly re: Float64Array;
  readonly im: Float64Array;
  private readonly values: Float64Array;

  /**
   * @param groups points are numbered in their order
   * @param dt seconds between two steps; @param every steps between two frames
   */
  constructor(
    private readonly groups: readonly FramePoints[],
    private readonly frequenciesHz: readonly number[],
    private readonly dt: number,
    private readonly every: number,
  ) {
    this.points = groups.reduce((sum, { indices }) => sum + indices.length, 0);
    this.values = new Float64Array(this.points);
    this.re = new Float64Array(this.points * frequenciesHz.length);
    this.im = new Float64Array(this.points * frequenciesHz.length);
  }

  /** @param step steps since time 0: F holds step·Δt, G half a step less */
  look(fields: EngineFields, step: number): void {
    let at = 0;
    for (const { field, indices } of this.groups) {
      const source = fields[field];
      for (let n = 0; n < indices.length; n += 1) this.values[at + n] = source[indices[n]];
      at += indices.length;
    }
    let first = 0;
    for (const { field, indices } of this.groups) {
      const time = (field === "f" ? step : step - 0.5) * this.dt;
      this.add(first, first + indices.length, time);
      first += indices.length;
    }
  }

  private add(first: number, end: number, time: number): void {
    const { values, re, im, points, dt, every, frequenciesHz } = this;
    const taken = values.subarray(first, end);
    for (let index = 0; index < frequenciesHz.length; index += 1) {
      const angle = 2 * Math.PI * frequenciesHz[index] * time;
      const c = Math.cos(angle) * dt * every;
      const s = -Math.sin(angle) * dt * every;
      const [from, to] = [index * points + first, index * points + end];
      addTurned(taken, re.subarray(from, to), im.subarray(from, to), c, s);
    }
  }

  get size(): number {
    return 2 * this.re.length;
  }

  save(): Float64Array {
    return concat([this.re, this.im]);
  }

  load(all: Float64Array): void {
    this.re.set(all.subarray(0, this.re.length));
    this.im.set(all.subarray(this.re.length, this.size));
  }
}
