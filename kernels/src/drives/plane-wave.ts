/**
 * The incident plane wave at the places where the total field meets the scattered one, as signals.
 *
 * F and G of a plane wave depend on s = x cosφ + y sinφ and the time alone. So for each of the three fields one line along s is filled at
 * every step, at the places s = m·δ with δ = vΔt, and the signals are read between its places. Filters (see `wave-filters.ts`) are kept
 * for few places of the line, m = P·i; what they make of w is interpolated between them at the time n − m, and F(m·δ, nΔt) is found.
 * Everything follows from the waveform and the step's number: there is no state, and nothing accumulates.
 */
import type { SignalGenerator } from "./generators.js";
import { NODES, NODES_BEFORE, writeLagrangeWeights } from "./lagrange.js";
import { SlidingSeries } from "./sliding-series.js";
import { MOST_SPACING, WaveFilters } from "./wave-filters.js";
import type { WaveField, WaveFilter, WaveMedium } from "./wave-filters.js";
import type { CompiledWaveform } from "./waveforms.js";

/** A signal: one of the fields at s metres from the origin along the wave. */
export interface WavePlace {
  field: WaveField;
  distance: number;
}

/** What of the filtered waveform may be missing before its first step, over its largest value. */
const UNHEARD = 1e-5;
const WAVE_FIELDS: readonly WaveField[] = ["f", "gx", "gy"];

/** A filtered waveform at one kept place of a line. */
interface Station {
  series: SlidingSeries;
  /** Places of the line that read it: it is needed at the times n − m. */
  lowest: number;
  highest: number;
  /** The filter takes w from so many steps before (latest) to so many before (earliest, mostly negative). */
  earliest: number;
  latest: number;
}

/** One field along s: its stations and its places m = first … last, and which signals read it. */
interface FieldLine {
  first: number;
  stations: readonly Station[];
  /** By place: the first of the stations it is interpolated between; its weights repeat with the spacing. */
  base: Int32Array;
  weights: Float64Array;
  spacing: number;
  values: Float64Array;
  /** By signal of this line: its column, the first place it is read from, its weights. */
  signals: readonly number[];
  places: Int32Array;
  placeWeights: Float64Array;
}

function spacedWeights(spacing: number): Float64Array {
  const weights = new Float64Array(spacing * NODES);
  for (let m = 0; m < spacing; m += 1) writeLagrangeWeights(NODES_BEFORE + m / spacing, weights, m * NODES);
  return weights;
}

/** Steps before time 0 in which the filter already lets something through. */
function leadOf({ first, values: taps }: WaveFilter, waveform: CompiledWaveform, dt: number): number {
  const reach = Math.max(0, -first);
  const span = 2 * reach + taps.length;
  const heard = new Float64Array(span);
  for (let n = 0; n < span; n += 1) {
    let sum = 0;
    for (let l = 0; l < taps.length; l += 1) sum += taps[l] * waveform.valueAt((n - reach - first - l) * dt);
    heard[n] = Math.abs(sum);
  }
  const waves = Float64Array.from({ length: span }, (_, n) => Math.abs(waveform.valueAt(n * dt)));
  const largest = [...heard, ...waves].reduce((most, value) => Math.max(most, value), 0);
  const from = heard.findIndex((value) => value > UNHEARD * largest);
  return from < 0 ? 0 : Math.max(0, reach - from);
}

export class PlaneWaveSignals implements SignalGenerator {
  readonly signals: number;
  /** The step at which the first place begins to feel the wave; negative where that is before time 0. */
  readonly firstStep: number;
  /** Steps after the waveform's end in which the last place still feels it. */
  readonly stepsAfter: number;
  private readonly lines: readonly FieldLine[];
  private readonly wave: SlidingSeries;
  /** w from step `waveFrom` on, as far as a block of steps needs it. */
  private waves: Float64Array = new Float64Array(0);
  private waveFrom = 0;

  /**
   * @param amplitude of F: A/m (TEz) or V/m (TMz) for w = 1
   * @param places one for each signal
   */
  constructor(
    medium: WaveMedium,
    waveform: CompiledWaveform,
    private readonly amplitude: number,
    places: readonly WavePlace[],
  ) {
    const { dt } = medium.mesh;
    const delta = medium.speed * dt;
    const along = places.map(({ distance }) => distance / delta);
    const lowest = along.reduce((least, at) => Math.min(least, at), Number.POSITIVE_INFINITY);
    const highest = along.reduce((most, at) => Math.max(most, at), Number.NEGATIVE_INFINITY);
    this.signals = places.length;
    this.wave = new SlidingSeries((from, out) => {
      for (let n = 0; n < out.length; n += 1) out[n] = waveform.valueAt((from + n) * dt);
    });
    const filters = new WaveFilters(
      medium,
      Math.max(Math.abs(lowest), Math.abs(highest)) + NODES * MOST_SPACING,
    );
    this.lines = WAVE_FIELDS.flatMap((field) => {
      const signals = places.flatMap((place, signal) => (place.field === field ? [signal] : []));
      return signals.length > 0 ? [this.lineOf(filters, field, signals, along)] : [];
    });
    const before = filters.at("f", lowest);
    this.firstStep = Math.min(0, Math.floor(lowest - leadOf(before, waveform, dt)));
    const after = filters.at("f", highest);
    this.stepsAfter = Math.ceil(highest + after.first + after.values.length);
  }

