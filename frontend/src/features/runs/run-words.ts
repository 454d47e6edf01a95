/** What a run's state is called, and the figures under its buttons. */
import type { RunDto } from "@heddle/backend/contract";
import { formatFixed, formatSi, THIN_SPACE } from "../../lib/figures";

/** Whole numbers with a thin space between thousands: 12 480. */
export const count = (value: number): string =>
  Math.round(value)
    .toString()
    .replace(/\B(?=(\d{3})+$)/g, THIN_SPACE);

export function stateWords(run: RunDto): string {
  switch (run.state) {
    case "queued":
      return run.queuePlace === null
        ? "queued"
        : run.queuePlace === 1
          ? "queued, next"
          : `queued, place ${run.queuePlace}`;
    case "running":
      return "running";
    case "paused":
      return "paused";
    case "done":
      return run.stopReason === "time" ? "done, at its time limit" : "done, field decayed";
    case "stopped":
      return "stopped by hand";
    case "failed":
      return "failed";
    case "interrupted":
      return "interrupted";
  }
}

/** Seconds until the run ends at the latest; null where that is not known. */
export function secondsLeft(run: RunDto): number | null {
  if (run.grid === null || (run.state !== "running" && run.state !== "paused")) return null;
  const stepsLeft = Math.max(0, run.grid.maxSteps - run.step);
  const { cellStepsPerSecond: rate, pacePsPerSecond: pace } = run;
  const byRate = rate === null || rate <= 0 ? null : (stepsLeft * run.grid.nx * run.grid.ny) / rate;
  const byPace = pace === null ? null : (stepsLeft * run.grid.stepPs) / pace;
  return byRate === null && byPace === null ? null : Math.max(byRate ?? 0, byPace ?? 0);
}

export function durationWords(seconds: number): string {
  if (seconds < 1) return `under 1${THIN_SPACE}s`;
  if (seconds < 100) return `${Math.ceil(seconds).toString()}${THIN_SPACE}s`;
  if (seconds < 6_000) return `${Math.ceil(seconds / 60).toString()}${THIN_SPACE}min`;
  return `${formatFixed(seconds / 3600, 1)}${THIN_SPACE}h`;
}

export interface Figure {
  name: string;
  value: string;
}

/** Step, cells, rate, time left, decay: what is known of them. */
export function figuresOf(run: RunDto): Figure[] {
  const figures: Figure[] = [];
  const { grid } = run;
  if (grid !== null) {
    figures.push({ name: "Step", value: `${count(run.step)} / ${count(grid.maxSteps)}` });
    figures.push({ name: "Cells", value: `${count(grid.nx)} × ${count(grid.ny)}` });
  }
  if (run.cellStepsPerSecond !== null)
    figures.push({ name: "Rate", value: `${formatSi(run.cellStepsPerSecond, "", 3).trim()}/s` });
  const left = secondsLeft(run);
  if (left !== null) figures.push({ name: "Left, at most", value: durationWords(left) });
  if (run.decayDb !== null)
    figures.push({ name: "Decay", value: `${formatFixed(-Math.abs(run.decayDb), 1)}${THIN_SPACE}dB` });
  return figures;
}

/** What a run costs, known before it starts. */
export interface RunCost {
  nx: number;
  ny: number;
  steps: number;
  memoryBytes: number;
}

/** Cells, steps and memory of a run to come. */
export const costFigures = (cost: RunCost): Figure[] => [
  { name: "Cells", value: `${count(cost.nx)} × ${count(cost.ny)}` },
  { name: "Steps, at most", value: count(cost.steps) },
  { name: "Memory", value: formatSi(cost.memoryBytes, "B", 2) },
];
