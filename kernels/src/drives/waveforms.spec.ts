import { describe, expect, it } from "vitest";
import { fourierSum } from "../analysis/index.js";
import { compileWaveform } from "./index.js";

const STEP = 1e-13;

const sampled = (waveform: Parameters<typeof compileWaveform>[0], seconds: number): Float64Array => {
  const { valueAt } = compileWaveform(waveform);
  return Float64Array.from({ length: Math.round(seconds / STEP) }, (_, n) => valueAt((n + 0.5) * STEP));
};

describe("waveforms", () => {
  it("makes pulses with peak 1, no integral, and 20 dB less at the ends of their width", () => {
    const pulse = { kind: "pulse", centerGHz: 10, widthGHz: 6 } as const;
    const { endSeconds } = compileWaveform(pulse);
    const values = sampled(pulse, endSeconds);
    expect(values.reduce((largest, value) => Math.max(largest, Math.abs(value)), 0)).toBeCloseTo(1, 5);
    const sum = values.reduce((total, value) => total + value, 0);
    const magnitudes = values.reduce((total, value) => total + Math.abs(value), 0);
    expect(Math.abs(sum) / magnitudes).toBeLessThan(1e-10);
    const { re, im } = fourierSum({ start: 0.5 * STEP, step: STEP, values }, [7e9, 10e9, 13e9]);
    const level = (n: number): number => 20 * Math.log10(Math.hypot(re[n], im[n]) / Math.hypot(re[1], im[1]));
    expect(level(0)).toBeCloseTo(-20, 3);
    expect(level(2)).toBeCloseTo(-20, 3);
  });

  it("lets a tone rise over its ramp and never end", () => {
    const tone = compileWaveform({ kind: "tone", GHz: 1, rampCycles: 4 });
    expect(tone.endSeconds).toBe(Number.POSITIVE_INFINITY);
    expect(tone.valueAt(2.25e-9)).toBeCloseTo(0.5 * (1 - Math.cos((Math.PI * 2.25) / 4)), 12);
    expect(tone.valueAt(7.25e-9)).toBeCloseTo(1, 12);
  });

  it("joins samples by straight lines and is zero after the last", () => {
    const samples = compileWaveform({ kind: "samples", stepNs: 0.5, values: [0, 2, -1] });
    expect(samples.valueAt(0.25e-9)).toBeCloseTo(1, 12);
    expect(samples.valueAt(0.75e-9)).toBeCloseTo(0.5, 12);
    expect(samples.valueAt(1.01e-9)).toBe(0);
    expect(samples.endSeconds).toBeCloseTo(1e-9, 15);
  });
});
