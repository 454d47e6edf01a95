/**
 * Spectra per unit source: the Fourier sum of a trace over that of the waveform, both as the solver stepped them,
 * F(f) = Σ f(t)·exp(−j2πft)·Δt (peak phasors with exp(+jωt)). Multiplied by Δt on both sides, it cancels.
 */
export interface SampledSignal {
  /** Seconds: time of sample 0, and the spacing. */
  start: number;
  step: number;
  values: Float64Array;
}

export interface ComplexValues {
  re: Float64Array;
  im: Float64Array;
}

/** Phasors are turned from sample to sample by multiplication and set anew after this many, so rounding cannot build up. */
const RESTART = 1024;

/** Fourier sum Σ v·exp(−j2πft)·step at each frequency (Hz). */
export function fourierSum(signal: SampledSignal, frequenciesHz: readonly number[]): ComplexValues {
  const { start, step, values } = signal;
  const re = new Float64Array(frequenciesHz.length);
  const im = new Float64Array(frequenciesHz.length);
  frequenciesHz.forEach((frequency, index) => {
    const omega = 2 * Math.PI * frequency;
    const turnRe = Math.cos(omega * step);
    const turnIm = -Math.sin(omega * step);
    let sumRe = 0;
    let sumIm = 0;
    for (let block = 0; block < values.length; block += RESTART) {
      let phasorRe = Math.cos(omega * (start + block * step));
      let phasorIm = -Math.sin(omega * (start + block * step));
      const end = Math.min(values.length, block + RESTART);
      for (let n = block; n < end; n += 1) {
        const value = values[n];
        sumRe += value * phasorRe;
        sumIm += value * phasorIm;
        const next = phasorRe * turnRe - phasorIm * turnIm;
        phasorIm = phasorRe * turnIm + phasorIm * turnRe;
        phasorRe = next;
      }
    }
    re[index] = sumRe * step;
    im[index] = sumIm * step;
  });
  return { re, im };
}

/** Quotient of two phasor lists; null where the divisor is nothing against its own largest value. */
export function quotient(
  numerator: ComplexValues,
  divisor: ComplexValues,
): { re: (number | null)[]; im: (number | null)[] } {
  const re: (number | null)[] = [];
  const im: (number | null)[] = [];
  for (let i = 0; i < divisor.re.length; i += 1) {
    const norm = divisor.re[i] ** 2 + divisor.im[i] ** 2;
    const qr = (numerator.re[i] * divisor.re[i] + numerator.im[i] * divisor.im[i]) / norm;
    const qi = (numerator.im[i] * divisor.re[i] - numerator.re[i] * divisor.im[i]) / norm;
    const defined = norm > 0 && Number.isFinite(qr) && Number.isFinite(qi);
    re.push(defined ? qr : null);
    im.push(defined ? qi : null);
  }
  return { re, im };
}

/**
 * The peak phasor of a steady tone: least squares of A·cos(ωt) − B·sin(ωt) over samples from index `first` on, which is
 * exact for a pure tone whatever the window. Returns A + jB.
 */
export function tonePhasor(
  signal: SampledSignal,
  frequencyHz: number,
  first: number,
  end: number,
): [number, number] {
  const omega = 2 * Math.PI * frequencyHz;
  let cc = 0;
  let cs = 0;
  let ss = 0;
  let vc = 0;
  let vs = 0;
  for (let n = first; n < end; n += 1) {
    const angle = omega * (signal.start + n * signal.step);
    const c = Math.cos(angle);
    const s = -Math.sin(angle);
    const v = signal.values[n];
    cc += c * c;
    cs += c * s;
    ss += s * s;
    vc += v * c;
    vs += v * s;
  }
  const determinant = cc * ss - cs * cs;
  return [(vc * ss - vs * cs) / determinant, (vs * cc - vc * cs) / determinant];
}

/** Whole periods at the end of `samples` samples: as many as come closest to whole steps, of the last `atMost`. */
export function finalPeriods(samples: number, step: number, frequencyHz: number, atMost: number): number {
  const perPeriod = 1 / (frequencyHz * step);
  let best = 0;
  let bestError = Number.POSITIVE_INFINITY;
  for (let periods = 1; periods <= atMost && periods * perPeriod <= samples; periods += 1) {
    const error = Math.abs(periods * perPeriod - Math.round(periods * perPeriod)) / periods;
    if (error < bestError) {
      best = periods;
      bestError = error;
    }
  }
  return best;
}
