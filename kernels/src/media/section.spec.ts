/** What a painted section does to fields, seen from outside: its metal is tight, its symmetry walls are symmetric. */
import { describe, expect, it } from "vitest";
import { absorbingLayers } from "../boundaries/index.js";
import { lineSourcePoints } from "../drives/index.js";
import type { AreaShape, Point } from "../geometry/index.js";
import type { EdgeKind, Side } from "../lattice/index.js";
import { buildLattice, sectionView } from "../lattice/index.js";
import { pointProbeTaps } from "../observers/index.js";
import { ReferenceEngine } from "../stepping/index.js";
import type { SolverMedium } from "./index.js";
import { SectionCoefficients, VACUUM } from "./index.js";

type Edges = Record<Side, EdgeKind>;
const ELECTRIC: Edges = { left: "electric", right: "electric", bottom: "electric", top: "electric" };
const MEDIA: SolverMedium[] = [
  { kind: "fill", properties: VACUUM },
  { kind: "electric" },
  { kind: "magnetic" },
];

interface Setup {
  polarization: "TMz" | "TEz";
  nx?: number;
  ny?: number;
  edges?: Edges;
  shapes?: { shape: AreaShape; medium: number }[];
  background?: number;
  walls?: Point[][];
  source: Point;
  probe?: Point;
}

/** A section of 1 mm cells, 400 steps after a short current; positions in mm. */
function run(setup: Setup): { engine: ReferenceEngine; trace: Float64Array } {
  const { polarization, nx = 40, ny = 30, edges = ELECTRIC, shapes = [], background = 0, walls = [] } = setup;
  const lattice = buildLattice({ polarization, nx, ny, dx: 1e-3, dy: 1e-3, edges });
  const coefficients = new SectionCoefficients(lattice, {
    media: MEDIA,
    areas: shapes,
    background,
    walls,
    widthMm: nx,
    heightMm: ny,
    omega: 1e10,
  });
  const [px, py] = setup.probe ?? setup.source;
  const engine = new ReferenceEngine({
    lattice,
    coefficients: coefficients.row,
    layers: absorbingLayers(lattice, 2e9),
    drives: lineSourcePoints(lattice, setup.source[0], setup.source[1], 0),
    signals: 1,
    taps: pointProbeTaps(lattice, polarization === "TMz" ? "Ez" : "Hz", px, py, 0),
    records: 1,
  });
  const steps = 400;
  const signals = Float64Array.from(
    { length: steps },
    (_, n) => Math.exp(-(((n - 40) / 12) ** 2)) * (n - 40),
  );
  const trace = new Float64Array(steps);
  engine.advance(steps, signals, trace);
  return { engine, trace };
}

const largest = (values: ArrayLike<number>): number => {
  let most = 0;
  for (let k = 0; k < values.length; k += 1) most = Math.max(most, Math.abs(values[k]));
  return most;
};

/** Largest |F| of the points of the section further than `radius` cells from (x, y). */
function outside(engine: ReferenceEngine, x: number, y: number, radius: number): number {
  const view = sectionView(engine.lattice, engine.fields.f);
  let most = 0;
  for (let j = 0; j < view.shape[0]; j += 1) {
    for (let i = 0; i < view.shape[1]; i += 1) {
      const { offset } = engine.lattice;
      if (Math.hypot(i + offset - x, j + offset - y) > radius)
        most = Math.max(most, Math.abs(view.get(j, i)));
    }
  }
  return most;
}

const diamond: Point[] = [
  [12.3, 5.2],
  [20.4, 14.7],
  [11.9, 24.1],
  [4.2, 15.3],
  [12.3, 5.2],
];

