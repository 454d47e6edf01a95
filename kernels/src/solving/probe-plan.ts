/** What a scene's probes read from the engine, and how the records become traces. */
import type { Lattice } from "../lattice/index.js";
import {
  engineFieldOf,
  firstSampleStep,
  LinePower,
  pointProbeTaps,
  powerTaps,
  unitOf,
  voltageTaps,
} from "../observers/index.js";
import type { PortMode } from "../ports/index.js";
import { PORT_RECORDS, portTaps } from "../ports/index.js";
import type { ResolvedScene } from "../scene/index.js";
import type { Tap } from "../stepping/index.js";

export interface PlannedProbe {
  id: string;
  kind: "point" | "line" | "area";
  /** A field component, "voltage", "power", "absorbed" or "energy". */
  quantity: string;
  unit: string;
  /** Time of sample 0 over Δt, and of each from the one before. */
  firstSampleStep: number;
  every: number;
  /** Running sums of a power probe. */
  power: LinePower | null;
}

export interface ProbePlan {
  probes: readonly PlannedProbe[];
  taps: readonly Tap[];
  /** Samples of a step: one for each probe, then those of the ports. */
  samples: number;
  /** Records of a step: the samples, in their order, then the pieces of power probes. */
  records: number;
}

/** Running sums of all power probes together may hold so many numbers (800 MB). */
const MOST_SUMS = 1e8;
/** Running sums sample pulses this many times a period of the band's upper edge: what folds over lies far above what a pulse excites. */
const SAMPLES_A_PERIOD = 8;

/** Sampled waveforms may excite anything, so every step of theirs counts. */
function everyStep(scene: ResolvedScene, dt: number): number {
  if (scene.sources.some(({ waveform }) => waveform.kind === "samples")) return 1;
  return Math.max(1, Math.floor(1 / (SAMPLES_A_PERIOD * scene.band.toGHz * 1e9 * dt)));
}

/**
 * Taps and records of all probes. Throws a RangeError for a probe that the polarization does not have, or power probes whose running
 * sums would not fit.
 *
 * @param frequenciesGHz those of the spectra
 * @param modes those of the ports
 * @param framesEvery steps between two frames, the samples of area probes
 */
export function probesOf(
  scene: ResolvedScene,
  lattice: Lattice,
  frequenciesGHz: readonly number[],
  modes: readonly PortMode[],
  framesEvery: number,
): ProbePlan {
  const probes: PlannedProbe[] = [];
  const taps = modes.flatMap((mode, index) => portTaps(mode, scene.probes.length + PORT_RECORDS * index));
  const recorded = scene.probes.length + PORT_RECORDS * modes.length;
  let records = recorded;
  let sums = 0;
  for (const probe of scene.probes) {
    const { id } = probe;
    const record = probes.length;
    if (probe.kind === "area") {
      const { kind, quantity } = probe;
      const unit = quantity === "absorbed" ? "W/m" : "J/m";
      const times = { firstSampleStep: framesEvery, every: framesEvery };
      probes.push({ id, kind, quantity, unit, ...times, power: null });
    } else if (probe.kind === "point") {
      const place = engineFieldOf(lattice, probe.field);
      if (!place)
        throw new RangeError(`The probe "${id}" reads ${probe.field}, which ${scene.polarization} lacks.`);
      taps.push(...pointProbeTaps(lattice, probe.field, probe.x, probe.y, record));
      probes.push({
        id,
        kind: "point",
        quantity: probe.field,
        unit: unitOf(probe.field),
        firstSampleStep: firstSampleStep(place.field),
        every: 1,
        power: null,
      });
    } else if (probe.quantity === "voltage") {
      taps.push(...voltageTaps(lattice, probe.from, probe.to, record));
      probes.push({
        id,
        kind: "line",
        quantity: "voltage",
        unit: "V",
        firstSampleStep: firstSampleStep("gx"),
        every: 1,
        power: null,
      });
    } else {
      const line = powerTaps(lattice, probe.from, probe.to, records);
      sums += 4 * line.pieces * frequenciesGHz.length;
      if (sums > MOST_SUMS)
        throw new RangeError(
          `The power through "${id}" needs more memory than there is for running sums; shorten the line or ask for fewer frequencies.`,
        );
      taps.push(...line.taps);
      const power = new LinePower({
        pieces: line.pieces,
        firstRecord: records,
        dt: lattice.dt,
        frequenciesHz: frequenciesGHz.map((frequency) => frequency * 1e9),
        every: everyStep(scene, lattice.dt),
      });
      records += 2 * line.pieces;
      probes.push({ id, kind: "line", quantity: "power", unit: "W/m", firstSampleStep: 0, every: 1, power });
    }
  }
  return { probes, taps, samples: recorded, records };
}

/** Step-major samples of all probes and ports from step-major records of the engine; the same array where there is no power probe. */
export function samplesOf(
  { probes, samples: count, records: width }: ProbePlan,
  records: Float64Array,
  steps: number,
): Float64Array {
  if (width === count) return records;
  const samples = new Float64Array(steps * count);
  for (let column = 0; column < count; column += 1) {
    const power = probes.at(column)?.power;
    if (power) power.take(records, width, steps, samples, count, column);
    else for (let t = 0; t < steps; t += 1) samples[t * count + column] = records[t * width + column];
  }
  return samples;
}

/** The running sums of all power probes, one after the other. */
export function saveSums(probes: readonly PlannedProbe[]): Float64Array {
  const all = probes.map(({ power }) => power?.save() ?? new Float64Array(0));
  const packed = new Float64Array(all.reduce((sum, { length }) => sum + length, 0));
  let offset = 0;
  for (const part of all) {
    packed.set(part, offset);
    offset += part.length;
  }
  return packed;
}

/** Throws a RangeError where they do not fit the probes. */
export function loadSums(probes: readonly PlannedProbe[], packed: Float64Array): void {
  let offset = 0;
  for (const { power } of probes) {
    if (!power) continue;
    power.load(packed.subarray(offset, offset + power.size));
    offset += power.size;
  }
}
