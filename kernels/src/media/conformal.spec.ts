/** Conformal metal seen from outside: it is stable at its step, keeps energy, is tight, and equals the staircase on mesh lines. */
import { describe, expect, it } from "vitest";
import { absorbingLayers } from "../boundaries/index.js";
import type { AreaShape, PaintedArea, Point } from "../geometry/index.js";
import type { LatticePolarization } from "../lattice/index.js";
import { buildLattice, sectionView } from "../lattice/index.js";
import { storedEnergy } from "../observers/index.js";
import { ReferenceEngine, rowCoefficients } from "../stepping/index.js";
import type { SectionBefore, SectionMedia, SolverMedium } from "./index.js";
import { SectionCoefficients, VACUUM } from "./index.js";

const MEDIA: readonly SolverMedium[] = [
  { kind: "fill", properties: VACUUM },
  { kind: "electric" },
  { kind: "fill", properties: { ...VACUUM, epsilon: 3 * VACUUM.epsilon } },
];
const [AIR, METAL, GLASS] = [0, 1, 2];
const BOX = { left: "electric", right: "electric", bottom: "electric", top: "electric" } as const;
const [NX, NY] = [26, 22];

type Painted = Pick<SectionMedia, "areas" | "walls" | "corners"> & { background?: number };

function coefficientsOf(
  polarization: LatticePolarization,
  painted: Painted,
  {
    courant = 0.99,
    metal = "conformal",
    previous,
  }: { courant?: number; metal?: "conformal" | "staircase"; previous?: SectionBefore } = {},
) {
  const lattice = buildLattice({ polarization, nx: NX, ny: NY, dx: 1e-3, dy: 1.2e-3, edges: BOX, courant });
  const section: SectionMedia = {
    media: MEDIA,
    background: AIR,
    ...painted,
    widthMm: NX,
    heightMm: 1.2 * NY,
    omega: 1e10,
    metal,
  };
  const coefficients = new SectionCoefficients(lattice, section, previous);
  return { lattice, coefficients };
}

function engineOf(...args: Parameters<typeof coefficientsOf>): ReferenceEngine {
  const { lattice, coefficients } = coefficientsOf(...args);
  return new ReferenceEngine({
    lattice,
    coefficients: coefficients.row,
    layers: absorbingLayers(lattice, 2e9),
    drives: [],
    signals: 0,
    taps: [],
    records: 0,
  });
}

const step = (engine: ReferenceEngine, steps: number): void => {
  engine.advance(steps, new Float64Array(0), new Float64Array(0));
};

/** Reproducible numbers in [0, 1) (a linear congruence). */
function randomOf(seed: number): () => number {
  let state = seed;
  return () => {
    state = (Math.imul(state, 1664525) + 1013904223) >>> 0;
    return state / 2 ** 32;
  };
}

function randomPaint(seed: number): Painted {
  const random = randomOf(seed);
  const height = 1.2 * NY;
  const place = (): Point => [random() * NX, random() * height];
  const shape = (kind: number): AreaShape => {
    const [x, y] = place();
    if (kind === 0)
      return { kind: "ellipse", x, y, rx: 0.2 + 5 * random(), ry: 0.2 + 5 * random(), angle: 90 * random() };
    if (kind === 1)
      return {
        kind: "rectangle",
        x,
        y,
        width: 0.02 + 6 * random(),
        height: 0.02 + 2 * random(),
        angle: 180 * random(),
      };
    if (kind === 2) return { kind: "polygon", points: [place(), place(), place()], holes: [] };
    return { kind: "stroke", points: [place(), place(), place()], widthMm: 0.05 + 1.5 * random() };
  };
  const areas = Array.from({ length: 7 }, (_, n) => ({
    shape: shape(n % 4),
    medium: [METAL, METAL, METAL, GLASS, METAL, AIR, METAL][n],
  }));
  return { areas, walls: [[place(), place()]] };
}

/** White noise everywhere: every mode of the lattice, the most unstable ones too. */
function excite(engine: ReferenceEngine, seed: number): void {
  const random = randomOf(seed);
  const { lattice } = engine;
  const row = rowCoefficients(lattice.stride);
  for (let j = 1; j <= lattice.rows; j += 1) {
    engine.readCoefficients(j, row);
    for (let i = 1; i <= lattice.columns; i += 1) {
      if (row.bF[i] > 0) engine.fields.f[j * lattice.stride + i] = random() - 0.5;
    }
  }
}

