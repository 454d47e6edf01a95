import type { ProbeResult, SolveResult } from "@heddle/kernels/scene";
import { describe, expect, it } from "vitest";
import { nearestIndex, rangeOf } from "./curves";
import { probeCurves, shieldingCurves, whyNoSpectrum } from "./spectrum";

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
const nameOf = (id: string): string => `probe ${id}`;
const curvesOf = (...probes: ProbeResult[]) => probeCurves(result({ probes }), nameOf, () => true);

describe("levels", () => {
  it("are 20 lg of a field and 10 lg of a power, null where undefined", () => {
    const [field] = curvesOf(probe({}));
    expect(field.values[0]).toBeCloseTo(20 * Math.log10(5), 12);
    expect(field.values[1]).toBeCloseTo(-20, 12);
    expect(field.values[2]).toBeNull();
    const [power] = curvesOf(probe({ spectrum: { GHz: [1, 2, 3], value: [100, 0, -10] } }));
    expect(power.values).toEqual([20, null, 10]);
    expect(curvesOf(probe({ spectrum: null }))).toEqual([]);
  });

  it("are one for each driven port, and say which", () => {
    const curves = curvesOf(probe({ drive: "in" }), probe({ drive: "out" }));
    expect(curves.map(({ label }) => label)).toEqual([
      "probe p1, driven from in",
      "probe p1, driven from out",
    ]);
    expect(new Set(curves.map(({ key }) => key)).size).toBe(2);
  });

  it("tell an area's halves apart where asked to", () => {
    const area = probe({
      kind: "area",
      quantity: "absorbed",
      unit: "W/m",
      spectrum: { GHz: [1], value: [101], electric: [100], magnetic: [1] },
    });
    expect(curvesOf(area).map(({ label, values }) => [label, values[0]])).toEqual([
      ["probe p1", 10 * Math.log10(101)],
      ["probe p1, electric", 20],
      ["probe p1, magnetic", 0],
    ]);
    expect(probeCurves(result({ probes: [area] }), nameOf)).toHaveLength(1);
  });

  it("carry the bar of a run on two meshes", () => {
    const extrapolation = {
      probes: [
        {
          id: "p1",
          drive: null,
          GHz: [1, 2, 3],
          re: [3, 1, null],
          im: [4, 0, null],
          uncertainty: [1, 2, null],
        },
      ],
    } as unknown as SolveResult["extrapolation"];
    const [curve] = probeCurves(result({ extrapolation }), nameOf);
    expect(curve.bar?.low[0]).toBeCloseTo(20 * Math.log10(4), 12);
    expect(curve.bar?.high[0]).toBeCloseTo(20 * Math.log10(6), 12);
    // As uncertain as it is large: it may be nothing.
    expect(curve.bar?.low[1]).toBeLessThan(-200);
    expect(curve.bar?.low[2]).toBeNull();
  });

  it("say why there are none", () => {
    expect(whyNoSpectrum(result({}))).toBeNull();
    expect(whyNoSpectrum(result({ probes: [] }))).toMatch(/place one/);
    const ports = { GHz: [], s: [], passivity: { worst: null, atGHz: null } };
    expect(whyNoSpectrum(result({ probes: [], ports }))).toBeNull();
    const bare = [probe({ spectrum: null })];
    expect(whyNoSpectrum(result({ probes: bare, edits: [{ step: 4, sceneSha256: "x" }] }))).toMatch(/edited/);
    expect(whyNoSpectrum(result({ probes: [], edits: [{ step: 4, sceneSha256: "x" }] }))).toMatch(/edited/);
    const warned = result({
      probes: bare,
      quality: {
        warnings: ["Sources have different waveforms, so there is no spectrum."],
      } as SolveResult["quality"],
    });
    expect(whyNoSpectrum(warned)).toMatch(/different waveforms/);
  });

  it("get a range of round tens that a deep null does not squeeze", () => {
    expect(rangeOf([{ values: [-3, -41] }])).toEqual({ low: -50, high: 0 });
    expect(rangeOf([{ values: [-3, -300] }])).toEqual({ low: -80, high: 0 });
    expect(rangeOf([{ values: [null, null] }])).toBeNull();
    expect(rangeOf([{ values: [5, 5] }])).toEqual({ low: -10, high: 10 });
  });

  it("are read at the nearest frequency", () => {
    expect(nearestIndex([1, 2, 4], 3.2)).toBe(2);
    expect(nearestIndex([], 1)).toBe(-1);
  });
});

describe("shielding", () => {
  it("is one curve a probe, in dB as told", () => {
    const shielding = [{ probe: "p1", GHz: [1, 2], dB: [40, null] }];
    expect(shieldingCurves(result({ shielding }), nameOf)).toEqual([
      { key: "p1", label: "probe p1", GHz: [1, 2], values: [40, null], probe: "p1" },
    ]);
  });
});
