/** Poles of one narrow band of a ring-down, with uncertainties from three windows of it and from the noise. */
import { decimate, decimatedLength, filterGain, lowPass } from "./decimation.js";
import type { ComplexSignal, PencilFit } from "./pencil.js";
import { matrixPencil } from "./pencil.js";

/** One damped cosine of a trace: 2|A|·exp(−αt)·cos(ωt + arg A), t from the trace's first given sample. */
export interface Pole {
  /** rad/s, ≥ 0. */
  omega: number;
  /** 1/s; negative where it grows within its uncertainty. */
  alpha: number;
  /** Half the amplitude as a phasor, at the first given sample. */
  re: number;
  im: number;
  /** One standard deviation or the spread of the windows, whichever is larger. */
  omegaUncertainty: number;
  alphaUncertainty: number;
}

export interface NarrowBand {
  /** Hz. */
  center: number;
  /** Hz on either side within which poles count. */
  halfWidth: number;
}

/** Samples of a decimated window: enough for some thirty poles, few enough to be quick. */
export const WINDOW_SAMPLES = 128;
/** Fewer samples than this tell nothing. */
const LEAST_SAMPLES = 24;
/** The two windows that the whole is compared with have this share of it, at its beginning and at its end. */
const PART = 0.8;

/**
 * Poles that die faster than this a decimated sample (in nepers) are left to a shorter window: the filter hardly holds back the folded
 * images of such.
 */
const FASTEST = 0.2;

/** Single-precision coefficients decide no decay or frequency finer than this share of ω. */
const ROUNDING_SHARE = 3e-8;

/** Trace samples per decimated sample so that `length` of them give about WINDOW_SAMPLES. */
export const factorFor = (length: number): number => Math.max(1, Math.floor(length / WINDOW_SAMPLES));

/** A term in the turned-down band: logarithm of its pole per decimated sample. */
interface Log {
  growth: number;
  turn: number;
}

const logOf = (zRe: number, zIm: number): Log => ({
  growth: Math.log(Math.hypot(zRe, zIm)),
  turn: Math.atan2(zIm, zRe),
});

const part = (signal: ComplexSignal, from: number, to: number): ComplexSignal => ({
  re: signal.re.subarray(from, to),
  im: signal.im.subarray(from, to),
});

/** The nearest of a window's poles. */
function nearest(fit: PencilFit, pole: Log): Log | null {
  let best: Log | null = null;
  let least = Number.POSITIVE_INFINITY;
  for (const term of fit.terms) {
    const log = logOf(term.zRe, term.zIm);
    const distance = Math.hypot(log.growth - pole.growth, log.turn - pole.turn);
    if (distance < least) {
      least = distance;
      best = log;
    }
  }
  return best;
}

/**
 * Poles in a narrow band.
 *
 * A pole stands where at least one of the two shorter windows has it too, nearer than a quarter of its own width or a twentieth
 * of what the window resolves; those that noise makes do not come back.
 *
 * @param values the trace from where nothing drives any more, at a spacing of `dt` seconds
 * @param least amplitude of a cosine below which it does not count
 */
export function bandPoles(values: Float64Array, dt: number, band: NarrowBand, least: number): Pole[] {
  const factor = factorFor(values.length);
  if (decimatedLength(values.length, factor, lowPass(factor).length) < LEAST_SAMPLES) return [];
  const centerTurn = 2 * Math.PI * band.center * dt;
  const { signal, taps } = decimate(values, centerTurn, factor);
  const samples = signal.re.length;
  // A mode's phasor has half its amplitude.
  if (!signal.re.some((re, n) => Math.hypot(re, signal.im[n]) >= least / 2)) return [];
  const span = factor * dt;
  const fit = matrixPencil(signal);
  const inBand = fit.terms.filter(
    ({ zRe, zIm }) => Math.abs(Math.atan2(zIm, zRe)) / (2 * Math.PI * span) <= band.halfWidth,
  );
  if (inBand.length === 0) return [];
  const length = Math.floor(samples * PART);
  const windows = [
    matrixPencil(part(signal, 0, length)),
    matrixPencil(part(signal, samples - length, samples)),
  ];
  return inBand.flatMap((term): Pole[] => {
    const log = logOf(term.zRe, term.zIm);
    const omega = 2 * Math.PI * band.center + log.turn / span;
    if (!(omega > 0) || (factor > 1 && -log.growth > FASTEST)) return [];
    const allowed = 0.25 * Math.abs(log.growth) + (0.05 * 2 * Math.PI) / samples;
    const found = windows
      .map((window) => nearest(window, log))
      .filter(
        (other): other is Log =>
          other !== null && Math.hypot(other.growth - log.growth, other.turn - log.turn) <= allowed,
      );
    if (found.length === 0) return [];
    const spread = (of: (log: Log) => number): number =>
      Math.max(...found.map((other) => Math.abs(of(other) - of(log))));
    // Cramér–Rao bound of one exponential over the samples that it lasts.
    const lasting = Math.max(2, Math.min(samples, 1 / Math.max(Math.abs(log.growth), 1e-12)));
    const noise = (fit.residual / Math.hypot(term.re, term.im)) * Math.sqrt(6 / lasting ** 3);
    if (!(noise < 1)) return [];
    const [gr, gi] = filterGain(taps, log.growth / factor, log.turn / factor);
    const gain = gr * gr + gi * gi;
    const rounding = ROUNDING_SHARE * omega;
    if (2 * Math.hypot(term.re, term.im) < least * Math.sqrt(gain)) return [];
    return [
      {
        omega,
        alpha: -log.growth / span,
        re: (term.re * gr + term.im * gi) / gain,
        im: (term.im * gr - term.re * gi) / gain,
        omegaUncertainty: Math.hypot(spread(({ turn }) => turn) / span, noise / span, rounding),
        alphaUncertainty: Math.hypot(spread(({ growth }) => growth) / span, noise / span, rounding),
      },
    ];
  });
}