  private lineOf(
    filters: WaveFilters,
    field: WaveField,
    signals: readonly number[],
    along: readonly number[],
  ): FieldLine {
    const { spacing } = filters;
    const bases = signals.map((signal) => Math.floor(along[signal]) - NODES_BEFORE);
    const first = Math.min(...bases);
    const last = Math.max(...bases) + NODES - 1;
    const firstStation = Math.floor(first / spacing) - NODES_BEFORE;
    const lastStation = Math.floor(last / spacing) - NODES_BEFORE + NODES - 1;
    const stations = Array.from({ length: lastStation - firstStation + 1 }, (_, index): Station => {
      const i = firstStation + index;
      return {
        ...this.filtered(filters.at(field, i * spacing)),
        lowest: Math.max(first, (i - (NODES - NODES_BEFORE - 1)) * spacing),
        highest: Math.min(last, (i + NODES_BEFORE + 1) * spacing - 1),
      };
    });
    const base = Int32Array.from(
      { length: last - first + 1 },
      (_, index) => Math.floor((first + index) / spacing) - NODES_BEFORE - firstStation,
    );
    const placeWeights = new Float64Array(signals.length * NODES);
    signals.forEach((signal, index) => {
      const position = along[signal] - bases[index];
      writeLagrangeWeights(position, placeWeights, index * NODES);
    });
    return {
      first,
      stations,
      base,
      weights: spacedWeights(spacing),
      spacing,
      values: new Float64Array(base.length),
      signals,
      places: Int32Array.from(bases, (place) => place - first),
      placeWeights,
    };
  }

  private filtered({ first, values: taps }: WaveFilter): Omit<Station, "lowest" | "highest"> {
    const series = new SlidingSeries((from, out) => {
      // Index of w at the newest value that out[0] takes.
      const newest = from - first - this.waveFrom;
      const { waves } = this;
      for (let n = 0; n < out.length; n += 1) {
        let sum = 0;
        for (let l = 0; l < taps.length; l += 1) sum += taps[l] * waves[newest + n - l];
        out[n] = sum;
      }
    });
    return { series, earliest: first, latest: first + taps.length - 1 };
  }

  write(first: number, steps: number, out: Float64Array, width: number, column: number): void {
    this.takeWaves(first, steps);
    for (const line of this.lines) {
      const windows = line.stations.map(({ series, lowest, highest }) =>
        series.window(first - highest, first + steps - lowest),
      );
      for (let t = 0; t < steps; t += 1) {
        this.fillLine(line, windows, t);
        this.readSignals(line, out, t * width + column);
      }
    }
  }

  /** w over all times that any filter of the block may ask for. */
  private takeWaves(first: number, steps: number): void {
    let from = Number.POSITIVE_INFINITY;
    let to = Number.NEGATIVE_INFINITY;
    for (const { stations } of this.lines) {
      for (const { lowest, highest, earliest, latest } of stations) {
        from = Math.min(from, first - highest - latest);
        to = Math.max(to, first + steps - lowest - earliest);
      }
    }
    this.waves = this.wave.window(from, to);
    this.waveFrom = from;
  }

  /** The line's places at a step of the block: place m at the time n − m of its stations. */
  private fillLine(line: FieldLine, windows: readonly Float64Array[], step: number): void {
    const { base, weights, spacing, values, stations, first } = line;
    for (let index = 0; index < values.length; index += 1) {
      const m = first + index;
      const weightAt = (((m % spacing) + spacing) % spacing) * NODES;
      let sum = 0;
      for (let n = 0; n < NODES; n += 1) {
        const i = base[index] + n;
        sum += weights[weightAt + n] * windows[i][step - m + stations[i].highest];
      }
      values[index] = sum;
    }
  }

  private readSignals(line: FieldLine, out: Float64Array, at: number): void {
    const { values, signals, places, placeWeights } = line;
    for (let index = 0; index < signals.length; index += 1) {
      const place = places[index];
      let sum = 0;
      for (let n = 0; n < NODES; n += 1) sum += placeWeights[index * NODES + n] * values[place + n];
      out[at + signals[index]] = this.amplitude * sum;
    }
  }

  save(): Float64Array {
    return new Float64Array(0);
  }

  load(state: Float64Array): void {
    if (state.length > 0) throw new RangeError("The snapshot has other sources.");
  }
}
