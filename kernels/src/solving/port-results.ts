/** Scattering parameters from the runs of a scene's driven ports. */
import type { ComplexValues, SampledSignal } from "../analysis/index.js";
import { fallenDb, fourierSum } from "../analysis/index.js";
import type { ComplexTable, PortWaves } from "../ports/index.js";
import {
  complexTable,
  largestGain,
  latticeCutoff,
  PORT_FIRST_SAMPLES,
  PORT_RECORDS,
  portWaves,
  scatteringColumns,
} from "../ports/index.js";
import type { SolveResult } from "../scene/index.js";
import { guideFrequencies, SEVERAL_FILLS } from "./guide-width.js";
import { invertersOf } from "./inverters.js";
import type { LegRecord } from "./leg-record.js";
import { NEAR_CUTOFF, portDrives } from "./port-plan.js";
import type { PortPlan } from "./port-plan.js";
import { RUNG_DOWN_DB } from "./spectra.js";

/** Sums take so many samples a period of the band's upper edge: what folds over lies far above what a pulse excites. */
const SAMPLES_A_PERIOD = 8;
/** Group delays are differences of the phase over this share of the band to both sides. */
const DELAY_SHARE = 1 / 4000;
/** A tail this far below what was sent in is taken as over, whatever it has fallen from. */
const NOTHING_DB = 60;

/** The waves of one run. */
export interface LegWaves {
  driven: number;
  /** By port, at the frequencies asked for, then a little below and above each. */
  ports: readonly PortWaves[];
  unfinished: boolean;
  warnings: string[];
}

type PortRecord = LegRecord & { ports: PortPlan };
const hasPorts = (record: LegRecord): record is PortRecord => record.ports !== null;

/** Fourier sums at every so-many-th sample. */
function sparseSum(signal: SampledSignal, record: LegRecord, frequencies: readonly number[]): ComplexValues {
  const every = Math.max(
    1,
    Math.floor(1 / (SAMPLES_A_PERIOD * record.resolved.band.toGHz * 1e9 * signal.step)),
  );
  const values = Float64Array.from(
    { length: Math.ceil(signal.values.length / every) },
    (_, n) => signal.values[n * every],
  );
  return fourierSum({ start: signal.start, step: signal.step * every, values }, frequencies);
}

/** ψ and γ of each port as in the whole field: what was scattered, and in the driven port's γ what was sent in. */
function portSignals(record: PortRecord): [SampledSignal, SampledSignal][] {
  const { lattice, ports, steps } = record;
  const { generator } = portDrives(record.resolved, lattice, ports).sources[0];
  const sent = new Float64Array(steps * generator.signals);
  generator.write(0, steps, sent, generator.signals, 0);
  return ports.modes.map((_, port) => {
    const column = record.probes.length + PORT_RECORDS * port;
    const signal = (of: 0 | 1, values: Float64Array): SampledSignal => ({
      start: PORT_FIRST_SAMPLES[of] * lattice.dt,
      step: lattice.dt,
      values,
    });
    const scattered = record.traces(column + 1);
    const gamma = scattered.map((value, n) =>
      port === ports.driven ? value + sent[n * generator.signals + 1] : value,
    );
    return [signal(0, record.traces(column)), signal(1, gamma)];
  });
}

const largestOf = (values: Float64Array): number =>
  values.reduce((most, value) => Math.max(most, Math.abs(value)), 0);

export function legWaves(record: LegRecord): LegWaves | null {
  if (!hasPorts(record)) return null;
  const { ports, lattice, drives, resolved, frequenciesGHz } = record;
  const delta = (resolved.band.toGHz - resolved.band.fromGHz) * 1e9 * DELAY_SHARE;
  const own = frequenciesGHz.map((frequency) => frequency * 1e9);
  const frequencies = [...own, ...own.map((hz) => hz - delta), ...own.map((hz) => hz + delta)];
  const warnings: string[] = [];
  let unfinished = false;
  const over = record.steps * lattice.dt >= drives.endSeconds;
  if (!over) {
    unfinished = true;
    warnings.push(`The run was stopped while the port "${ports.modes[ports.driven].id}" was still driving.`);
  }
  const slow = ports.modes.filter((mode) => {
    const cutoff = latticeCutoff(lattice, mode);
    return own.some((hz) => hz > cutoff && hz < NEAR_CUTOFF * cutoff);
  });
  for (const mode of slow)
    warnings.push(
      `Below ${NEAR_CUTOFF} times the cut-off of the port "${mode.id}" (${(latticeCutoff(lattice, mode) / 1e9).toPrecision(4)} GHz) S is rough: waves there leave too slowly.`,
    );
  if (guideFrequencies(resolved, []) === null) warnings.push(SEVERAL_FILLS);
  const signals = portSignals(record);
  const powerOf = (port: number): number => Math.sqrt(ports.modes[port].norm);
  const sent = largestOf(signals[ports.driven][0].values) * powerOf(ports.driven);
  const fallen = signals.map(([psi], port) => {
    const level = fallenDb(psi.values);
    const below = level + 20 * Math.log10(sent / (largestOf(psi.values) * powerOf(port)));
    return below >= NOTHING_DB ? Number.POSITIVE_INFINITY : level;
  });
  const waves = signals.map((pair, port): PortWaves => {
    const sums = pair.map((signal) => sparseSum(signal, record, frequencies));
    if (over && fallen[port] < RUNG_DOWN_DB) {
      unfinished = true;
      warnings.push(
        `The wave at the port "${ports.modes[port].id}" had fallen by ${fallen[port].toFixed(0)} dB only when the run that drives "${ports.modes[ports.driven].id}" stopped (${RUNG_DOWN_DB} dB are needed): S is rough, and no limit is judged on it. Run longer.`,
      );
    }
    return portWaves(lattice, ports.modes[port], frequencies, sums[0], sums[1]);
  });
  return { driven: ports.driven, ports: waves, unfinished, warnings };
}