/** Largest energy over each of two spans of steps, over the energy at the start. */
function growth(engine: ReferenceEngine, steps: number): number {
  step(engine, 50);
  let early = 0;
  for (let n = 0; n < 20; n += 1) {
    step(engine, 7);
    early = Math.max(early, storedEnergy(engine));
  }
  step(engine, steps);
  let late = 0;
  for (let n = 0; n < 20; n += 1) {
    step(engine, 7);
    late = Math.max(late, storedEnergy(engine));
  }
  return late / early;
}

describe.each([
  ["TMz", 0.99],
  ["TEz", 0.82],
  ["TEz", 0.99],
] as const)("random metal in %s at %d of the limit", (polarization, courant) => {
  it("neither grows nor fades over 20,000 steps from white noise", { timeout: 90_000 }, () => {
    for (let seed = 1; seed <= 6; seed += 1) {
      const engine = engineOf(polarization, randomPaint(seed), { courant });
      excite(engine, seed);
      const ratio = growth(engine, 20_000);
      expect(ratio, `seed ${seed}`).toBeGreaterThan(0.5);
      expect(ratio, `seed ${seed}`).toBeLessThan(2);
    }
  });
});

describe.each([
  ["TMz", 0.99],
  ["TEz", 0.82],
  ["TEz", 0.99],
] as const)("corners of metal in %s at %d of the limit", (polarization, courant) => {
  /** A turned square with its four corners, at any place in its cells. */
  const turned = (seed: number): Painted => {
    const random = randomOf(seed);
    const [x, y, angle, side] = [12 + 2 * random(), 12 + 2 * random(), 90 * random(), 8 + 2 * random()];
    const corners = [0, 1, 2, 3].map((n) => {
      const diagonal = (angle * Math.PI) / 180 + Math.PI / 4 + (n * Math.PI) / 2;
      return {
        x: (x + (side / Math.SQRT2) * Math.cos(diagonal)) / 1000,
        y: (y + (side / Math.SQRT2) * Math.sin(diagonal)) / 1000,
        from: diagonal - 0.75 * Math.PI,
        opening: 1.5 * Math.PI,
        reach: side / 2000,
      };
    });
    const shape = {
      kind: "rectangle",
      x: x - side / 2,
      y: y - side / 2,
      width: side,
      height: side,
      angle,
    } as const;
    return { areas: [{ medium: METAL, shape }], walls: [], corners };
  };

  it("are followed without growing or fading over 20,000 steps from white noise", { timeout: 90_000 }, () => {
    let changed = 0;
    for (let seed = 1; seed <= 8; seed += 1) {
      const painted = turned(seed);
      const engine = engineOf(polarization, painted, { courant });
      const [got, plain] = [rowCoefficients(engine.lattice.stride), rowCoefficients(engine.lattice.stride)];
      const without = coefficientsOf(polarization, { ...painted, corners: [] }, { courant }).coefficients;
      for (let j = 0; j <= engine.lattice.rows; j += 1) {
        engine.readCoefficients(j, got);
        without.row(j, plain);
        changed += got.bGx.filter((b, i) => Math.abs(b - plain.bGx[i]) > 1e-6 * b).length;
      }
      excite(engine, seed);
      const ratio = growth(engine, 20_000);
      expect(ratio, `seed ${seed}`).toBeGreaterThan(0.5);
      expect(ratio, `seed ${seed}`).toBeLessThan(2);
    }
    // Not by leaving the corners alone.
    expect(changed).toBeGreaterThan(8 * 4 * 5);
  });
});

/** Largest |F| further than `radius` mm from (x, y). */
function outside(engine: ReferenceEngine, x: number, y: number, radius: number): number {
  const view = sectionView(engine.lattice, engine.fields.f);
  const { offset } = engine.lattice;
  let most = 0;
  for (let j = 0; j < view.shape[0]; j += 1) {
    for (let i = 0; i < view.shape[1]; i += 1) {
      const distance = Math.hypot(i + offset - x, 1.2 * (j + offset) - y);
      if (distance > radius) most = Math.max(most, Math.abs(view.get(j, i)));
    }
  }
  return most;
}

