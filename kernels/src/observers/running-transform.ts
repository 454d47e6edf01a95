/**
 * Fourier sums of recorded quantities, kept up to date while the run goes on and nothing of it is stored.
 *
 * The samples pass a low-pass filter and only every M-th result is transformed: M as large as the highest frequency allows.
 * The filter (windowed sinc, Kaiser's window: J. F. Kaiser, in Proc. IEEE Int. Symp. Circuits and Systems (1974) 20; from memory)
 * suppresses by 120 dB whatever would be folded into the band, and its own response H(f) is divided out exactly:
 *
 *   F(f) = Σ x(tₙ)·exp(−j2πftₙ)·Δt = M·Δt/H(f)·Σ y(t_mM)·exp(−j2πft_mM),   y = h ∗ x.
 */
export interface TransformChannel {
  /** Seconds: time of sample 0. */
  start: number;
}

/** One Fourier sum: by frequency, in the order asked for. */
export interface TransformValues {
  re: Float64Array;
  im: Float64Array;
}

const REJECTION_DB = 120;
/** Samples kept of a sine of the highest frequency: 2 would be the least, and the filter steeper the closer to it. */
const SAMPLES_PER_PERIOD = 3;
/** Results that are filtered before they are transformed together. */
const BATCH = 64;
/** Phasors are turned by multiplication and set anew after this many results, so rounding cannot build up. */
const RESTART = 1024;

/** Modified Bessel function I₀ by its series. */
function besselI0(x: number): number {
  let term = 1;
  let sum = 1;
  for (let k = 1; term > 1e-17 * sum; k += 1) {
    term *= (x / (2 * k)) ** 2;
    sum += term;
  }
  return sum;
}

/** Low pass with sum 1; `cutoff` and `transition` in cycles per sample. */
function lowPass(cutoff: number, transition: number): Float64Array {
  const half = Math.ceil((REJECTION_DB - 7.95) / (14.36 * transition) / 2);
  const beta = 0.1102 * (REJECTION_DB - 8.7);
  const scale = besselI0(beta);
  const taps = Float64Array.from({ length: 2 * half + 1 }, (_, index) => {
    const n = index - half;
    const sinc = n === 0 ? 2 * cutoff : Math.sin(2 * Math.PI * cutoff * n) / (Math.PI * n);
    return (sinc * besselI0(beta * Math.sqrt(1 - (n / (half + 1)) ** 2))) / scale;
  });
  const sum = taps.reduce((total, tap) => total + tap, 0);
  return taps.map((tap) => tap / sum);
}

export class RunningTransform {
  /** Every this many samples one is transformed. */
  readonly decimation: number;
  private readonly filter: Float64Array;
  private readonly count: number;
  /** By channel: what of the samples may still be filtered; sample `firstKept` first. */
  private readonly kept: Float64Array[];
  private keptLength = 0;
  private firstKept = 0;
  /** Results transformed so far. */
  private results = 0;
  private readonly re: Float64Array[];
  private readonly im: Float64Array[];
  private readonly phasorRe: Float64Array;
  private readonly phasorIm: Float64Array;
  private readonly turnRe: Float64Array;
  private readonly turnIm: Float64Array;

  /**
   * @param channels as many as a step has records, in their order
   * @param step seconds between samples
   * @param frequenciesHz any order; the highest decides how much is left out
   */
  constructor(
    private readonly channels: readonly TransformChannel[],
    private readonly step: number,
    private readonly frequenciesHz: readonly number[],
  ) {
    const highest = frequenciesHz.reduce((most, frequency) => Math.max(most, frequency), 0) * step;
    if (!(highest > 0 && highest < 0.5)) {
      throw new RangeError(
        "The highest frequency of a transform must lie between 0 and half the sampling rate.",
      );
    }
    this.decimation = Math.max(1, Math.floor(1 / (SAMPLES_PER_PERIOD * highest)));
    // Without decimation nothing folds: the filter is a single 1.
    this.filter =
      this.decimation === 1
        ? Float64Array.of(1)
        : lowPass(0.5 / this.decimation, 1 / this.decimation - 2 * highest);
    this.count = frequenciesHz.length;
    const room = this.filter.length + BATCH * this.decimation;
    this.kept = channels.map(() => new Float64Array(room));
    this.re = channels.map(() => new Float64Array(this.count));
    this.im = channels.map(() => new Float64Array(this.count));
    const turn = (frequency: number): number => 2 * Math.PI * frequency * step * this.decimation;
    this.phasorRe = new Float64Array(this.count);
    this.phasorIm = new Float64Array(this.count);
    this.turnRe = Float64Array.from(frequenciesHz, (frequency) => Math.cos(turn(frequency)));
    this.turnIm = Float64Array.from(frequenciesHz, (frequency) => -Math.sin(turn(frequency)));
    // The filter sees nothing before sample 0.
    this.keptLength = this.filter.length - 1;
    this.firstKept = -this.keptLength;
  }

