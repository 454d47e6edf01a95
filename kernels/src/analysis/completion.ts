/** What a ring-down that was cut off would still have added to its spectrum, from the poles of what was seen of it. */
import type { Pole, WideBand } from "./poles/index.js";
import { longestFor, polesOver } from "./poles/index.js";
import { freePart } from "./resonances.js";
import type { ComplexValues, SampledSignal } from "./spectrum.js";
import { fourierSum } from "./spectrum.js";

export interface Completion {
  /** Fourier sum over all samples after the last one, at each frequency. */
  tail: ComplexValues;
  /** Share of the tail that the poles do not tell: what they leave of the end of the trace, and how far their decay is uncertain. */
  left: number;
}

/** The end of the fitted trace against which the poles are held. */
const CHECKED_SHARE = 0.25;
/** A pole whose decay is below this many of its uncertainties cannot be continued to its end. */
const TOLD_APART = 3;
/** Excited is what the waveform's spectrum reaches above this share of its largest value. */
const EXCITED = 1e-4;
const GRID = 512;

/** The frequencies that a waveform excites, from its spectrum up to `most` Hz. */
export function excitedBand(waveform: SampledSignal, most: number): WideBand {
  const frequencies = Array.from({ length: GRID }, (_, n) => ((n + 1) * most) / GRID);
  const { re, im } = fourierSum(waveform, frequencies);
  const sizes = frequencies.map((_, n) => Math.hypot(re[n], im[n]));
  const largest = Math.max(...sizes);
  const loud = frequencies.filter((_, n) => sizes[n] >= EXCITED * largest);
  const spacing = most / GRID;
  return { from: Math.max(spacing / 2, loud[0] - spacing), to: loud[loud.length - 1] + spacing };
}

/**
 * Completes a cut-off trace; null where it has no poles or one of them does not decay for certain.
 *
 * @param from seconds after which no source drives any more
 * @param band Hz: everything that was excited, since what lies beside the band leaks into a cut-off spectrum too
 * @param pieces fits that may be made: the cost
 */
export function completeRingDown(
  signal: SampledSignal,
  band: WideBand,
  from: number,
  frequenciesHz: readonly number[],
  pieces: number,
): Completion | null {
  const free = freePart(signal, from);
  const { step } = free;
  const length = Math.min(free.values.length, longestFor(step, band, pieces));
  const values = free.values.subarray(free.values.length - length);
  const poles = polesOver(values, step, band, length);
  if (poles.length === 0) return null;
  const atEnd = poles.map((pole) => turned(pole, length * step));
  const sizes = atEnd.map(([re, im]) => Math.hypot(re, im));
  const largest = Math.max(...sizes);
  const endless = poles.some(
    ({ alpha, alphaUncertainty }, k) => sizes[k] > 1e-3 * largest && alpha <= TOLD_APART * alphaUncertainty,
  );
  if (endless) return null;
  const decaying = poles.map(({ alpha }, k) => ({ k, alpha })).filter(({ alpha }) => alpha > 0);
  const end = free.start + free.values.length * step;
  const re = new Float64Array(frequenciesHz.length);
  const im = new Float64Array(frequenciesHz.length);
  frequenciesHz.forEach((frequency, index) => {
    const omega = 2 * Math.PI * frequency;
    let sumRe = 0;
    let sumIm = 0;
    for (const { k, alpha } of decaying) {
      const [br, bi] = atEnd[k];
      for (const sign of [1, -1]) {
        // Σ B·zⁿ over all n ≥ 0 is B/(1 − z).
        const angle = (sign * poles[k].omega - omega) * step;
        const size = Math.exp(-alpha * step);
        const dr = 1 - size * Math.cos(angle);
        const di = -size * Math.sin(angle);
        const norm = dr * dr + di * di;
        sumRe += (br * dr + sign * bi * di) / norm;
        sumIm += (sign * bi * dr - br * di) / norm;
      }
    }
    const c = Math.cos(omega * end);
    const s = -Math.sin(omega * end);
    re[index] = (sumRe * c - sumIm * s) * step;
    im[index] = (sumRe * s + sumIm * c) * step;
  });
  const tails = decaying.map(({ k, alpha }) => sizes[k] / alpha);
  const errors = decaying.map(({ k, alpha }, n) => (tails[n] * poles[k].alphaUncertainty) / alpha);
  const unsure = Math.hypot(...errors) / Math.hypot(...tails);
  return { tail: { re, im }, left: Math.hypot(unsure, restShare(values, step, poles)) };
}

/** A pole's phasor `time` seconds later. */
function turned(pole: Pole, time: number): [number, number] {
  const size = Math.exp(-pole.alpha * time);
  const c = Math.cos(pole.omega * time);
  const s = Math.sin(pole.omega * time);
  return [size * (pole.re * c - pole.im * s), size * (pole.re * s + pole.im * c)];
}

/** Rms of what the poles leave of the end of the trace, over the rms of that end. */
function restShare(values: Float64Array, step: number, poles: readonly Pole[]): number {
  const first = Math.floor(values.length * (1 - CHECKED_SHARE));
  const rest = values.slice(first);
  let whole = 0;
  for (const value of rest) whole += value * value;
  for (const pole of poles) {
    let [re, im] = turned(pole, first * step);
    const size = Math.exp(-pole.alpha * step);
    const c = size * Math.cos(pole.omega * step);
    const s = size * Math.sin(pole.omega * step);
    for (let n = 0; n < rest.length; n += 1) {
      rest[n] -= 2 * re;
      [re, im] = [re * c - im * s, re * s + im * c];
    }
  }
  let left = 0;
  for (const value of rest) left += value * value;
  return whole > 0 ? Math.sqrt(left / whole) : 0;
}
