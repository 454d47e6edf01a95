/** Resonances of a section from the ring-downs of its probes, each once, with what the probes agree on. */
import type { Pole, WideBand } from "./poles/index.js";
import { ringDownPoles, samePole } from "./poles/index.js";
import type { SampledSignal } from "./spectrum.js";

export interface ProbeTrace {
  id: string;
  signal: SampledSignal;
}

export interface FoundResonance {
  /** The probe that tells it best. */
  probe: string;
  hz: number;
  hzUncertainty: number;
  /** ω/2α; null where the decay is not told apart from none. */
  q: number | null;
  qUncertainty: number | null;
  /** The loss 1/Q and its uncertainty, known also where it is too small for a Q. */
  loss: number;
  lossUncertainty: number;
  /** Its share of that probe's spectrum at its frequency, 20·lg of the probe's unit per unit source. */
  levelDb: number | null;
}

/** What falls off within less than this Q is no resonance but the end of a pulse. */
const LEAST_Q = 3;
/** An uncertain loss below this many of its uncertainties gives no Q. */
const TOLD_APART = 3;
/** Fits over the whole band and all probes: the cost. */
const PIECES = 32;
const LEAST_PIECES = 2;
const MOST_PROBES = 16;
/** Periods of the band's lower edge that a ring-down must last to be looked at. */
const LEAST_PERIODS = 4;

interface Sighting {
  probe: ProbeTrace;
  /** Seconds: the time of the sample at which the pole's phasor stands. */
  at: number;
  pole: Pole;
}

/** The part of a trace from which on nothing drives. */
export function freePart({ start, step, values }: SampledSignal, from: number): SampledSignal {
  const first = Math.min(values.length, Math.max(0, Math.ceil((from - start) / step)));
  return { start: start + first * step, step, values: values.subarray(first) };
}

/** Whether the traces last long enough after `from` seconds for a resonance of the band to be told. */
export const ringDownLasts = (traces: readonly ProbeTrace[], band: WideBand, from: number): boolean =>
  traces.some(({ signal }) => {
    const free = freePart(signal, from);
    return free.values.length * free.step * band.from >= LEAST_PERIODS;
  });

/** |H| of a mode at its own frequency: residue over decay; A·e^{−st} over the waveform's transform at s is the residue. */
function levelDbOf({ at, pole }: Sighting, waveform: SampledSignal | null): number | null {
  if (!waveform || !(pole.alpha > 0)) return null;
  let re = 0;
  let im = 0;
  // e^{−s(t − at)}: times from the phasor's own, so that nothing overflows by itself.
  waveform.values.forEach((value, n) => {
    const t = waveform.start + n * waveform.step - at;
    const size = value * Math.exp(pole.alpha * t);
    re += size * Math.cos(pole.omega * t);
    im -= size * Math.sin(pole.omega * t);
  });
  const level = Math.hypot(pole.re, pole.im) / (Math.hypot(re, im) * waveform.step * pole.alpha);
  return level > 0 && Number.isFinite(level) ? 20 * Math.log10(level) : null;
}

const spreadOf = ({ pole }: Sighting): number => Math.hypot(pole.omegaUncertainty, pole.alphaUncertainty);

/** An uncertainty that holds the other sightings too (the ratio of R. T. Birge, Phys. Rev. 40 (1932) 207). */
function widened(
  sightings: readonly Sighting[],
  value: (pole: Pole) => number,
  own: (pole: Pole) => number,
): number {
  const best = sightings[0].pole;
  const uncertainty = own(best);
  if (sightings.length < 2) return uncertainty;
  const sum = sightings
    .slice(1)
    .reduce((total, { pole }) => total + ((value(pole) - value(best)) / own(pole)) ** 2, 0);
  return uncertainty * Math.max(1, Math.sqrt(sum / (sightings.length - 1)));
}

function resonanceOf(sightings: readonly Sighting[], waveform: SampledSignal | null): FoundResonance {
  const [best] = sightings;
  const { omega, alpha } = best.pole;
  const omegaUncertainty = widened(
    sightings,
    (pole) => pole.omega,
    (pole) => pole.omegaUncertainty,
  );
  const alphaUncertainty = widened(
    sightings,
    (pole) => pole.alpha,
    (pole) => pole.alphaUncertainty,
  );
  const loss = (2 * alpha) / omega;
  const lossUncertainty = (2 * alphaUncertainty) / omega;
  const told = loss > TOLD_APART * lossUncertainty;
  return {
    probe: best.probe.id,
    hz: omega / (2 * Math.PI),
    hzUncertainty: omegaUncertainty / (2 * Math.PI),
    q: told ? 1 / loss : null,
    qUncertainty: told ? lossUncertainty / loss ** 2 : null,
    loss: Math.max(0, loss),
    lossUncertainty,
    levelDb: told ? levelDbOf(best, waveform) : null,
  };
}

/**
 * The resonances of a band in rising order.
 *
 * @param from seconds after which no source drives any more
 * @param waveform what drove, for the levels; null where there is no common one
 */
export function resonancesOf(
  traces: readonly ProbeTrace[],
  band: WideBand,
  from: number,
  waveform: SampledSignal | null,
): FoundResonance[] {
  const used = traces.slice(0, MOST_PROBES);
  const pieces = Math.max(LEAST_PIECES, Math.floor(PIECES / Math.max(1, used.length)));
  const sightings = used.flatMap((probe): Sighting[] => {
    const free = freePart(probe.signal, from);
    return ringDownPoles(free.values, free.step, band, pieces)
      .filter(({ omega, alpha }) => omega >= 2 * LEAST_Q * alpha)
      .filter(({ omega }) => omega >= 2 * Math.PI * band.from && omega <= 2 * Math.PI * band.to)
      .map((pole) => ({ probe, at: free.start, pole }));
  });
  const modes: Sighting[][] = [];
  for (const sighting of sightings.sort((a, b) => spreadOf(a) - spreadOf(b))) {
    const mode = modes.find(
      (others) =>
        samePole(others[0].pole, sighting.pole) && others.every(({ probe }) => probe !== sighting.probe),
    );
    if (mode) mode.push(sighting);
    else if (!modes.some(([first]) => samePole(first.pole, sighting.pole))) modes.push([sighting]);
  }
  return modes.map((mode) => resonanceOf(mode, waveform)).sort((a, b) => a.hz - b.hz);
}
