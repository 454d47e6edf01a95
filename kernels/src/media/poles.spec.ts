import { describe, expect, it } from "vitest";
import { buildLattice } from "../lattice/index.js";
import { storedEnergy } from "../observers/index.js";
import { absorbingLayers } from "../boundaries/index.js";
import { complexPermittivity } from "../scene/media-figures.js";
import type { Pole } from "../scene/schema-media.js";
import { AIR } from "../scene/schema-media.js";
import { ReferenceEngine } from "../stepping/index.js";
import { SectionCoefficients, VACUUM } from "./index.js";
import { poleModel } from "./poles.js";

/** P/v of a pole's memory at ω, found by driving it with exp(jωt) until it is steady. */
function response(pole: Pole, omega: number, dt: number): { re: number; im: number } {
  const { dynamics, instant } = poleModel(pole, dt);
  const { order, step, feed } = dynamics;
  const solve = (phase: (n: number) => number): ((n: number) => number) => {
    const p = new Float64Array(400_001);
    let [r0, r1] = [0, 0];
    for (let n = 0; n < p.length; n += 1) {
      const v = phase(n);
      p[n] = r0 + instant * v;
      const d0 = step[0] * r0 + (order === 2 ? step[1] * r1 : 0) + feed[0] * v;
      const d1 = order === 2 ? step[2] * r0 + step[3] * r1 + feed[1] * v : 0;
      r0 += d0;
      r1 += d1;
    }
    return (n) => p[n];
  };
  const [cosine, sine] = [solve((n) => Math.cos(omega * n * dt)), solve((n) => Math.sin(omega * n * dt))];
  const n = 400_000;
  const [c, s] = [Math.cos(omega * n * dt), Math.sin(omega * n * dt)];
  // P = χ·exp(jωt) of both drives together.
  return { re: cosine(n) * c + sine(n) * s, im: sine(n) * c - cosine(n) * s };
}

const POLES: Pole[] = [
  { kind: "debye", delta: 3, tauNs: 0.05 },
  { kind: "debye", delta: 70, tauNs: 0.0083 },
  { kind: "lorentz", delta: 2, resonanceGHz: 4, dampingGHz: 0.1 },
  { kind: "lorentz", delta: 2, resonanceGHz: 4, dampingGHz: 30 },
  // Critically damped: two equal poles.
  { kind: "lorentz", delta: 2, resonanceGHz: 4, dampingGHz: 8 },
  // Far above the band, where it is taken as it stands.
  { kind: "lorentz", delta: 2, resonanceGHz: 400, dampingGHz: 8 },
];

describe("the memory of a pole", () => {
  // Source: χ as the scene defines it, Δ/(1 + jωτ) and Δω₀²/(ω₀² − ω² + jωδ).
  it.each(POLES)("answers with χ, the better the shorter the step by its square, %o", (pole) => {
    for (const ghz of [0.5, 2, 3.9, 4, 4.1, 8]) {
      const omega = 2e9 * Math.PI * ghz;
      const exact = complexPermittivity({ ...AIR, relativePermittivity: 0, electricPoles: [pole] }, ghz);
      const errorWith = (dt: number): number => {
        const got = response(pole, omega, dt);
        return Math.hypot(got.re - exact.re, got.im - exact.im) / Math.hypot(exact.re, exact.im);
      };
      const [error, halved] = [errorWith(2e-12), errorWith(1e-12)];
      expect(error).toBeLessThan(0.004);
      expect(halved).toBeLessThan(0.27 * error + 1e-9);
    }
  });

  it.each(POLES)("has the static value exactly, %o", (pole) => {
    expect(response(pole, 0, 2e-12).re).toBeCloseTo(pole.delta, 6);
  });
});

describe("lossless poles", () => {
  it.each(["TMz", "TEz"] as const)(
    "neither grow nor fade over 20,000 steps from white noise (%s)",
    (polarization) => {
      const edges = { left: "electric", right: "magnetic", bottom: "electric", top: "magnetic" } as const;
      const lattice = buildLattice({ polarization, nx: 20, ny: 17, dx: 1e-3, dy: 1.2e-3, edges });
      const resonance = (delta: number, resonanceGHz: number): Pole => ({
        kind: "lorentz",
        delta,
        resonanceGHz,
        dampingGHz: 0,
      });
      const coefficients = new SectionCoefficients(lattice, {
        media: [
          { kind: "fill", properties: VACUUM },
          {
            kind: "fill",
            properties: {
              ...VACUUM,
              poles: { electric: [resonance(5, 9), resonance(2, 60)], magnetic: [resonance(3, 7)] },
            },
          },
        ],
        areas: [{ medium: 1, shape: { kind: "ellipse", x: 9, y: 9, rx: 6.3, ry: 7.1, angle: 20 } }],
        background: 0,
        walls: [],
        widthMm: 20,
        heightMm: 20.4,
        omega: 1e11,
      });
      const engine = new ReferenceEngine({
        lattice,
        coefficients: coefficients.row,
        layers: absorbingLayers(lattice, 1e9),
        drives: [],
        signals: 0,
        taps: [],
        records: 0,
      });
      let state = 5;
      for (const values of [engine.fields.f, engine.fields.gx, engine.fields.gy]) {
        const unit = values === engine.fields.f ? 1 : polarization === "TMz" ? 2.6e-6 : 0.4;
        for (let k = 0; k < values.length; k += 1) {
          // The ring of F is never stepped and stays zero.
          const [i, j] = [k % lattice.stride, Math.floor(k / lattice.stride)];
          if (i < 1 || i > lattice.columns || j < 1 || j > lattice.rows) continue;
          state = (state * 48271) % 2147483647;
          values[k] = unit * (state / 2147483647 - 0.5);
        }
      }
      engine.advance(1, new Float64Array(0), new Float64Array(0));
      const first = storedEnergy(engine);
      const seen: number[] = [];
      for (let turn = 0; turn < 200; turn += 1) {
        engine.advance(100, new Float64Array(0), new Float64Array(0));
        seen.push(storedEnergy(engine));
      }
      const mean = (values: readonly number[]): number => values.reduce((a, b) => a + b, 0) / values.length;
      expect(Math.max(...seen)).toBeLessThan(2 * first);
      const [early, late] = [mean(seen.slice(0, 50)), mean(seen.slice(150))];
      expect(early).toBeGreaterThan(0.1 * first);
      expect(Math.abs(late / early - 1)).toBeLessThan(0.1);
    },
  );
});
