/** Impedance inverters against the formulas of their equivalent circuits. */
import { describe, expect, it } from "vitest";
import type { SolveResult } from "../scene/index.js";
import { readScene } from "../scene/index.js";
import { openSession } from "./index.js";
import { invertersOf } from "./inverters.js";

type Entry = NonNullable<SolveResult["ports"]>["s"][number];
type Complex = [number, number];

const entry = (to: string, from: string, [re, im]: Complex): Entry => ({
  to,
  from,
  re: [re],
  im: [im],
  groupDelayNs: [null],
});
const twoPort = (s11: Complex, s21: Complex, s22 = s11): Entry[] => [
  entry("a", "a", s11),
  entry("b", "a", s21),
  entry("a", "b", s21),
  entry("b", "b", s22),
];
/** (jx − 1)/(jx + 1), the reflection of a reactance x. */
const reflection = (x: number): Complex => [(x * x - 1) / (x * x + 1), (2 * x) / (x * x + 1)];
const half = ([a, b]: Complex, [c, d]: Complex, sign: 1 | -1): Complex => [
  (a + sign * c) / 2,
  (b + sign * d) / 2,
];
const degrees = (radians: number): number => (radians * 180) / Math.PI;

describe("an inverter", () => {
  // K/Z₀ = |tan(φ/2 + atan X_s)|, φ = −atan(2X_p + X_s) − atan X_s of a T of reactances X_s, X_p, X_s (in Z₀): G. L. Matthaei, L. Young,
  // E. M. T. Jones, Microwave Filters, Impedance-Matching Networks, and Coupling Structures, 1964, sec. 8.03; from memory.
  it.each([
    [0, 0.2],
    [0.05, 0.1],
    [0.3, 0.7],
    [-0.2, 0.4],
    [-1.5, -0.4],
  ])("of the T-circuit X_s = %d, X_p = %d has the K and the phase of the textbook", (xs, xp) => {
    // By symmetry: the even mode sees X_s + 2X_p, the odd one X_s.
    const [even, odd] = [reflection(xs + 2 * xp), reflection(xs)];
    const found = invertersOf(twoPort(half(even, odd, 1), half(even, odd, -1)));
    const phi = -Math.atan(2 * xp + xs) - Math.atan(xs);
    const k = Math.abs(Math.tan(phi / 2 + Math.atan(xs)));
    expect(found).toHaveLength(1);
    expect(found?.[0].between).toEqual(["a", "b"]);
    expect(Math.min(k, 1 / k)).toBeCloseTo(found?.[0].k[0] ?? 0, 12);
    // Half a turn apart where the textbook's K is above 1: such a part is the inverter 1/K a quarter wave on.
    const expected = degrees(phi) + (k > 1 ? 180 : 0);
    for (const [phase] of found?.[0].phaseDeg ?? [])
      expect(((((phase ?? 0) - expected) % 360) + 360.5) % 360).toBeCloseTo(0.5, 9);
  });

  it("has a phase for each of two unlike ports: lines at either of them show in its own alone", () => {
    const k = 0.25;
    const [r, t] = [(k * k - 1) / (k * k + 1), (2 * k) / (k * k + 1)];
    const turn = (size: number, angle: number): Complex => [
      size * Math.cos((angle * Math.PI) / 180),
      size * Math.sin((angle * Math.PI) / 180),
    ];
    // An ideal inverter behind lines of 10° and 25°: they are to be taken off.
    const found = invertersOf(twoPort(turn(r, -20), turn(t, -90 - 35), turn(r, -50)));
    expect(found?.[0].k[0]).toBeCloseTo(k, 12);
    expect(found?.[0].phaseDeg[0][0]).toBeCloseTo(-20, 9);
    expect(found?.[0].phaseDeg[1][0]).toBeCloseTo(-50, 9);
  });

  it("is none where power is lost or a port was not driven", () => {
    expect(invertersOf(twoPort([0.9, 0], [0, 0.3]))).toBeUndefined();
    expect(invertersOf(twoPort([0.8, 0], [0, 0.6]).slice(0, 2))).toBeUndefined();
    expect(invertersOf(twoPort([0.8, 0], [0, 0.6]))).toHaveLength(1);
  });
});

describe("a step between plates 10 mm and 4 mm apart", () => {
  // Two lines of impedances in the ratio of the distances, and at a low frequency nothing else: S₁₁ = (Z₂ − Z₁)/(Z₂ + Z₁), D. M. Pozar,
  // Microwave Engineering, 4th ed., sec. 2.3; so K/√(Z₁Z₂) = √(Z₂/Z₁).
  it("is an inverter of √0.4 at its ports", async () => {
    const line = { mode: 0, drive: true } as const;
    const read = readScene(
      {
        format: "heddle-scene",
        version: 1,
        name: "Step",
        polarization: "TEz",
        section: { widthMm: 40, heightMm: 10 },
        band: { fromGHz: 0.2, toGHz: 2 },
        mesh: { cellMm: 0.5 },
        edges: { left: "absorbing", right: "absorbing", bottom: "electric", top: "electric" },
        paint: [{ kind: "rectangle", id: "step", medium: "pec", x: 20, y: 4, width: 20, height: 6 }],
        ports: [
          { ...line, id: "wide", inward: "+x", from: [8, 0], to: [8, 10], shiftMm: 12 },
          { ...line, id: "narrow", inward: "-x", from: [32, 0], to: [32, 4], shiftMm: 12 },
        ],
        stop: { maxTimeNs: 40, decayDb: 60 },
      },
      { purpose: "run" },
    );
    if (!read.ok) throw new Error(JSON.stringify(read.problems));
    const session = await openSession(read.scene, { engine: "wasm", frequenciesGHz: [0.3, 0.6] });
    session.advance(1e7);
    const { ports } = session.result();
    session.dispose();
    const [inverter] = ports?.inverters ?? [];
    expect(inverter.between).toEqual(["wide", "narrow"]);
    for (const k of inverter.k) expect(Math.abs((k ?? 9) / Math.sqrt(0.4) - 1)).toBeLessThan(2e-3);
    // The lower impedance stands behind the wide port: its wave comes back reversed, that of the narrow port upright.
    expect(Math.abs(inverter.phaseDeg[0][0] ?? 99)).toBeLessThan(2);
    expect(Math.abs(inverter.phaseDeg[1][0] ?? 0)).toBeGreaterThan(178);
  });
});
