import type { RunDto } from "@heddle/backend/contract";
import { describe, expect, it } from "vitest";
import { count, durationWords, figuresOf, secondsLeft, stateWords } from "./run-words";

const run = (over: Partial<RunDto>): RunDto => ({
  id: "a",
  sceneId: "s",
  revision: 1,
  sha256: "",
  state: "running",
  queuePlace: null,
  by: { id: "p", name: "P" },
  queuedAt: "2026-01-01T00:00:00Z",
  startedAt: null,
  endedAt: null,
  grid: { nx: 600, ny: 400, dxMm: 0.5, dyMm: 0.5, stepPs: 1, courant: 0.99, maxSteps: 41_200 },
  step: 1_200,
  timeNs: 1.2,
  decayDb: -3.25,
  cellStepsPerSecond: 2.4e8,
  pacePsPerSecond: null,
  edited: false,
  edits: [],
  message: null,
  stopReason: null,
  twoMesh: false,
  shielding: false,
  ...over,
});

describe("run words", () => {
  it("says where a queued run stands", () => {
    expect(stateWords(run({ state: "queued", queuePlace: 1 }))).toBe("queued, next");
    expect(stateWords(run({ state: "queued", queuePlace: 3 }))).toBe("queued, place 3");
  });

  it("estimates the time left by the rate, and by the pace where that is slower", () => {
    // 40 000 steps of 240 000 cells at 240 million cell-steps a second
    expect(secondsLeft(run({}))).toBeCloseTo(40, 9);
    expect(secondsLeft(run({ pacePsPerSecond: 100 }))).toBeCloseTo(400, 9);
    expect(secondsLeft(run({ state: "done" }))).toBeNull();
    expect(secondsLeft(run({ cellStepsPerSecond: null }))).toBeNull();
  });

  it("lists the figures that are known", () => {
    expect(figuresOf(run({})).map((figure) => figure.value)).toEqual([
      "1\u2009200 / 41\u2009200",
      "600 × 400",
      "240\u2009M/s",
      "40\u2009s",
      "\u22123.3\u2009dB",
    ]);
    expect(figuresOf(run({ grid: null, cellStepsPerSecond: null, decayDb: null }))).toEqual([]);
  });

  it("writes durations and counts", () => {
    expect(durationWords(0.2)).toBe("under 1\u2009s");
    expect(durationWords(130)).toBe("3\u2009min");
    expect(count(1_234_567)).toBe("1\u2009234\u2009567");
  });
});