/** The wave that a run's port sends in, at the frequencies asked for: what a spectrum is divided by; NaN below cut-off. */
export function sentWave(waves: LegWaves, count: number): ComplexValues {
  const { a } = waves.ports[waves.driven];
  return { re: a.re.subarray(0, count), im: a.im.subarray(0, count) };
}

/** S at one entry of the frequencies: [to][run] as complex numbers, null where a port is below cut-off. */
function scatteringAt(
  runs: readonly LegWaves[],
  n: number,
): { table: ComplexTable; ports: number[]; runs: number[] } {
  const count = runs[0].ports.length;
  const carries = (port: number): boolean => Number.isFinite(runs[0].ports[port].a.re[n]);
  const ports = Array.from({ length: count }, (_, port) => port).filter(carries);
  const columns = runs.flatMap(({ driven }, run) => (carries(driven) ? [run] : []));
  const fill = (of: "a" | "b"): ComplexTable => {
    const table = complexTable(ports.length, columns.length);
    ports.forEach((port, i) => {
      columns.forEach((run, j) => {
        table.re[i * columns.length + j] = runs[run].ports[port][of].re[n];
        table.im[i * columns.length + j] = runs[run].ports[port][of].im[n];
      });
    });
    return table;
  };
  const driven = columns.map((run) => ports.indexOf(runs[run].driven));
  const table = scatteringColumns(fill("a"), fill("b"), driven);
  // To the reference planes.
  ports.forEach((port, i) => {
    columns.forEach((run, j) => {
      const k = i * columns.length + j;
      const angle = runs[0].ports[port].shift[n] + runs[0].ports[runs[run].driven].shift[n];
      const [re, im] = [table.re[k], table.im[k]];
      table.re[k] = re * Math.cos(angle) - im * Math.sin(angle);
      table.im[k] = re * Math.sin(angle) + im * Math.cos(angle);
    });
  });
  return { table, ports, runs: columns };
}

type PortsBlock = NonNullable<SolveResult["ports"]>;

/** The block `ports` of a result; undefined where no port was driven. */
export function portsInDocument(
  records: readonly LegRecord[],
  waves: readonly (LegWaves | null)[],
): PortsBlock | undefined {
  const runs = waves.filter((run) => run !== null);
  const first = records.find(hasPorts);
  if (!first || runs.length === 0) return undefined;
  const ids = first.ports.modes.map(({ id }) => id);
  const GHz = [...first.frequenciesGHz];
  const count = GHz.length;
  const { fromGHz, toGHz } = first.resolved.band;
  const delta = (toGHz - fromGHz) * 1e9 * DELAY_SHARE;
  const nothing = (): (number | null)[] => GHz.map(() => null);
  const s = runs.flatMap(({ driven }) =>
    ids.map((to) => ({ to, from: ids[driven], re: nothing(), im: nothing(), groupDelayNs: nothing() })),
  );
  const reliable = (hz: number): boolean =>
    first.ports.modes.every((mode) => {
      const cutoff = latticeCutoff(first.lattice, mode);
      return hz <= cutoff || hz >= NEAR_CUTOFF * cutoff;
    });
  let worst: number | null = null;
  let atGHz: number | null = null;
  for (let n = 0; n < count; n += 1) {
    const [here, below, above] = [n, n + count, n + 2 * count].map((at) => scatteringAt(runs, at));
    const judged = here.runs.length > 0 && reliable(GHz[n] * 1e9);
    const gain = judged ? largestGain(here.table) : Number.NaN;
    if (Number.isFinite(gain) && gain > (worst ?? -1)) {
      worst = gain;
      atGHz = GHz[n];
    }
    const valueOf = (at: typeof here, port: number, run: number): [number, number] | null => {
      const [i, j] = [at.ports.indexOf(port), at.runs.indexOf(run)];
      if (i < 0 || j < 0) return null;
      const k = i * at.runs.length + j;
      const [re, im] = [at.table.re[k], at.table.im[k]];
      return Number.isFinite(re) && Number.isFinite(im) ? [re, im] : null;
    };
    runs.forEach((_, run) => {
      ids.forEach((_id, port) => {
        const entry = s[run * ids.length + port];
        const value = valueOf(here, port, run);
        if (!value) return;
        [entry.re[n], entry.im[n]] = value;
        const [p, q] = [valueOf(below, port, run), valueOf(above, port, run)];
        if (!p || !q) return;
        const turn = Math.atan2(q[1] * p[0] - q[0] * p[1], q[0] * p[0] + q[1] * p[1]);
        entry.groupDelayNs[n] = (-turn / (4 * Math.PI * delta)) * 1e9;
      });
    });
  }
  const guideGHz = guideFrequencies(first.resolved, GHz);
  const inverters = invertersOf(s);
  return {
    GHz,
    ...(guideGHz && { guideGHz }),
    s,
    ...(inverters && { inverters }),
    passivity: { worst, atGHz },
  };
}