  /** Takes `steps` samples of all channels, step-major as an engine writes them. */
  append(records: Float64Array, steps: number): void {
    const width = this.channels.length;
    for (let done = 0; done < steps; ) {
      const room = (this.kept.at(0)?.length ?? 0) - this.keptLength;
      const taken = Math.min(room, steps - done);
      for (let channel = 0; channel < width; channel += 1) {
        const kept = this.kept[channel];
        for (let n = 0; n < taken; n += 1) kept[this.keptLength + n] = records[(done + n) * width + channel];
      }
      this.keptLength += taken;
      done += taken;
      if (taken === room || width === 0) this.transform();
      if (width === 0) return;
    }
  }

  /** Filters and transforms what can be, and forgets what no later result needs. */
  private transform(): void {
    const { decimation, filter } = this;
    const available = this.firstKept + this.keptLength - 1;
    const ready = Math.floor(available / decimation) + 1 - this.results;
    for (let n = 0; n < ready; n += 1) {
      const newest = this.results * decimation - this.firstKept;
      this.setPhasors();
      this.channels.forEach((_, channel) => {
        const samples = this.kept[channel];
        let value = 0;
        for (let k = 0; k < filter.length; k += 1) value += filter[k] * samples[newest - k];
        this.add(channel, value);
      });
      this.results += 1;
    }
    const needed = this.results * decimation - (filter.length - 1);
    const forgotten = Math.min(this.keptLength, needed - this.firstKept);
    if (forgotten <= 0) return;
    for (const samples of this.kept) samples.copyWithin(0, forgotten, this.keptLength);
    this.keptLength -= forgotten;
    this.firstKept += forgotten;
  }

  /** Phasors of the next result, counted from sample 0. */
  private setPhasors(): void {
    const { phasorRe, phasorIm, turnRe, turnIm } = this;
    if (this.results % RESTART === 0) {
      const time = this.results * this.decimation * this.step;
      this.frequenciesHz.forEach((frequency, index) => {
        phasorRe[index] = Math.cos(2 * Math.PI * frequency * time);
        phasorIm[index] = -Math.sin(2 * Math.PI * frequency * time);
      });
      return;
    }
    for (let index = 0; index < this.count; index += 1) {
      const next = phasorRe[index] * turnRe[index] - phasorIm[index] * turnIm[index];
      phasorIm[index] = phasorRe[index] * turnIm[index] + phasorIm[index] * turnRe[index];
      phasorRe[index] = next;
    }
  }

  private add(channel: number, value: number): void {
    const { phasorRe, phasorIm } = this;
    const re = this.re[channel];
    const im = this.im[channel];
    for (let index = 0; index < re.length; index += 1) {
      re[index] += value * phasorRe[index];
      im[index] += value * phasorIm[index];
    }
  }

  /**
   * Ends the sum, as if nothing but zeros followed, and gives every channel's transform in its unit times seconds. Nothing may be
   * appended afterwards.
   */
  finish(): TransformValues[] {
    const tail = this.filter.length + this.decimation;
    this.append(new Float64Array(tail * this.channels.length), tail);
    this.transform();
    return this.channels.map(({ start }, channel) => this.corrected(start, channel));
  }

  /** The sum with the filter's response divided out and the time of sample 0 put in. */
  private corrected(start: number, channel: number): TransformValues {
    const re = new Float64Array(this.count);
    const im = new Float64Array(this.count);
    const half = (this.filter.length - 1) / 2;
    this.frequenciesHz.forEach((frequency, index) => {
      const omega = 2 * Math.PI * frequency;
      // The filter is even about its middle: its response is real but for the delay of half its length.
      let response = this.filter[half];
      for (let n = 1; n <= half; n += 1)
        response += 2 * this.filter[half + n] * Math.cos(omega * n * this.step);
      const turn = omega * (half * this.step - start);
      const scale = (this.decimation * this.step) / response;
      const [c, s] = [Math.cos(turn) * scale, Math.sin(turn) * scale];
      re[index] = this.re[channel][index] * c - this.im[channel][index] * s;
      im[index] = this.re[channel][index] * s + this.im[channel][index] * c;
    });
    return { re, im };
  }
}
