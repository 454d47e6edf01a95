import { describe, expect, it, vi } from "vitest";
import { buildLattice } from "../lattice/index.js";
import { absorbingLayers } from "../boundaries/index.js";
import { ReferenceEngine, rowCoefficients } from "../stepping/index.js";
import { BOX } from "../stepping/testing.js";
import type { SectionMedia, SolverMedium } from "./index.js";
import { SectionCoefficients, VACUUM } from "./index.js";

vi.setConfig({ testTimeout: 120_000 });

const medium = (epsilon: number, mu: number): SolverMedium => ({
  kind: "fill",
  properties: { ...VACUUM, epsilon: epsilon * VACUUM.epsilon, mu: mu * VACUUM.mu },
});

/** Repeatable numbers in (0, 1) (Lehmer's generator, D. H. Lehmer, 1951; from memory). */
const randomFrom = (seed: number): (() => number) => {
  let state = seed;
  return () => {
    state = (state * 48_271) % 2_147_483_647;
    return state / 2_147_483_647;
  };
};

const CELLS = 36;
/** Ellipses of every contrast over each other, 36 × 36 cells of 1 × 1.3 mm. */
const sectionOf = (seed: number): SectionMedia => {
  const random = randomFrom(seed);
  const contrasts = [1, 2, 4, 12, 80];
  return {
    media: [medium(1, 1), ...contrasts.map((value) => medium(value, contrasts[Math.floor(5 * random())]))],
    areas: Array.from({ length: 14 }, (_, n) => ({
      medium: 1 + (n % 5),
      shape: {
        kind: "ellipse" as const,
        x: 36 * random(),
        y: 47 * random(),
        rx: 1 + 9 * random(),
        ry: 1 + 9 * random(),
        angle: 180 * random(),
      },
    })),
    background: 0,
    walls: [],
    widthMm: 36,
    heightMm: 46.8,
    omega: 3e10,
  };
};

describe.each(["TMz", "TEz"] as const)("oblique interfaces of %s", (polarization) => {
  const lattice = buildLattice({ polarization, nx: CELLS, ny: CELLS, dx: 1e-3, dy: 1.3e-3, edges: BOX });

  it.each([1, 2, 3, 4])("hold white noise within bounds for 20,000 steps, section %d", (seed) => {
    const engine = new ReferenceEngine({
      lattice,
      coefficients: new SectionCoefficients(lattice, sectionOf(seed)).row,
      layers: absorbingLayers(lattice, 5e9),
      drives: [],
      signals: 0,
      taps: [],
      records: 0,
    });
    const random = randomFrom(seed + 100);
    const row = rowCoefficients(lattice.stride);
    for (let j = 1; j <= lattice.rows; j += 1) {
      engine.readCoefficients(j, row);
      for (let i = 1; i <= lattice.columns; i += 1)
        if (row.bF[i] !== 0) engine.fields.f[j * lattice.stride + i] = random() - 0.5;
    }
    const norm = (): number =>
      Float64Array.from(engine.fields.f).reduce((sum, value) => sum + value * value, 0);
    const start = norm();
    let largest = 0;
    for (let n = 0; n < 200; n += 1) {
      engine.advance(100, new Float64Array(0), new Float64Array(0));
      largest = Math.max(largest, norm());
    }
    // What the fields hold only swings between F and G.
    expect(largest / start).toBeLessThan(4);
    expect(largest / start).toBeGreaterThan(0.05);
  });

  it("couple where media meet obliquely, and neither in one medium nor along the mesh", () => {
    const couplingsOf = (areas: SectionMedia["areas"]): number => {
      const section = { ...sectionOf(1), areas, media: [medium(1, 1), medium(4, 4)] };
      const { row } = new SectionCoefficients(lattice, section);
      const out = rowCoefficients(lattice.stride);
      let count = 0;
      for (let j = 0; j <= lattice.rows + 1; j += 1) {
        row(j, out);
        count += out.couplings.length;
      }
      return count;
    };
    const block = { kind: "rectangle" as const, x: 8.3, y: -9.1, width: 12, height: 70 };
    expect(couplingsOf([])).toBe(0);
    expect(couplingsOf([{ medium: 1, shape: { ...block, angle: 30 } }])).toBeGreaterThan(40);
    expect(couplingsOf([{ medium: 1, shape: { ...block, angle: 0 } }])).toBe(0);
  });
});
