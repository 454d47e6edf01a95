import { describe, expect, it } from "vitest";
import { CHUNK_MS, ChunkSize, Pace } from "./pace.js";

describe("ChunkSize", () => {
  it("begins with one step and settles at about ten milliseconds", () => {
    const chunk = new ChunkSize();
    expect(chunk.steps()).toBe(1);
    for (let turn = 0; turn < 20; turn++) {
      const steps = chunk.steps();
      chunk.measured(steps, steps * 0.05);
    }
    expect(chunk.steps()).toBe(CHUNK_MS / 0.05);
  });

  it("takes single steps where one takes longer than a chunk should", () => {
    const chunk = new ChunkSize();
    chunk.measured(1, 400);
    expect(chunk.steps()).toBe(1);
  });
});

describe("Pace", () => {
  it("gives everything at full speed", () => {
    expect(new Pace(2).due(500, 123)).toEqual({ steps: 500, waitMs: 0 });
  });

  it("keeps the asked picoseconds a second", () => {
    const pace = new Pace(2);
    pace.set(100, 0);
    let taken = 0;
    for (let nowMs = 0; nowMs <= 10_000; nowMs += 7) {
      const { steps } = pace.due(1_000, nowMs);
      pace.paid(steps);
      taken += steps;
    }
    // 100 ps a second for ten seconds in steps of 2 ps.
    expect(taken).toBeGreaterThanOrEqual(498);
    expect(taken).toBeLessThanOrEqual(500);
  });

  it("says how long to wait for the next step", () => {
    const pace = new Pace(2);
    pace.set(1, 0);
    expect(pace.due(1_000, 500)).toEqual({ steps: 0, waitMs: 1_500 });
  });

  it("forgives what the machine could not hold", () => {
    const pace = new Pace(1);
    pace.set(1_000_000, 0);
    expect(pace.due(10, 1_000).steps).toBe(10);
    pace.paid(10);
    expect(pace.due(10, 1_000).steps).toBe(0);
  });

  it("does not catch up on a pause", () => {
    const pace = new Pace(1);
    pace.set(1_000, 0);
    pace.restart(60_000);
    expect(pace.due(1_000_000, 60_001).steps).toBe(1);
  });
});
