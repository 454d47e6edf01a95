/** `bench`: cell-steps a second of sections that every release can be compared by, and what they are to compiled textbook code. */
import { cpus, loadavg } from "node:os";
import type { Writable } from "node:stream";
import { parseArgs } from "node:util";
import { firstSampleStep, RunningTransform } from "../observers/index.js";
import { openSession, type SolveSession } from "../solving/index.js";
import { spawnHelper } from "../threads/index.js";
import { type BenchFigure, benchRatios } from "./bench-ratios.js";
import {
  BENCH_KINDS,
  BENCH_POLARIZATIONS,
  BENCH_SIZES,
  type BenchKind,
  type BenchPolarization,
  benchScene,
} from "./bench-scenes.js";
import { Yardsticks } from "./bench-yardsticks.js";

export interface BenchPace {
  /** Timed rounds of a case, and how long one takes at least. */
  rounds: number;
  roundSeconds: number;
  threads: readonly number[];
  yardsticks: boolean;
}

const FULL_PACE: BenchPace = { rounds: 5, roundSeconds: 0.4, threads: [1, 2], yardsticks: true };
/** The session looks at the energy every so many steps: a round holds whole turns, so that it pays for that. */
const TURN_STEPS = 64;
const TRANSFORM_FREQUENCIES = 200;

interface BenchCase {
  name: string;
  kind: BenchKind;
  cells: number;
}

const CASES: readonly BenchCase[] = BENCH_SIZES.flatMap((cells) =>
  BENCH_KINDS.map((kind) => ({ name: `${kind}-${String(cells)}`, kind, cells })),
);

/** Takes what the probes have recorded since the last call into running transforms at 200 frequencies of the band. */
class ProbeTransforms {
  private transforms: RunningTransform | null = null;
  private taken = 0;

  constructor(private readonly session: SolveSession) {}

  update(): void {
    const increments = this.session.tracesSince(this.taken);
    if (increments.length === 0) return;
    const dt = this.session.grid.stepPs * 1e-12;
    this.transforms ??= new RunningTransform(
      increments.map(() => ({ start: firstSampleStep("f") * dt })),
      dt,
      Array.from({ length: TRANSFORM_FREQUENCIES }, (_, n) => 1e9 + (7e9 * n) / (TRANSFORM_FREQUENCIES - 1)),
    );
    const steps = increments[0].values.length;
    const records = new Float64Array(steps * increments.length);
    increments.forEach(({ values }, probe) => {
      for (let n = 0; n < steps; n += 1) records[n * increments.length + probe] = values[n];
    });
    this.transforms.append(records, steps);
    this.taken += steps;
  }
}

/** Steps until at least `seconds` have passed; gives the cell-steps a second. */
const round = (
  session: SolveSession,
  transforms: ProbeTransforms,
  seconds: number,
): { steps: number; rate: number } => {
  const cells = session.grid.nx * session.grid.ny;
  const from = session.step;
  const started = performance.now();
  for (;;) {
    const outcome = session.advance(TURN_STEPS);
    if (outcome.kind !== "running") throw new Error("A bench case ended before it was timed.");
    transforms.update();
    const passed = (performance.now() - started) / 1000;
    const steps = session.step - from;
    if (passed >= seconds) return { steps, rate: (cells * steps) / passed / 1e6 };
  }
};

interface Variant {
  bench: BenchCase;
  polarization: BenchPolarization;
  threads: number;
}

interface OpenVariant extends Variant {
  session: SolveSession;
  transforms: ProbeTransforms;
  openSeconds: number;
  rates: number[];
  steps: number;
}

const openVariant = async (variant: Variant): Promise<OpenVariant> => {
  const { bench, polarization, threads } = variant;
  const started = performance.now();
  const session = await openSession(benchScene(bench.kind, bench.cells, polarization), {
    engine: "wasm",
    threads,
    spawnHelper,
  });
  const openSeconds = (performance.now() - started) / 1000;
  return { ...variant, session, transforms: new ProbeTransforms(session), openSeconds, rates: [], steps: 0 };
};

const figureOf = ({
  bench,
  polarization,
  threads,
  session,
  openSeconds,
  rates,
  steps,
}: OpenVariant): BenchFigure => {
  const sorted = [...rates].sort((a, b) => a - b);
  const { nx, ny } = session.grid;
  return {
    case: bench.name,
    polarization,
    engine: "wasm",
    threads,
    nx,
    ny,
    cells: nx * ny,
    steps,
    millionCellStepsPerSecond: sorted[sorted.length - 1],
    medianMillionCellStepsPerSecond: sorted[Math.floor(sorted.length / 2)],
    openSeconds,
  };
};

/**
 * Times variants in turns, round by round, with their yardsticks before, amid and after, so that all see the same machine even
 * where others use it too.
 */