describe.each(["TMz", "TEz"] as const)("closed thin metal in %s", (polarization) => {
  const shapes = Array.from({ length: 12 }, (_, n) => n);
  const corners = (n: number, radius: number): Point[] =>
    [0, 1, 2, 3].map((k): Point => {
      const angle = 0.13 + 0.37 * n + (k * Math.PI) / 2;
      return [13.1 + radius * Math.cos(angle), 13.3 + radius * Math.sin(angle)];
    });
  it.each(shapes)("lets nothing out of a turned square, sheet or wall (%d)", (n) => {
    const thickness = [0.01, 0.05, 0.3, 0.7][n % 4];
    const ring = corners(n, 9);
    const painted: Painted =
      n < 8
        ? {
            areas: [
              {
                medium: METAL,
                shape: { kind: "polygon", points: ring, holes: [corners(n, 9 - thickness * Math.SQRT2)] },
              },
            ],
            walls: [],
          }
        : { areas: [], walls: [[...ring, ring[0]]] };
    const engine = engineOf(polarization, painted, { courant: 0.82 });
    const { lattice, fields } = engine;
    fields.f[Math.round(lattice.rows / 2) * lattice.stride + Math.round(lattice.columns / 2)] = 1;
    step(engine, 600);
    expect(outside(engine, 13.1, 13.3, 20)).toBe(0);
    expect(outside(engine, 13.1, 13.3, 10.6)).toBe(0);
    expect(outside(engine, 13.1, 13.3, 0)).toBeGreaterThan(1e-3);
  });
});

describe.each(["TMz", "TEz"] as const)("metal on mesh lines in %s", (polarization) => {
  it("has the staircase's coefficients, bit for bit", () => {
    const painted: Painted = {
      areas: [
        { medium: METAL, shape: { kind: "rectangle", x: 4, y: 6, width: 5, height: 7.2, angle: 0 } },
        { medium: METAL, shape: { kind: "rectangle", x: 15, y: 0, width: 2, height: 12, angle: 0 } },
      ],
      walls: [
        [
          [20, 4.8],
          [20, 18],
        ],
      ],
    };
    const conformal = coefficientsOf(polarization, painted);
    const staircase = coefficientsOf(polarization, painted, { metal: "staircase" });
    const { stride, rows } = conformal.lattice;
    const a = rowCoefficients(stride);
    const b = rowCoefficients(stride);
    for (let j = 0; j <= rows; j += 1) {
      conformal.coefficients.row(j, a);
      staircase.coefficients.row(j, b);
      expect(a, `row ${j}`).toEqual(b);
    }
  });
});

describe("an edit of a part of a section", () => {
  const disk = (x: number, y: number, medium: number): PaintedArea => ({
    shape: { kind: "ellipse", x, y, rx: 3.3, ry: 2.6, angle: 20 },
    medium,
  });
  const standing = [disk(6, 20, METAL), disk(20, 5.3, METAL), disk(13, 12.1, METAL)];

  it.each(["TMz", "TEz"] as const)("gives what the whole section gives anew (%s)", (polarization) => {
    const before = coefficientsOf(polarization, { areas: standing, walls: [] });
    // Glass over the middle disk bares what was metal, and a new disk leans on it.
    const areas = [...standing, disk(12, 13, GLASS), disk(16, 12, METAL)];
    const box = { firstRow: 3, lastRow: 17, firstColumn: 0, lastColumn: NX + 2 };
    const edited = coefficientsOf(polarization, { areas, walls: [] }, { previous: { ...before, box } });
    const anew = coefficientsOf(polarization, { areas, walls: [] });
    const [got, wanted] = [rowCoefficients(before.lattice.stride), rowCoefficients(before.lattice.stride)];
    let changed = 0;
    for (let j = 0; j <= before.lattice.rows + 1; j += 1) {
      edited.coefficients.row(j, got);
      anew.coefficients.row(j, wanted);
      expect(got).toEqual(wanted);
      before.coefficients.row(j, got);
      if (!got.bF.every((b, i) => b === wanted.bF[i])) changed += 1;
    }
    expect(changed).toBeGreaterThan(5);
  });
});