describe.each(["TMz", "TEz"] as const)("metal in %s", (polarization) => {
  it("is tight as a closed slanted wall: nothing at all comes out", () => {
    const { engine } = run({ polarization, walls: [diamond], source: [12, 15] });
    expect(largest(engine.fields.f)).toBeGreaterThan(0.1);
    expect(outside(engine, 12, 15, 11)).toBe(0);
  });

  it("is tight as a thin ring of a twentieth of a cell", () => {
    const ring: AreaShape = {
      kind: "polygon",
      points: [
        [5.02, 6.03],
        [25.02, 6.03],
        [25.02, 24.03],
        [5.02, 24.03],
      ],
      holes: [
        [
          [5.07, 6.08],
          [24.97, 6.08],
          [24.97, 23.98],
          [5.07, 23.98],
        ],
      ],
    };
    const { engine } = run({ polarization, shapes: [{ shape: ring, medium: 1 }], source: [15, 15] });
    expect(largest(engine.fields.f)).toBeGreaterThan(0.1);
    expect(outside(engine, 15, 15, 14.2)).toBe(0);
  });

  it("lies exactly on mesh lines: a box painted from blocks is the box of the section's own edges", () => {
    const block = (x: number, y: number, width: number, height: number) => ({
      shape: { kind: "rectangle", x, y, width, height, angle: 0 } as const,
      medium: 1,
    });
    const painted = run({
      polarization,
      nx: 30,
      ny: 25,
      shapes: [block(0, 0, 5, 25), block(25, 0, 5, 25), block(0, 0, 30, 5), block(0, 20, 30, 5)],
      source: [12, 9],
      probe: [18.3, 13.2],
    });
    const own = run({ polarization, nx: 20, ny: 15, source: [7, 4], probe: [13.3, 8.2] });
    expect(largest(own.trace)).toBeGreaterThan(0.1);
    // Not bit for bit: the position of source and probe is rounded differently.
    const difference = painted.trace.map((value, n) => value - own.trace[n]);
    expect(largest(difference) / largest(own.trace)).toBeLessThan(1e-9);
  });

  it("goes on behind an absorbing edge: a painted guide ends in nothing", () => {
    const edges: Edges = { left: "electric", right: "absorbing", bottom: "absorbing", top: "absorbing" };
    const guide = (nx: number) => {
      const plate = (y: number, height: number) => ({
        shape: { kind: "rectangle", x: 0, y, width: nx, height, angle: 0 } as const,
        medium: 1,
      });
      return run({
        polarization,
        nx,
        ny: 30,
        edges,
        shapes: [plate(0, 5.3), plate(24.7, 5.3)],
        source: [5, 15],
        probe: [30, 15],
      }).trace;
    };
    const near = guide(40);
    const far = guide(300);
    const difference = near.map((value, n) => value - far[n]);
    // The pulse reaches down to where its guide is cut off; a guide that stopped at the edge would send back a tenth and more.
    expect(largest(difference) / largest(far)).toBeLessThan(5e-4);
  });
});

describe.each(["TMz", "TEz"] as const)("magnetic edges in %s", (polarization) => {
  it("mirror the field: half a box with a magnetic wall is a whole box with a second source", () => {
    const whole = buildWhole(polarization);
    const half = run({
      polarization,
      nx: 20,
      ny: 16,
      edges: { ...ELECTRIC, left: "magnetic", bottom: "magnetic" },
      source: [6, 5],
      probe: [11.4, 9.7],
    });
    const difference = half.trace.map((value, n) => value - whole[n]);
    expect(largest(difference) / largest(whole)).toBeLessThan(1e-11);
  });

  function buildWhole(kind: "TMz" | "TEz"): Float64Array {
    // Mirrored about x = 20 and y = 16. Hz is odd about a magnetic wall, Ez even.
    const sign = kind === "TMz" ? 1 : -1;
    const parts = (
      [
        [26, 21, 1],
        [14, 21, sign],
        [26, 11, sign],
        [14, 11, 1],
      ] as const
    ).map(([x, y, factor]) =>
      run({ polarization: kind, nx: 40, ny: 32, source: [x, y], probe: [31.4, 25.7] }).trace.map(
        (value) => factor * value,
      ),
    );
    return parts[0].map((_, n) => parts.reduce((sum, part) => sum + part[n], 0));
  }
});

describe("a perfect magnetic conductor", () => {
  it("is to TEz what a perfect electric one is to TMz", () => {
    // The dual lattices hold F at other places, so the two are compared as tightness only.
    const ring = (medium: number) => ({
      shape: {
        kind: "polygon",
        points: [
          [5, 6],
          [25, 6],
          [25, 24],
          [5, 24],
        ],
        holes: [
          [
            [7.5, 8.5],
            [22.5, 8.5],
            [22.5, 21.5],
            [7.5, 21.5],
          ],
        ],
      } as AreaShape,
      medium,
    });
    for (const polarization of ["TMz", "TEz"] as const) {
      const { engine } = run({ polarization, shapes: [ring(2)], source: [15, 15] });
      expect(largest(engine.fields.f)).toBeGreaterThan(0.1);
      expect(outside(engine, 15, 15, 14.2)).toBe(0);
    }
  });
});
