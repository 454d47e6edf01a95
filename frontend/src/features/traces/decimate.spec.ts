import { describe, expect, it } from "vitest";
import { axisEnd, decimate, sampleAt, ticks } from "./decimate";

const traceOf = (values: number[], stepNs = 1, startNs = 0) => ({
  startNs,
  stepNs,
  length: values.length,
  values: Float64Array.from(values),
});

describe("decimate", () => {
  it("loses no peak, however many samples share a column", () => {
    const values = Array.from({ length: 100_000 }, () => 0);
    values[54_321] = 9;
    values[54_322] = -7;
    const lows = new Float64Array(100);
    const highs = new Float64Array(100);
    decimate(traceOf(values), 0, 100_000, lows, highs);
    expect(highs[54]).toBe(9);
    expect(lows[54]).toBe(-7);
    expect(Math.max(...highs.filter((_, column) => column !== 54))).toBe(0);
  });

  it("joins neighbouring columns: each reaches the sample at its end", () => {
    const lows = new Float64Array(10);
    const highs = new Float64Array(10);
    decimate(traceOf(Array.from({ length: 101 }, (_, i) => i)), 0, 100, lows, highs);
    for (let column = 1; column < 10; column += 1)
      expect(lows[column]).toBeLessThanOrEqual(highs[column - 1] ?? -1);
  });

  it("draws one sample over the many columns it spans", () => {
    const lows = new Float64Array(8);
    const highs = new Float64Array(8);
    decimate(traceOf([5, 6], 4), 0, 8, lows, highs);
    expect([...highs]).toEqual([5, 5, 5, 6, 6, Number.NaN, Number.NaN, Number.NaN]);
  });

  it("leaves columns before the first and after the last sample empty", () => {
    const lows = new Float64Array(4);
    const highs = new Float64Array(4);
    decimate(traceOf([1, 1], 1, 1.5), 0, 8, lows, highs);
    expect(Number.isNaN(highs[3])).toBe(true);
    decimate(traceOf([]), 0, 8, lows, highs);
    expect([...lows].every(Number.isNaN)).toBe(true);
  });

  it("reads the sample nearest to a time", () => {
    expect(sampleAt(traceOf([1, 2, 3], 0.5), 0.6)).toBe(2);
    expect(sampleAt(traceOf([1, 2, 3], 0.5), 1.4)).toBeNull();
  });
});

describe("axes", () => {
  it("end beyond the time at a round place", () => {
    expect(axisEnd(14.7)).toBe(15);
    expect(axisEnd(0)).toBe(1);
    expect(axisEnd(9.995)).toBe(12);
    for (const time of [0.013, 0.5, 1, 7.9, 123]) {
      expect(axisEnd(time)).toBeGreaterThan(time);
      expect(axisEnd(time)).toBeLessThan(time * 1.6);
    }
  });

  it("have round ticks", () => {
    expect(ticks(0.3, 2, 4)).toEqual([0.5, 1, 1.5, 2]);
    expect(ticks(-60, 0, 3)).toEqual([-60, -40, -20, 0]);
    expect(ticks(1, 1, 4)).toEqual([]);
  });
});
