/** Spectra of point probes per unit source, with the sentences that belong to them. */
import type { ComplexValues, SampledSignal, WideBand } from "../analysis/index.js";
import {
  completeRingDown,
  excitedBand,
  fallenDb,
  finalPeriods,
  fourierSum,
  quotient,
  tonePhasor,
} from "../analysis/index.js";
import type { ComplexSpectrum, PowerSpectrum } from "../scene/index.js";
import type { AreaLook, FrameLooks } from "./frame-looks.js";
import type { DrivePlan } from "./plan.js";
import type { PlannedProbe } from "./probe-plan.js";

/** A trace that has not fallen by this much at the stop is cut off: its poles complete it, or its spectrum stands with a warning. */
export const RUNG_DOWN_DB = 40;
/** The poles may leave this share of the tail; then no limit is judged. */
const TAIL_LEFT = 0.01;
/** Fits over all cut-off traces, and at least for each: the cost of completing them. */
const PIECES = 64;
const LEAST_PIECES = 1;
/** The search for what the waveform excites ends at this many times the band's upper edge. */
const EXCITED_TO = 4;
/** A tone is taken over at most this many whole periods at the end. */
const TONE_PERIODS = 20;
/** Two successive windows of a tone that differ by more than this share are not steady. */
const STEADY = 0.01;

export interface SpectrumInput {
  probes: readonly PlannedProbe[];
  frames: FrameLooks | null;
  drives: DrivePlan;
  traces: (probe: number) => Float64Array;
  /** Seconds. */
  dt: number;
  steps: number;
  frequenciesGHz: readonly number[];
  band: { fromGHz: number; toGHz: number };
  /** What a driven port sent in, in √(W/m)·s at each frequency; null with sources, whose waveform takes its place. */
  sent: ComplexValues | null;
}

export interface Spectra {
  /** By probe. */
  spectra: (ComplexSpectrum | PowerSpectrum | null)[];
  /** Probes whose trace was cut off before it had rung down, or was not steady. */
  unfinished: ReadonlySet<string>;
  warnings: string[];
}

const none = (probes: readonly PlannedProbe[], warning: string): Spectra => ({
  spectra: probes.map(() => null),
  unfinished: new Set(),
  warnings: probes.length > 0 ? [warning] : [],
});

/** w as it drove the steps, before the amplitude: from its own time 0 on. */
export function waveformSignal(input: Pick<SpectrumInput, "drives" | "dt" | "steps">): SampledSignal {
  const { waveform, offset } = input.drives.sources[0];
  const { dt, steps } = input;
  const last = Math.max(0, input.drives.firstStep + steps);
  const driven = Math.min(last, Math.ceil(waveform.endSeconds / dt) + 1);
  const values = Float64Array.from({ length: driven }, (_, n) => waveform.valueAt((n + offset) * dt));
  return { start: offset * dt, step: dt, values };
}

/** ∫w·exp(−jωt)dt of the waveform that all sources share. Throws a RangeError where they share none. */
export function driveTransform(
  input: Pick<SpectrumInput, "drives" | "dt" | "steps">,
  hz: number,
): { re: number; im: number } {
  const first = input.drives.sources.at(0);
  if (!first || input.drives.sources.some(({ waveformText }) => waveformText !== first.waveformText))
    throw new RangeError("The sources share no waveform that a phasor could be a unit of.");
  const { re, im } = fourierSum(waveformSignal(input), [hz]);
  return { re: re[0], im: im[0] };
}

export const traceSignal = (input: SpectrumInput, probe: number): SampledSignal => ({
  start: (input.drives.firstStep + input.probes[probe].firstSampleStep) * input.dt,
  step: input.probes[probe].every * input.dt,
  values: input.traces(probe),
});

/** Probes whose spectra are averages of products of fields. */
const isAverage = ({ kind, power }: PlannedProbe): boolean => power !== null || kind === "area";

const defined = (values: Float64Array): (number | null)[] =>
  Array.from(values, (value) => (Number.isFinite(value) ? value : null));

/** @param divisor |…|² of what drives, at the area's frequencies */
function areaSpectrum({ probe, frequenciesGHz }: AreaLook, divisor: Float64Array): PowerSpectrum {
  const { electric, magnetic, meanField, worstField } = probe.figures();
  return {
    GHz: [...frequenciesGHz],
    value: defined(electric.map((value, n) => (value + magnetic[n]) / divisor[n])),
    electric: defined(electric.map((value, n) => value / divisor[n])),
    magnetic: defined(magnetic.map((value, n) => value / divisor[n])),
    meanField: defined(meanField.map((value, n) => value / Math.sqrt(divisor[n]))),
    worstField: defined(worstField.map((value, n) => value / Math.sqrt(divisor[n]))),
  };
}

