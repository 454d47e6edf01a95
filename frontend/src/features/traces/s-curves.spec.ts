import type { Limit, SolveResult } from "@heddle/kernels/scene";
import { describe, expect, it } from "vitest";
import { limitLines } from "./limit-lines";
import { guideTicks, passivityWords, sCurves, sRange } from "./s-curves";
import { viewKinds, viewName, viewOf } from "./views";

type Ports = NonNullable<SolveResult["ports"]>;

const ports: Ports = {
  GHz: [9, 10, 11],
  s: [
    { to: "in", from: "in", re: [0.6, 0, null], im: [0, -0.1, null], groupDelayNs: [0.1, 90, null] },
    { to: "out", from: "in", re: [0, -0.99, 0], im: [0.8, 0, 1e-4], groupDelayNs: [0.2, 0.4, -70] },
  ],
  passivity: { worst: 0.99995, atGHz: 10 },
};
const result = (over: Partial<SolveResult> = {}): SolveResult =>
  ({ ports, probes: [], quality: { warnings: [] }, ...over }) as unknown as SolveResult;

describe("S-parameters", () => {
  it("are levels, phases and delays, named by where the wave goes and whence it comes", () => {
    const [reflected, passed] = sCurves(result(), "level");
    expect(reflected.label).toBe("in ← in");
    expect(passed.label).toBe("out ← in");
    expect(reflected.values[0]).toBeCloseTo(20 * Math.log10(0.6), 12);
    expect(reflected.values.slice(1)).toEqual([-20, null]);
    expect(sCurves(result(), "phase").map(({ values }) => values)).toEqual([
      [0, -90, null],
      [90, 180, 90],
    ]);
    expect(sCurves(result(), "delay")[1]?.values).toEqual([0.2, 0.4, -70]);
  });

  it("span what a passive part may, and delays of what is heard only", () => {
    expect(sRange(result(), "level")).toEqual({ low: -60, high: 2 });
    expect(sRange(result(), "phase")).toEqual({ low: -180, high: 180 });
    // The −70 ns belong to −80 dB; the 90 ns to a reflection of −20 dB, which counts.
    const delays = sRange(result(), "delay");
    expect(delays?.low).toBeGreaterThan(-6);
    expect(delays?.high).toBeGreaterThan(90);
    expect(sRange(result({ ports: { ...ports, s: [] } }), "level")).toBeNull();
  });

  it("say whether the part gives more than it takes", () => {
    expect(passivityWords(ports)).toMatch(/^Passive: at most 99\.995.% of the power/);
    expect(passivityWords({ ...ports, passivity: { worst: 1.004, atGHz: 10 } })).toMatch(/0\.4.% more power/);
    expect(passivityWords({ ...ports, passivity: { worst: null, atGHz: null } })).toBeNull();
  });

  it("tell the guide's frequencies at the section's that stand for them", () => {
    expect(guideTicks(ports, 4)).toEqual([]);
    const guide = guideTicks({ ...ports, guideGHz: [11, 12.5, 13] }, 2);
    expect(guide.map(({ guideGHz }) => guideGHz)).toEqual([11, 12, 13]);
    expect(guide[1]?.GHz).toBeCloseTo(9 + 1 / 1.5, 12);
    expect([guide[0]?.GHz, guide[2]?.GHz]).toEqual([9, 11]);
  });

  it("carry the bar of a run on two meshes, as levels only", () => {
    const s = [
      { to: "in", from: "in", GHz: ports.GHz, re: [0.6, 0, 0], im: [0, 0.1, 0], uncertainty: [0.1, 0.2, 0] },
    ];
    const finer = result({ extrapolation: { s } as unknown as SolveResult["extrapolation"] });
    const [reflected, passed] = sCurves(finer, "level");
    expect(reflected.bar?.high[0]).toBeCloseTo(20 * Math.log10(0.7), 12);
    expect(reflected.bar?.low[0]).toBeCloseTo(20 * Math.log10(0.5), 12);
    expect(passed.bar).toBeUndefined();
    expect(sCurves(finer, "phase")[0]?.bar).toBeUndefined();
  });
});

describe("the views of a result", () => {
  const limit: Limit = {
    id: "rl",
    name: "Return loss",
    sense: "below",
    points: [
      [9, -30],
      [16, -10],
    ],
    of: { s: ["in", "in"] },
  };
  const input = { previous: null, limits: [limit], nameOf: (id: string) => id, selected: null };

  it("are those that it has something to show in", () => {
    expect(viewKinds(result())).toEqual(["level", "phase", "delay"]);
    expect(viewKinds(result({ ports: undefined }))).toEqual([]);
    const shielding = [{ probe: "p", GHz: [1], dB: [3] }];
    expect(viewKinds(result({ shielding }))).toContain("shielding");
  });

  it("show probes of one unit at a time, and limits on those only", () => {
    const of = (id: string, unit: string) => ({ id, unit, drive: null, spectrum: { GHz: [1], value: [10] } });
    const probes = [of("e", "V/m"), of("w", "W/m")] as unknown as SolveResult["probes"];
    const mixed = result({ ports: undefined, probes });
    const kinds = viewKinds(mixed);
    expect(kinds).toEqual(["probes V/m", "probes W/m"]);
    expect(kinds.map((kind) => viewName(kind, kinds))).toEqual(["V/m", "W/m"]);
    expect(viewName("probes V/m", ["level", "probes V/m"])).toBe("Probes");
    const onField = { ...limit, of: { probe: "e" } };
    const views = kinds.map((kind) => viewOf(kind, { ...input, limits: [onField], result: mixed }));
    expect(views.map(({ curves }) => curves.map(({ label }) => label))).toEqual([["e"], ["w"]]);
    expect(views.map(({ limits }) => limits.length)).toEqual([1, 0]);
  });

  it("draw a limit with its margin where it is on what they show", () => {
    const limits = [{ id: "rl", holds: false, margin: -2, atGHz: 10, uncertainty: null }];
    const view = viewOf("level", { ...input, result: result({ limits }) });
    expect(view.limits).toMatchObject([{ name: "Return loss", holds: false, margin: -2, atGHz: 10 }]);
    expect(viewOf("phase", { ...input, result: result({ limits }) }).limits).toEqual([]);
    const other = { ...limit, of: { s: ["out", "out"] as [string, string] } };
    expect(viewOf("level", { ...input, limits: [other], result: result() }).limits).toEqual([]);
  });

  it("draw a limit straight over the logarithm of frequency, not judged where no run did", () => {
    const [line] = limitLines([limit], undefined, () => true);
    expect(line).toMatchObject({ holds: null, margin: null });
    expect(line.points[0]).toEqual({ GHz: 9, dB: -30 });
    expect(line.points.at(-1)).toEqual({ GHz: 16, dB: -10 });
    // The middle of 9 and 16 GHz on a log axis is 12 GHz.
    const before = line.points.filter(({ GHz }) => GHz <= 12).at(-1);
    const after = line.points.find(({ GHz }) => GHz > 12);
    expect(before?.dB).toBeLessThanOrEqual(-20);
    expect(after?.dB).toBeGreaterThan(-20);
  });
});
