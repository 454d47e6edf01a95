/** The ratios by which the solver's speed is judged: figures of one run over yardsticks of the same run. */
import type { Yardsticks } from "./bench-yardsticks.js";

export interface BenchFigure {
  case: string;
  polarization: string;
  engine: string;
  threads: number;
  nx: number;
  ny: number;
  /** nx·ny: the section without its absorbing layers. */
  cells: number;
  /** Steps of one timed round. */
  steps: number;
  /** Best round, and the middle one. */
  millionCellStepsPerSecond: number;
  medianMillionCellStepsPerSecond: number;
  openSeconds: number;
}

export interface BenchRatio {
  name: string;
  value: number;
  atLeast: number;
}

/** Bytes that one step moves at least where each field is read and written once. */
const BYTES_PER_CELL_STEP = 24;

export function benchRatios(figures: readonly BenchFigure[], yardsticks: Yardsticks): BenchRatio[] {
  const ratios: BenchRatio[] = [];
  const rate = (name: string, polarization: string, threads: number): number | undefined =>
    figures.find(
      (figure) => figure.case === name && figure.polarization === polarization && figure.threads === threads,
    )?.millionCellStepsPerSecond;
  const add = (name: string, over: number | undefined, under: number | undefined, atLeast: number): void => {
    if (over !== undefined && under !== undefined) ratios.push({ name, value: over / under, atLeast });
  };
  const bandwidth = yardsticks.triad.get(2);
  add(
    "mixed-2048, 2 threads, over textbook C",
    rate("mixed-2048", "TMz", 2),
    yardsticks.textbook.get(2048),
    4,
  );
  add(
    "mixed-512, 2 threads, over textbook C",
    rate("mixed-512", "TMz", 2),
    yardsticks.textbook.get(512),
    1.5,
  );
  add(
    `mixed-2048, 2 threads, over bandwidth of 2 threads / ${String(BYTES_PER_CELL_STEP)} bytes`,
    rate("mixed-2048", "TMz", 2),
    bandwidth === undefined ? undefined : (bandwidth * 1000) / BYTES_PER_CELL_STEP,
    1.2,
  );
  add("mixed-2048, 2 threads over 1", rate("mixed-2048", "TMz", 2), rate("mixed-2048", "TMz", 1), 1.7);
  add("mixed-2048, TEz over TMz, 2 threads", rate("mixed-2048", "TEz", 2), rate("mixed-2048", "TMz", 2), 0.9);
  return ratios;
}