function pulseSpectra(input: SpectrumInput): Spectra {
  const frequencies = input.frequenciesGHz.map((frequency) => frequency * 1e9);
  const waveform = waveformSignal(input);
  const divisor = input.sent ?? fourierSum(waveform, frequencies);
  const warnings: string[] = [];
  const unfinished = new Set<string>();
  const over = (input.drives.firstStep + input.steps) * input.dt >= input.drives.endSeconds;
  if (!over)
    warnings.push(
      "The run was stopped while its sources were still driving; its spectra are of what was driven until then.",
    );
  const signals = input.probes.map((_, index) => traceSignal(input, index));
  // A power falls twice as fast as the fields that make it.
  const fallen = signals.map(
    ({ values }, index) => fallenDb(values) / (isAverage(input.probes[index]) ? 2 : 1),
  );
  const cut = fallen.filter((level, index) => level < RUNG_DOWN_DB && !isAverage(input.probes[index])).length;
  const pieces = Math.max(LEAST_PIECES, Math.floor(PIECES / Math.max(1, cut)));
  const excited: WideBand = excitedBand(waveform, EXCITED_TO * input.band.toGHz * 1e9);
  const powerSpectrum = (powers: readonly number[]): PowerSpectrum => ({
    GHz: [...input.frequenciesGHz],
    value: powers.map((power, n) => {
      const value = power / (divisor.re[n] ** 2 + divisor.im[n] ** 2);
      return Number.isFinite(value) ? value : null;
    }),
  });
  const noteUnfinished = (id: string, index: number, why: string): void => {
    unfinished.add(id);
    warnings.push(
      `The trace of "${id}" had fallen by ${fallen[index].toFixed(0)} dB only when the run stopped (${RUNG_DOWN_DB} dB are needed)${why}: sharp peaks of its spectrum read too low, and no limit is judged on it. Run longer.`,
    );
  };
  const divisorOf = (wantedGHz: readonly number[]): Float64Array =>
    Float64Array.from(wantedGHz, (frequency) => {
      const n = input.frequenciesGHz.indexOf(frequency);
      return divisor.re[n] ** 2 + divisor.im[n] ** 2;
    });
  const spectra = input.probes.map((probe, index): ComplexSpectrum | PowerSpectrum => {
    if (probe.power && over && fallen[index] >= RUNG_DOWN_DB) return powerSpectrum(probe.power.powers());
    const area = input.frames?.areas.get(index);
    if (area) {
      if (!over || fallen[index] < RUNG_DOWN_DB) noteUnfinished(probe.id, index, "");
      return areaSpectrum(area, divisorOf(area.frequenciesGHz));
    }
    const sum = fourierSum(signals[index], frequencies);
    const GHz = [...input.frequenciesGHz];
    if (over && fallen[index] >= RUNG_DOWN_DB) return { GHz, ...quotient(sum, divisor) };
    // What is left in a guide are waves near its cut-off, which no poles tell.
    const completion =
      over && !probe.power && !input.sent
        ? completeRingDown(signals[index], excited, input.drives.endSeconds, frequencies, pieces)
        : null;
    if (completion && completion.left <= TAIL_LEFT) {
      sum.re.forEach((_, n) => {
        sum.re[n] += completion.tail.re[n];
        sum.im[n] += completion.tail.im[n];
      });
      return { GHz, ...quotient(sum, divisor), completed: true };
    }
    const why = completion
      ? ` and its poles leave ${(100 * completion.left).toPrecision(2)} % of the rest untold`
      : "";
    noteUnfinished(probe.id, index, why);
    return probe.power ? powerSpectrum(probe.power.powers()) : { GHz, ...quotient(sum, divisor) };
  });
  return { spectra, unfinished, warnings };
}

function toneSpectra(input: SpectrumInput, hz: number): Spectra {
  const { dt, steps, probes } = input;
  const { waveform, offset } = input.drives.sources[0];
  const start = (input.drives.firstStep + offset) * dt;
  const GHz = [hz / 1e9];
  const periods = finalPeriods(Math.floor(steps / 2), dt, hz, TONE_PERIODS);
  if (periods === 0) {
    return none(probes, "The run ended within two periods of its tone, so there is no spectrum; run longer.");
  }
  const window = Math.round(periods / (hz * dt));
  const divisor = tonePhasor(
    {
      start,
      step: dt,
      values: Float64Array.from({ length: steps }, (_, n) => waveform.valueAt(start + n * dt)),
    },
    hz,
    steps - window,
    steps,
  );
  const warnings: string[] = [];
  const unfinished = new Set<string>();
  if (probes.some(isAverage))
    warnings.push(
      "With a tone, probes of power and energy have a trace but no average; drive with a pulse for it.",
    );
  const spectra = probes.map((probe, index): ComplexSpectrum | null => {
    if (isAverage(probe)) return null;
    const signal = traceSignal(input, index);
    const last = tonePhasor(signal, hz, steps - window, steps);
    const before = tonePhasor(signal, hz, steps - 2 * window, steps - window);
    const change = Math.hypot(last[0] - before[0], last[1] - before[1]);
    if (!(change <= STEADY * Math.hypot(last[0], last[1]))) {
      unfinished.add(probe.id);
      warnings.push(
        `The tone at "${probe.id}" was not yet steady when the run stopped: over the last ${periods} periods it changed by more than ${STEADY * 100} %. Run longer.`,
      );
    }
    const asValues = ([re, im]: [number, number]): { re: Float64Array; im: Float64Array } => ({
      re: Float64Array.of(re),
      im: Float64Array.of(im),
    });
    return { GHz, ...quotient(asValues(last), asValues(divisor)) };
  });
  return { spectra, unfinished, warnings };
}

/** Spectra of all probes; null with the reason in `warnings` where there can be none. */
export function spectraOf(input: SpectrumInput): Spectra {
  const { sources } = input.drives;
  const first = sources.at(0);
  if (!first || input.steps === 0) return none(input.probes, "Nothing was driven, so there are no spectra.");
  if (sources.some((source) => source.waveformText !== first.waveformText)) {
    return none(
      input.probes,
      "The sources have different waveforms, so there is no spectrum per unit source; give all of them one waveform.",
    );
  }
  const { toneHz } = first.waveform;
  return toneHz === null ? pulseSpectra(input) : toneSpectra(input, toneHz);
}
