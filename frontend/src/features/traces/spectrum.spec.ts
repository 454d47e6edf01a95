import type { ProbeResult, SolveResult } from "@heddle/kernels/scene";
import { describe, expect, it } from "vitest";
import { levelsOf, nearestIndex, rangeOf, whyNoSpectrum } from "./spectrum";

const probe = (over: Partial<ProbeResult>): ProbeResult => ({
  id: "p1",
  drive: null,
  kind: "point",
  quantity: "Ez",
  unit: "V/m",
  trace: { startNs: 0, stepNs: 1, values: [] },
  spectrum: { GHz: [1, 2, 3], re: [3, 0, null], im: [4, 0.1, null] },
  ...over,
});

const result = (over: Partial<SolveResult>): SolveResult =>
  ({ probes: [probe({})], quality: { warnings: [] }, ...over }) as unknown as SolveResult;

describe("levels", () => {
  it("are 20 lg of a field and 10 lg of a power, null where undefined", () => {
    const field = levelsOf(probe({}));
    expect(field?.dB[0]).toBeCloseTo(20 * Math.log10(5), 12);
    expect(field?.dB[1]).toBeCloseTo(-20, 12);
    expect(field?.dB[2]).toBeNull();
    const power = levelsOf(probe({ spectrum: { GHz: [1, 2], value: [100, 0] } }));
    expect(power?.dB).toEqual([20, null]);
    expect(levelsOf(probe({ spectrum: null }))).toBeNull();
  });

  it("say why there are none", () => {
    expect(whyNoSpectrum(result({}))).toBeNull();
    expect(whyNoSpectrum(result({ probes: [] }))).toMatch(/place one/);
    const bare = [probe({ spectrum: null })];
    expect(whyNoSpectrum(result({ probes: bare, edits: [{ step: 4, sceneSha256: "x" }] }))).toMatch(/edited/);
    const warned = result({
      probes: bare,
      quality: {
        warnings: ["Sources have different waveforms, so there is no spectrum."],
      } as SolveResult["quality"],
    });
    expect(whyNoSpectrum(warned)).toMatch(/different waveforms/);
  });

  it("get a range of round tens that a deep null does not squeeze", () => {
    const curve = { probe: "p", unit: "V/m", GHz: [1, 2], completed: false };
    expect(rangeOf([{ ...curve, dB: [-3, -41] }])).toEqual({ low: -50, high: 0 });
    expect(rangeOf([{ ...curve, dB: [-3, -300] }])).toEqual({ low: -80, high: 0 });
    expect(rangeOf([{ ...curve, dB: [null, null] }])).toBeNull();
    expect(rangeOf([{ ...curve, dB: [5, 5] }])).toEqual({ low: -10, high: 10 });
  });

  it("are read at the nearest frequency", () => {
    expect(nearestIndex([1, 2, 4], 3.2)).toBe(2);
    expect(nearestIndex([], 1)).toBe(-1);
  });
});
