/**
 * All poles of a ring-down over a wide band: the band is cut into pieces that one small fit can hold, at several lengths of the trace,
 * since what dies early is lost in a long, slowly sampled window and what is close together needs one.
 */
import type { Pole } from "./band-fit.js";
import { bandPoles, WINDOW_SAMPLES } from "./band-fit.js";

export interface WideBand {
  /** Hz. */
  from: number;
  to: number;
}

/** Each length is this part of the one before. */
const SHORTER = 1 / 6;
/** Lengths are tried down to this many periods of the band's lower edge, */
const LEAST_PERIODS = 4;
/** … and, but for the longest, to this product of time and bandwidth, below which a window tells no two frequencies apart. */
const LEAST_RESOLUTION = 3;
/**
 * A shorter length adds only what dies in it by this many nepers: the rest is told by a longer one, and a shorter one may take two of it
 * for one.
 */
const DYING = 3;
/** Below this part of the ring-down's largest value a trace is rounding of the single-precision fields. */
const FLOOR = 1e-5;

/** Length up to the last sample that stands above the floor of rounding; 0 for silence. */
export function audibleLength(values: Float64Array): number {
  let largest = 0;
  for (const value of values) largest = Math.max(largest, Math.abs(value));
  if (!(largest > 0)) return 0;
  let length = values.length;
  while (length > 0 && Math.abs(values[length - 1]) < FLOOR * largest) length -= 1;
  return length;
}

/** Poles within the band, found in the trace's first `length` samples. */
export function polesOver(values: Float64Array, dt: number, band: WideBand, length: number): Pole[] {
  const pieces = piecesFor(dt, band, length);
  const width = (band.to - band.from) / pieces;
  const used = values.subarray(0, length);
  let largest = 0;
  for (const value of values) largest = Math.max(largest, Math.abs(value));
  const found = Array.from({ length: pieces }, (_, piece) =>
    bandPoles(
      used,
      dt,
      { center: band.from + (piece + 0.5) * width, halfWidth: 0.505 * width },
      FLOOR * largest,
    ),
  ).flat();
  return distinct(found);
}

/** Pieces of a band of which each fills the pass band of its decimated signal. */
const piecesFor = (dt: number, band: WideBand, length: number): number =>
  Math.max(1, Math.ceil((2 * (band.to - band.from) * length * dt) / WINDOW_SAMPLES));

/** The longest part of a trace whose band is cut into at most `pieces` pieces. */
export const longestFor = (dt: number, band: WideBand, pieces: number): number =>
  Math.floor((pieces * WINDOW_SAMPLES) / (2 * (band.to - band.from) * dt));

/** Distance of two poles and what of it their uncertainties explain; either's tenth of a width is never told apart. */
export function samePole(a: Pole, b: Pole): boolean {
  const explained =
    3 * (a.omegaUncertainty + b.omegaUncertainty) +
    3 * (a.alphaUncertainty + b.alphaUncertainty) +
    0.1 * Math.min(Math.abs(a.alpha), Math.abs(b.alpha));
  return Math.hypot(a.omega - b.omega, a.alpha - b.alpha) <= explained + 1e-9 * a.omega;
}

const uncertainty = (pole: Pole): number => Math.hypot(pole.omegaUncertainty, pole.alphaUncertainty);

/**
 * Poles of a ring-down, each once, as the length of trace that tells it best gives it.
 *
 * @param values the trace from where nothing drives any more
 * @param pieces fits that may be made at the longest length: the cost
 */
export function ringDownPoles(values: Float64Array, dt: number, band: WideBand, pieces: number): Pole[] {
  const audible = audibleLength(values);
  const found: Pole[] = [];
  const longest = Math.min(audible, longestFor(dt, band, pieces));
  const tells = (length: number): boolean =>
    length * dt * band.from >= LEAST_PERIODS &&
    (length === longest || length * dt * (band.to - band.from) >= LEAST_RESOLUTION);
  for (let length = longest; tells(length); length = Math.floor(length * SHORTER)) {
    const dying = length === longest ? Number.NEGATIVE_INFINITY : DYING / (length * dt);
    found.push(...polesOver(values, dt, band, length).filter(({ alpha }) => alpha >= dying));
  }
  return distinct(found);
}

/** Each pole once, as the least uncertain of its sightings has it, in rising order. */
function distinct(found: readonly Pole[]): Pole[] {
  const kept: Pole[] = [];
  for (const pole of [...found].sort((a, b) => uncertainty(a) - uncertainty(b))) {
    if (!kept.some((other) => samePole(other, pole))) kept.push(pole);
  }
  return kept.sort((a, b) => a.omega - b.omega);
}
