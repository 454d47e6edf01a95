/**
 * A narrow band of a long trace as a short complex signal: turned down by the band's centre, weighed by a Kaiser low pass
 * (J. F. Kaiser, in: Proc. IEEE ISCAS 1974, 20) and decimated. Only sums over the whole filter are kept, so a damped
 * exponential stays exactly one, times the filter's gain at its pole.
 */
import type { ComplexSignal } from "./pencil.js";

export interface DecimatedSignal {
  signal: ComplexSignal;
  /** Trace samples per sample of the signal. */
  factor: number;
  /** The filter's taps; sample m of the signal weighs trace samples m·factor … m·factor + taps − 1. */
  taps: Float64Array;
}

/** Stop band in dB, and what follows for the window (β) and its length over the decimation factor. */
const STOP_DB = 120;
const BETA = 0.1102 * (STOP_DB - 8.7);
const LENGTH = (STOP_DB - 8) / (2.285 * Math.PI);

/** Modified Bessel function I₀ by its power series. */
const bessel = (x: number): number => {
  let term = 1;
  let sum = 1;
  for (let k = 1; term > 1e-17 * sum; k += 1) {
    term *= (x / (2 * k)) ** 2;
    sum += term;
  }
  return sum;
};

/** Pass band ±¼, stop band from ±¾ of the decimated rate: what folds over lands outside the pass band. */
export function lowPass(factor: number): Float64Array {
  if (factor === 1) return Float64Array.of(1);
  const half = Math.ceil((LENGTH * factor) / 2);
  const taps = Float64Array.from({ length: 2 * half + 1 }, (_, n) => {
    const x = n - half;
    const sinc = x === 0 ? 1 / factor : Math.sin((Math.PI * x) / factor) / (Math.PI * x);
    return (sinc * bessel(BETA * Math.sqrt(1 - (x / half) ** 2))) / bessel(BETA);
  });
  return taps;
}

/** Samples that `length` trace samples give. */
export const decimatedLength = (length: number, factor: number, taps: number): number =>
  length < taps ? 0 : Math.floor((length - taps) / factor) + 1;

/**
 * @param values the trace from where nothing drives any more
 * @param turn radians a trace sample by which the band's centre turns
 */
export function decimate(values: Float64Array, turn: number, factor: number): DecimatedSignal {
  const taps = lowPass(factor);
  const count = decimatedLength(values.length, factor, taps.length);
  const kernelRe = taps.map((tap, k) => tap * Math.cos(turn * k));
  const kernelIm = taps.map((tap, k) => -tap * Math.sin(turn * k));
  const signal = { re: new Float64Array(count), im: new Float64Array(count) };
  for (let m = 0; m < count; m += 1) {
    const first = m * factor;
    let re = 0;
    let im = 0;
    for (let k = 0; k < taps.length; k += 1) {
      re += kernelRe[k] * values[first + k];
      im += kernelIm[k] * values[first + k];
    }
    const c = Math.cos(turn * first);
    const s = -Math.sin(turn * first);
    signal.re[m] = re * c - im * s;
    signal.im[m] = re * s + im * c;
  }
  return { signal, factor, taps };
}

/** Σ h[k]·ζᵏ, ζ = exp(logRe + j·logIm) a trace sample in the turned-down band. */
export function filterGain(taps: Float64Array, logRe: number, logIm: number): [number, number] {
  let re = 0;
  let im = 0;
  for (let k = 0; k < taps.length; k += 1) {
    const size = taps[k] * Math.exp(logRe * k);
    re += size * Math.cos(logIm * k);
    im += size * Math.sin(logIm * k);
  }
  return [re, im];
}
