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

const measure = async (
  bench: BenchCase,
  polarization: BenchPolarization,
  threads: number,
  pace: BenchPace,
): Promise<BenchFigure> => {
  const started = performance.now();
  const session = await openSession(benchScene(bench.kind, bench.cells, polarization), {
    engine: "wasm",
    threads,
    spawnHelper,
  });
  const openSeconds = (performance.now() - started) / 1000;
  try {
    const transforms = new ProbeTransforms(session);
    // Warm: the optimizing compiler has had its turn, the wave fills a part of the section.
    round(session, transforms, pace.roundSeconds);
    const rounds = Array.from({ length: pace.rounds }, () => round(session, transforms, pace.roundSeconds));
    const rates = rounds.map(({ rate }) => rate).sort((a, b) => a - b);
    const { nx, ny } = session.grid;
    return {
      case: bench.name,
      polarization,
      engine: "wasm",
      threads,
      nx,
      ny,
      cells: nx * ny,
      steps: rounds[0].steps,
      millionCellStepsPerSecond: rates[rates.length - 1],
      medianMillionCellStepsPerSecond: rates[Math.floor(rates.length / 2)],
      openSeconds,
    };
  } finally {
    session.dispose();
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

/** Cases in order of size, each size between two runs of its yardstick, so that both see the same machine. */
const measureAll = async (
  chosen: readonly BenchCase[],
  yardsticks: Yardsticks,
  pace: BenchPace,
  say: (line: string) => void,
): Promise<BenchFigure[]> => {
  const figures: BenchFigure[] = [];
  for (const cells of BENCH_SIZES) {
    const cases = chosen.filter((bench) => bench.cells === cells);
    if (cases.length === 0) continue;
    yardsticks.measureTextbook(cells);
    yardsticks.measureTriad();
    for (const bench of cases) {
      for (const polarization of BENCH_POLARIZATIONS) {
        for (const threads of pace.threads) {
          const figure = await measure(bench, polarization, threads, pace);
          figures.push(figure);
          say(figureLine(figure));
        }
      }
    }
    yardsticks.measureTextbook(cells);
    yardsticks.measureTriad();
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
