import { describe, expect, it } from "vitest";
import { absorbingLayers } from "../boundaries/index.js";
import { buildLattice } from "../lattice/index.js";
import { SectionCoefficients, VACUUM } from "../media/index.js";
import { storedEnergy } from "../observers/index.js";
import { ReferenceEngine } from "./index.js";

const EDGES = { left: "electric", right: "electric", bottom: "electric", top: "electric" } as const;

function emptyBox(polarization: "TMz" | "TEz", precision: "f64" | "f32" = "f64"): ReferenceEngine {
  const lattice = buildLattice({ polarization, nx: 17, ny: 13, dx: 1e-3, dy: 1.3e-3, edges: EDGES });
  const coefficients = new SectionCoefficients(lattice, {
    media: [{ kind: "fill", properties: VACUUM }],
    areas: [],
    background: 0,
    walls: [],
    widthMm: 17,
    heightMm: 16.9,
    omega: 1e10,
  });
  return new ReferenceEngine(
    {
      lattice,
      coefficients: coefficients.row,
      layers: absorbingLayers(lattice, 1e9),
      drives: [{ row: 6, column: 8, weight: 1, signal: 0 }],
      signals: 1,
      taps: [{ row: 5, column: 5, field: "f", weight: 2, record: 0 }],
      records: 1,
    },
    precision,
  );
}

const NOTHING = new Float64Array(2000);

describe("the reference engine", () => {
  it.each(["TMz", "TEz"] as const)(
    "keeps the energy of a lossless box within the leapfrog's swing (%s)",
    (polarization) => {
      const engine = emptyBox(polarization);
      const pulse = Float64Array.from(
        { length: 100 },
        (_, n) => Math.exp(-(((n - 50) / 12) ** 2)) * (n - 50),
      );
      engine.advance(100, pulse, new Float64Array(100));
      const energies: number[] = [];
      for (let k = 0; k < 40; k += 1) {
        engine.advance(100, NOTHING, new Float64Array(100));
        energies.push(storedEnergy(engine));
      }
      const mean = (values: number[]): number =>
        values.reduce((sum, value) => sum + value, 0) / values.length;
      // E and H are half a step apart, so the sum swings; its mean must not drift.
      expect(mean(energies)).toBeGreaterThan(0);
      expect(Math.abs(mean(energies.slice(0, 20)) / mean(energies.slice(20)) - 1)).toBeLessThan(0.05);
    },
  );

  it("reads taps after each step, by their weight", () => {
    const engine = emptyBox("TMz");
    const records = new Float64Array(30);
    engine.advance(
      30,
      Float64Array.from({ length: 30 }, () => 1),
      records,
    );
    expect(records[29]).toBe(2 * engine.fields.f[5 * engine.lattice.stride + 5]);
    expect(records[29]).not.toBe(0);
  });

  it("steps f32 as f64 to single precision", () => {
    const [double, single] = [emptyBox("TEz"), emptyBox("TEz", "f32")];
    const pulse = Float64Array.from({ length: 200 }, (_, n) => Math.exp(-(((n - 50) / 12) ** 2)));
    double.advance(200, pulse, new Float64Array(200));
    single.advance(200, pulse, new Float64Array(200));
    let scale = 0;
    let worst = 0;
    for (let k = 0; k < double.fields.f.length; k += 1) {
      scale = Math.max(scale, Math.abs(double.fields.f[k]));
      worst = Math.max(worst, Math.abs(double.fields.f[k] - single.fields.f[k]));
    }
    expect(worst / scale).toBeLessThan(2e-5);
  });

  it("refuses too few signals and a snapshot of another size", () => {
    const engine = emptyBox("TMz");
    expect(() => engine.advance(10, new Float64Array(5), new Float64Array(10))).toThrow(RangeError);
    expect(() => engine.load(emptyBox("TMz", "f32").save())).toThrow(/another lattice/);
  });
});
