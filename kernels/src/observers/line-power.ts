/** Power through a line from the records of its pieces: at every step, and its time average by running Fourier sums. */

export interface LinePowerSpec {
  /** Pieces, and the index of the first one's F among the records of a step; its partner G follows it. */
  pieces: number;
  firstRecord: number;
  /** Seconds. */
  dt: number;
  frequenciesHz: readonly number[];
  /** The sums take every so-many-th step: as sparse as what drives allows. */
  every: number;
}

export class LinePower {
  private readonly sums: Float64Array;
  /** F of the last step, and the steps taken. */
  private readonly last: Float64Array;
  private steps = 0;
  /** Half of F·G of the last step, waiting for the half step after it. */
  private kept = 0;

  constructor(private readonly spec: LinePowerSpec) {
    const { pieces, frequenciesHz } = spec;
    this.sums = new Float64Array(4 * pieces * frequenciesHz.length);
    this.last = new Float64Array(pieces);
  }

  /**
   * Takes `steps` steps of records. Sample n of the trace, written to `out`, is the power at n·Δt (0 is before the first step): G is the
   * mean of the half steps about it.
   *
   * @param records step-major, `width` numbers a step
   * @param out step-major, `outWidth` numbers a step, of which `column` is written
   */
  take(
    records: Float64Array,
    width: number,
    steps: number,
    out: Float64Array,
    outWidth: number,
    column: number,
  ): void {
    const { pieces, firstRecord } = this.spec;
    for (let t = 0; t < steps; t += 1) {
      const base = t * width + firstRecord;
      let power = 0;
      for (let p = 0; p < pieces; p += 1) {
        const g = records[base + 2 * p + 1];
        // F of the last step with G after it; its product with G before it was kept.
        power += 0.5 * this.last[p] * g;
      }
      out[t * outWidth + column] = power + this.kept;
      let kept = 0;
      for (let p = 0; p < pieces; p += 1) {
        const f = records[base + 2 * p];
        this.last[p] = f;
        kept += 0.5 * f * records[base + 2 * p + 1];
      }
      this.kept = kept;
      this.steps += 1;
      if (this.steps % this.spec.every === 0) this.add(records, base);
    }
  }

  private add(records: Float64Array, base: number): void {
    const { pieces, dt, frequenciesHz, every } = this.spec;
    const time = this.steps * dt;
    frequenciesHz.forEach((frequency, index) => {
      const angle = 2 * Math.PI * frequency * time;
      const c = Math.cos(angle) * every * dt;
      const s = -Math.sin(angle) * every * dt;
      let at = 4 * pieces * index;
      for (let p = 0; p < pieces; p += 1) {
        const f = records[base + 2 * p];
        const g = records[base + 2 * p + 1];
        this.sums[at] += f * c;
        this.sums[at + 1] += f * s;
        this.sums[at + 2] += g * c;
        this.sums[at + 3] += g * s;
        at += 4;
      }
    });
  }

  /** ½Re ΣF·G* of the Fourier sums at each frequency: W/m where they are over those of a source. */
  powers(): number[] {
    const { pieces, dt, frequenciesHz } = this.spec;
    return frequenciesHz.map((frequency, index) => {
      // G's samples lie half a step before F's, at whose times both were turned.
      const c = Math.cos(Math.PI * frequency * dt);
      const s = Math.sin(Math.PI * frequency * dt);
      let sum = 0;
      for (let p = 0; p < pieces; p += 1) {
        const at = 4 * (pieces * index + p);
        const gr = this.sums[at + 2] * c - this.sums[at + 3] * s;
        const gi = this.sums[at + 3] * c + this.sums[at + 2] * s;
        sum += this.sums[at] * gr + this.sums[at + 1] * gi;
      }
      return sum / 2;
    });
  }

  /** Numbers that `save` writes. */
  get size(): number {
    return this.sums.length + this.last.length + 2;
  }

  save(): Float64Array {
    const all = new Float64Array(this.size);
    all.set(this.sums);
    all.set(this.last, this.sums.length);
    all.set([this.kept, this.steps], this.sums.length + this.last.length);
    return all;
  }

  /** Throws a RangeError where the numbers do not fit. */
  load(all: Float64Array): void {
    if (all.length !== this.size) throw new RangeError("The snapshot has other line probes.");
    this.sums.set(all.subarray(0, this.sums.length));
    this.last.set(all.subarray(this.sums.length, this.sums.length + this.last.length));
    this.kept = all[all.length - 2];
    this.steps = all[all.length - 1];
  }
}
