import { describe, expect, it, vi } from "vitest";
import type { Scene, SceneInput, SolveResult } from "../scene/index.js";
import { readScene, resultSchema } from "../scene/index.js";
import { openSession } from "./index.js";

vi.setConfig({ testTimeout: 60_000 });

const MU0 = 4e-7 * Math.PI;
const ETA0 = 299_792_458 * MU0;

const read = (document: SceneInput): Scene => {
  const scene = readScene(document, { purpose: "run" });
  if (!scene.ok)
    throw new Error(scene.problems.map(({ path, sentence }) => `${path}: ${sentence}`).join("\n"));
  return scene.scene;
};
const solve = async (document: SceneInput): Promise<SolveResult> => {
  const session = await openSession(read(document), { frequenciesGHz: [2, 3, 4] });
  expect(session.advance(1e7)).toMatchObject({ kind: "ended" });
  const result = session.result();
  expect(resultSchema.safeParse(result).error?.message).toBeUndefined();
  return result;
};
const probeOf = (result: SolveResult, id: string) => {
  const probe = result.probes.find((candidate) => candidate.id === id);
  if (!probe) throw new Error(`no probe ${id}`);
  return probe;
};
const powersOf = (result: SolveResult, id: string): number[] => {
  const { spectrum } = probeOf(result, id);
  if (!spectrum || !("value" in spectrum)) throw new Error("no power");
  return spectrum.value.map((value) => value ?? Number.NaN);
};

const box = {
  format: "heddle-scene",
  version: 1,
  name: "Lines",
  band: { fromGHz: 2, toGHz: 4 },
  mesh: { cellMm: 1 },
} as const;

/** Two plates 10 mm apart: below 15 GHz only the TEM wave travels, with E = V/b and P = ½|V|²/(η₀·b) (any text on guides). */
const plates: SceneInput = {
  ...box,
  polarization: "TEz",
  section: { widthMm: 80, heightMm: 10 },
  edges: { left: "absorbing", right: "absorbing", bottom: "electric", top: "electric" },
  sources: [{ kind: "line", id: "wire", x: 20, y: 5 }],
  probes: [
    { kind: "line", id: "v", from: [60.3, 0], to: [60.3, 10], quantity: "voltage" },
    { kind: "line", id: "right", from: [60.3, 10], to: [60.3, 0], quantity: "power" },
    { kind: "line", id: "left", from: [60.3, 0], to: [60.3, 10], quantity: "power" },
    { kind: "line", id: "slanted", from: [65, 10], to: [55, 0], quantity: "power" },
    { kind: "line", id: "along", from: [50, 5], to: [70, 5], quantity: "voltage" },
  ],
  stop: { maxTimeNs: 20, decayDb: 100 },
};

describe("line probes", () => {
  it("read the voltage and the power of a TEM wave, whatever the line's slope, with its sign", async () => {
    const result = await solve(plates);
    const { spectrum, unit, kind, quantity } = probeOf(result, "v");
    expect({ unit, kind, quantity }).toEqual({ unit: "V", kind: "line", quantity: "voltage" });
    if (!spectrum || !("re" in spectrum)) throw new Error("no voltage");
    const right = powersOf(result, "right");
    const left = powersOf(result, "left");
    const slanted = powersOf(result, "slanted");
    spectrum.re.forEach((re, n) => {
      const voltage = Math.hypot(re ?? 0, spectrum.im[n] ?? 0);
      // A magnetic line current of 1 V sends waves of ½ V both ways.
      expect(Math.abs(voltage / 0.5 - 1)).toBeLessThan(0.005);
      const power = (0.5 * voltage ** 2) / (ETA0 * 0.01);
      expect(Math.abs(right[n] / power - 1)).toBeLessThan(0.005);
      expect(left[n]).toBeCloseTo(-right[n], 12);
      expect(Math.abs(slanted[n] / power - 1)).toBeLessThan(0.005);
    });
    const along = probeOf(result, "along").spectrum;
    if (!along || !("re" in along)) throw new Error("no voltage");
    along.re.forEach((re, n) => {
      expect(Math.hypot(re ?? 1, along.im[n] ?? 1)).toBeLessThan(1e-4);
    });
  });

  it("trace the power at every step: V²/(η₀·b) at its own times", async () => {
    const result = await solve(plates);
    const voltage = probeOf(result, "v").trace;
    const power = probeOf(result, "right").trace;
    // V lies at half steps, P at whole ones from 0 on.
    expect(power.startNs).toBe(0);
    expect(voltage.startNs).toBeCloseTo(voltage.stepNs / 2, 12);
    const largest = Math.max(...power.values);
    expect(largest).toBeGreaterThan(0);
    for (let n = 1; n < power.values.length; n += 1) {
      const v = (voltage.values[n - 1] + voltage.values[n]) / 2;
      expect(Math.abs(power.values[n] - v ** 2 / (ETA0 * 0.01)) / largest).toBeLessThan(0.01);
    }
  });

  it("read through a closed line what a line current radiates, ωμ₀/8 a metre, wherever it runs", async () => {
    const corners = [
      [16, 15.5],
      [64, 15.5],
      [64, 60],
      [16, 60],
    ] as const;
    const result = await solve({
      ...box,
      polarization: "TMz",
      section: { widthMm: 80, heightMm: 80 },
      edges: { left: "absorbing", right: "absorbing", bottom: "absorbing", top: "absorbing" },
      sources: [{ kind: "line", id: "wire", x: 41.3, y: 37.8 }],
      // Clockwise: outward is on the left.
      probes: corners.map((to, n) => ({
        kind: "line" as const,
        id: `side-${String(n)}`,
        from: [...corners[(n + 1) % 4]] as [number, number],
        to: [...to] as [number, number],
        quantity: "power" as const,
      })),
      stop: { maxTimeNs: 20, decayDb: 100 },
    });
    const sides = corners.map((_, n) => powersOf(result, `side-${String(n)}`));
    [2, 3, 4].forEach((GHz, n) => {
      const total = sides.reduce((sum, side) => sum + side[n], 0);
      // E at the current is −ωμ₀/4 in phase with it (R. F. Harrington, Time-Harmonic Electromagnetic Fields, 1961, §5-6).
      expect(Math.abs(total / ((2e9 * Math.PI * GHz * MU0) / 8) - 1)).toBeLessThan(0.01);
    });
  });

  it("go on bit for bit from a snapshot", async () => {
    const whole = await openSession(read(plates));
    whole.advance(200);
    const snapshot = structuredClone(whole.snapshot());
    whole.advance(1e7);
    const again = await openSession(read(plates));
    again.restore(snapshot);
    again.advance(1e7);
    expect(again.result().probes).toEqual(whole.result().probes);
  });
});