const measureTogether = async (
  variants: readonly Variant[],
  yardsticks: Yardsticks,
  pace: BenchPace,
): Promise<BenchFigure[]> => {
  const opened: OpenVariant[] = [];
  try {
    for (const variant of variants) opened.push(await openVariant(variant));
    // Warm: the optimizing compiler has had its turn, the wave fills a part of the section.
    for (const { session, transforms } of opened) round(session, transforms, pace.roundSeconds);
    for (let turn = 0; turn < pace.rounds; turn += 1) {
      if (turn === 0 || turn === Math.floor(pace.rounds / 2)) yardsticks.measure(variants[0].bench.cells);
      for (const variant of opened) {
        const { steps, rate } = round(variant.session, variant.transforms, pace.roundSeconds);
        variant.rates.push(rate);
        variant.steps = steps;
      }
    }
    yardsticks.measure(variants[0].bench.cells);
    return opened.map(figureOf);
  } finally {
    for (const { session } of opened) session.dispose();
  }
};

const figureLine = (figure: BenchFigure): string =>
  [
    figure.case.padEnd(11),
    figure.polarization,
    `${String(figure.threads)} thread${figure.threads === 1 ? " " : "s"}`,
    `${figure.millionCellStepsPerSecond.toFixed(0).padStart(6)} M cell-steps/s`,
    `(median ${figure.medianMillionCellStepsPerSecond.toFixed(0)})`,
  ].join("  ");

/** Sections of more cells are not held in memory in both polarizations at once. */
const MOST_CELLS_TOGETHER = 2048;

const measureAll = async (
  chosen: readonly BenchCase[],
  yardsticks: Yardsticks,
  pace: BenchPace,
  say: (line: string) => void,
): Promise<BenchFigure[]> => {
  const figures: BenchFigure[] = [];
  for (const bench of chosen) {
    const of = (polarization: BenchPolarization): Variant[] =>
      pace.threads.map((threads) => ({ bench, polarization, threads }));
    const groups =
      bench.cells > MOST_CELLS_TOGETHER ? BENCH_POLARIZATIONS.map(of) : [BENCH_POLARIZATIONS.flatMap(of)];
    for (const group of groups) {
      const measured = await measureTogether(group, yardsticks, pace);
      for (const figure of measured) say(figureLine(figure));
      figures.push(...measured);
    }
  }
  return figures;
};

/** Measures every case, or the one that `--case` names. Resolves with the exit status: 0, or 2 for a wrong option. */
export const runBench = async (
  args: readonly string[],
  stdout: Writable,
  stderr: Writable,
  pace: BenchPace = FULL_PACE,
): Promise<0 | 2> => {
  let values: { json?: boolean; case?: string };
  try {
    ({ values } = parseArgs({
      args: [...args],
      options: { json: { type: "boolean" }, case: { type: "string" } },
    }));
  } catch (error) {
    stderr.write(
      `options: ${error instanceof Error ? error.message : "They cannot be read"}; use --json and --case NAME.\n`,
    );
    return 2;
  }
  const chosen = values.case === undefined ? CASES : CASES.filter(({ name }) => name === values.case);
  if (chosen.length === 0) {
    stderr.write(
      `--case: There is no case "${values.case ?? ""}"; use ${CASES.map(({ name }) => name).join(", ")}.\n`,
    );
    return 2;
  }
  const say = (line: string): void => {
    if (values.json !== true) stdout.write(`${line}\n`);
  };
  const yardsticks = new Yardsticks(pace.yardsticks);
  try {
    const load = loadavg()[0];
    const figures = await measureAll(chosen, yardsticks, pace, say);
    const ratios = benchRatios(figures, yardsticks);
    const textbook = [...yardsticks.textbook].map(([n, rate]) => ({ n, millionCellStepsPerSecond: rate }));
    const triad = [...yardsticks.triad].map(([threads, rate]) => ({ threads, gigabytesPerSecond: rate }));
    for (const { n, millionCellStepsPerSecond } of textbook)
      say(
        `textbook C, ${String(n)} × ${String(n)}, 1 thread: ${String(millionCellStepsPerSecond)} M cell-steps/s`,
      );
    for (const { threads, gigabytesPerSecond } of triad)
      say(`memory, ${String(threads)} threads: ${String(gigabytesPerSecond)} GB/s`);
    if (!yardsticks.available) say("no yardsticks: they need gcc");
    for (const { name, value, atLeast } of ratios)
      say(`${name}: ${value.toFixed(2)} (at least ${String(atLeast)})`);
    const machine = {
      cpu: cpus()[0]?.model ?? "",
      cores: cpus().length,
      node: process.version,
      loadAtStart: load,
    };
    if (values.json === true)
      stdout.write(
        `${JSON.stringify({ machine, cases: figures, yardsticks: { textbook, triad }, ratios })}\n`,
      );
  } finally {
    yardsticks.dispose();
  }
  return 0;
};
