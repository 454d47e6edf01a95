import { describe, expect, it } from "vitest";
import type { SceneInput } from "../scene/index.js";
import { readScene, SceneError } from "../scene/index.js";
import type { ModesDocument } from "./index.js";
import { findModes, modesDocumentSchema, solveModes } from "./index.js";

/** c/2 in GHz·mm. */
const HALF_C = 149.896229;
const ELECTRIC = { left: "electric", right: "electric", bottom: "electric", top: "electric" } as const;

const sceneOf = (changes: Partial<SceneInput>) => {
  const read = readScene({
    format: "heddle-scene",
    version: 1,
    name: "modes",
    polarization: "TEz",
    section: { widthMm: 30, heightMm: 20 },
    band: { fromGHz: 1, toGHz: 10 },
    mesh: { cellMm: 1 },
    edges: ELECTRIC,
    ...changes,
  });
  if (!read.ok) throw new Error(JSON.stringify(read.problems));
  return read.scene;
};
const modesOf = (changes: Partial<SceneInput>, count = 6): ModesDocument["modes"] =>
  findModes(sceneOf(changes), count).modes;

/** Frequencies of a box in rising order; fm, fn are those of one half-wave along x and y. */
const box = (fm: number, fn: number, lowest: number, shift = 0): number[] => {
  const list: number[] = [];
  for (let m = lowest; m < 12; m += 1)
    for (let n = lowest; n < 12; n += 1)
      if (m + n + shift > 0) list.push(Math.hypot((m + shift) * fm, n * fn));
  return list.sort((p, q) => p - q);
};
const expectClose = (modes: ModesDocument["modes"], expected: readonly number[], tolerance: number): void => {
  expect(modes.length).toBeGreaterThan(0);
  modes.forEach(({ cutoffGHz }, n) => {
    expect(Math.abs(cutoffGHz / expected[n] - 1), `mode ${n}`).toBeLessThan(tolerance);
  });
};
const refusalOf = (changes: Partial<SceneInput>) => {
  try {
    findModes(sceneOf(changes), 1);
  } catch (error) {
    if (error instanceof SceneError) return error.problems;
    throw error;
  }
  return [];
};

describe("modes of a closed section", () => {
  // c/2a of the standard guide of 22.86 × 10.16 mm: D. M. Pozar, Microwave Engineering, 4th ed., sec. 3.3.
  it("are held to the scene's limits on cut-offs", () => {
    const name = "Cut-off";
    const scene = sceneOf({
      section: { widthMm: 22.86, heightMm: 10.16 },
      limits: [
        { id: "first", name, sense: "below", value: 6.5, of: { cutoff: 1 } },
        { id: "second", name, sense: "above", value: 13, of: { cutoff: 2 } },
        { id: "tenth", name, sense: "above", value: 1, of: { cutoff: 10 } },
        { id: "ring", name, sense: "below", value: 1, of: { q: "highest" } },
      ],
    });
    const { limits = [] } = findModes(scene, 2);
    expect(limits.map(({ id, holds }) => [id, holds])).toEqual([
      ["first", false],
      ["second", true],
      ["tenth", null],
    ]);
    expect(limits[0].margin).toBeCloseTo(6.5 - HALF_C / 22.86, 4);
    expect(limits[1].margin).toBeCloseTo((2 * HALF_C) / 22.86 - 13, 3);
  });

  it("is the document of the contract, the same in every run", () => {
    const scene = sceneOf({ mesh: { cellMm: 2 } });
    const document = findModes(scene, 4);
    expect(modesDocumentSchema.parse(document)).toEqual(document);
    expect(document.modes).toHaveLength(4);
    expect(findModes(scene, 4)).toEqual(document);
  }, 30_000);

  it("tells its progress between short steps", () => {
    const shares: number[] = [];
    const steps = solveModes(sceneOf({}), 3);
    for (let step = steps.next(); step.done !== true; step = steps.next()) shares.push(step.value.share);
    expect(shares.length).toBeGreaterThan(5);
    expect(shares).toEqual([...shares].sort((p, q) => p - q));
    expect(shares[0]).toBe(0);
    expect(shares.at(-1)).toBeLessThan(1);
  });

  // f = (c/2)√((m/a)² + (n/b)²): D. M. Pozar, Microwave Engineering, 4th ed. 2012, eq. 3.84.
  it("takes magnetic edges for walls of the other kind", () => {
    const [fx, fy] = [HALF_C / 30, HALF_C / 20];
    const magnetic = { left: "magnetic", right: "magnetic", bottom: "magnetic", top: "magnetic" } as const;
    expectClose(modesOf({ edges: magnetic, polarization: "TMz" }), box(fx, fy, 0), 2e-5);
    expectClose(modesOf({ edges: magnetic, polarization: "TEz" }), box(fx, fy, 1), 2e-5);
    // One magnetic edge is a plane of symmetry: odd half-waves of a box of twice the width.
    const odd: number[] = [];
    for (let m = 1; m < 20; m += 2)
      for (let n = 1; n < 12; n += 1) odd.push(Math.hypot((m * HALF_C) / 60, (n * HALF_C) / 20));
    const half = modesOf({ edges: { ...ELECTRIC, left: "magnetic" }, polarization: "TMz" });
    expectClose(
      half,
      odd.sort((p, q) => p - q),
      2e-5,
    );
  });

  it("scales with √(εμ) of a uniform fill", () => {
    const filled = { media: [{ id: "fill", name: "", relativePermittivity: 3, relativePermeability: 2 }] };
    const root6 = Math.sqrt(6);
    const expected = box(HALF_C / 30 / root6, HALF_C / 20 / root6, 0);
    expectClose(modesOf({ ...filled, background: "fill" }), expected, 2e-5);
  });

  // Transverse resonance, R. E. Collin, Field Theory of Guided Waves, 2nd ed. 1991, ch. 6: a slab of ε, thickness d, on the wall of a
  // TM section: cot(k₁d)k₁ + cot(k₂(a−d))k₂ = 0 with kᵢ² = εᵢk² − (π/b)².
  it("follows the border of a dielectric that lies between mesh lines", () => {
    const [a, b, d, e] = [30, 20, 7.3, 4];
    const mismatch = (f: number): number => {
      const k2 = ((2 * Math.PI * f) / 299.792458) ** 2;
      const term = (square: number, length: number): number => {
        const root = Math.sqrt(Math.abs(square));
        return square > 0 ? root / Math.tan(root * length) : root / Math.tanh(root * length);
      };
      const ky2 = (Math.PI / b) ** 2;
      return term(e * k2 - ky2, d) + term(k2 - ky2, a - d);
    };
    let [low, high] = [4, 7.4];
    for (let pass = 0; pass < 60; pass += 1) {
      const middle = (low + high) / 2;
      if (mismatch(middle) > 0) low = middle;
      else high = middle;
    }
    const [mode] = modesOf(
      {
        polarization: "TMz",
        media: [{ id: "slab", name: "", relativePermittivity: e }],
        paint: [{ kind: "rectangle", id: "s", medium: "slab", x: 0, y: 0, width: d, height: b }],
      },
      1,
    );
    expect(Math.abs(mode.cutoffGHz / low - 1)).toBeLessThan(1e-5);
  });

  it("gives a degenerate mode as often as it occurs, four times in four equal boxes", () => {
    const walls: SceneInput["paint"] = [
      {
        kind: "wall",
        id: "v",
        points: [
          [20, 0],
          [20, 40],
        ],
      },
      {
        kind: "wall",
        id: "h",
        points: [
          [0, 20],
          [40, 20],
        ],
      },
    ];
    const section = { widthMm: 40, heightMm: 40 };
    const mesh = { cellMm: 2 };
    const f = HALF_C / 20;
    const tm = modesOf({ section, mesh, paint: walls, polarization: "TMz" }, 13);
    const [tm11, tm12] = [f * Math.SQRT2, f * Math.sqrt(5)];
    const expected = [...Array.from({ length: 4 }, () => tm11), ...Array.from({ length: 8 }, () => tm12)];
    expectClose(tm.slice(0, 12), expected, 1e-4);
    // Without frequency each void has one solution in TE; none of the four is listed.
    const te = modesOf({ section, mesh, paint: walls, polarization: "TEz" }, 9);
    expectClose(te, [...Array.from({ length: 8 }, () => f), tm11], 1e-4);
  }, 30_000);

  it("lists modes of voids that metal parts, and nothing of the metal", () => {
    const modes = modesOf({
      background: "pec",
      polarization: "TMz",
      paint: [
        { kind: "rectangle", id: "one", medium: "air", x: 1, y: 1, width: 12, height: 18 },
        { kind: "rectangle", id: "two", medium: "air", x: 16.4, y: 2, width: 9, height: 16 },
      ],
    });
    const expected = [...box(HALF_C / 12, HALF_C / 18, 1), ...box(HALF_C / 9, HALF_C / 16, 1)];
    expectClose(
      modes,
      expected.sort((p, q) => p - q),
      5e-5,
    );
  });

  it("does not mind how a box is turned", () => {
    const turned = modesOf({
      background: "pec",
      section: { widthMm: 40, heightMm: 40 },
      paint: [{ kind: "rectangle", id: "r", medium: "air", x: 8, y: 14, width: 24, height: 12, angle: 33 }],
    });
    expectClose(turned, box(HALF_C / 24, HALF_C / 12, 0), 2e-5);
  });

  it("keeps a slot much narrower than a cell open", () => {
    // Two air boxes joined by a slot of a tenth of a cell: the TE mode of both together lies between nothing and the lowest of one.
    const boxes: SceneInput["paint"] = [
      { kind: "rectangle", id: "bar", medium: "pec", x: 14, y: 0, width: 2, height: 20 },
      { kind: "rectangle", id: "slot", medium: "air", x: 14, y: 9.95, width: 2, height: 0.1 },
    ];
    const [joined] = modesOf({ paint: boxes }, 1);
    const [apart] = modesOf({ paint: boxes.slice(0, 1) }, 1);
    expect(apart.cutoffGHz).toBeGreaterThan(7);
    expect(joined.cutoffGHz).toBeGreaterThan(0.2);
    expect(joined.cutoffGHz).toBeLessThan(2);
  });
});

describe("what is lost in a mode", () => {
  // (s + σ/ε)(s + σ*/μ) = −ω₀² at s = jω: Re ω = √(ω₀² − (σ/ε − σ*/μ)²/4), 2 Im ω = σ/ε + σ*/μ.
  it("has the Q of the damped mode in a uniform fill", () => {
    const omega = 2 * Math.PI * (HALF_C / 30) * 1e9;
    const media = [{ id: "fill", name: "", conductivity: 1e-3, magneticLoss: 20 }];
    const [mode] = modesOf({ media, background: "fill" }, 1);
    const [electric, magnetic] = [1e-3 / 8.8541878128e-12, 20 / 1.25663706212e-6];
    const exact = Math.sqrt(omega ** 2 - (electric - magnetic) ** 2 / 4) / (electric + magnetic);
    expect(Math.abs((mode.mediaQ ?? 0) / exact - 1)).toBeLessThan(1e-6);
    expect(mode.wallQ).toBeNull();
  });

  // TE10 at cut-off: H_z = cos(πx/a), so ∮|H|² = 2b + a and ∫|H|² = ab/2; Q = ωμ₀(ab/2)/(R_s(2b + a)).
  it("has the Q of a box's walls in TE, and none in the media of a box of air", () => {
    const sigma = 5.8e7;
    const [mode] = modesOf({ wallConductivity: sigma }, 1);
    const omega = 2 * Math.PI * (HALF_C / 30) * 1e9;
    const mu0 = 1.25663706212e-6;
    const surface = Math.sqrt((omega * mu0) / (2 * sigma));
    const expected = (omega * mu0 * 0.03 * 0.02) / 2 / (surface * (2 * 0.02 + 0.03));
    expect(Math.abs((mode.wallQ ?? 0) / expected - 1)).toBeLessThan(1e-5);
    expect(mode.mediaQ).toBeNull();
  });

  // A film across the maximum of E_y = sin(πx/a): P = ½b/R, W = ¼ε₀ab/2.
  it("counts resistive films", () => {
    const [mode] = modesOf(
      {
        paint: [
          {
            kind: "film",
            id: "f",
            points: [
              [15, 0],
              [15, 20],
            ],
            ohmsPerSquare: 1e5,
          },
        ],
      },
      1,
    );
    const omega = 2 * Math.PI * (HALF_C / 30) * 1e9;
    const expected = (omega * 8.8541878128e-12 * 0.03 * 1e5) / 2;
    expect(Math.abs((mode.mediaQ ?? 0) / expected - 1)).toBeLessThan(1e-3);
  });

  it("leaves the walls' Q out where a thin wall ends in a TM field, for it has no limit there", () => {
    const fin: SceneInput["paint"] = [
      {
        kind: "wall",
        id: "w",
        points: [
          [15, 0],
          [15, 8],
        ],
      },
    ];
    const [tm] = modesOf({ paint: fin, polarization: "TMz", wallConductivity: 1e7 }, 1);
    const [te] = modesOf({ paint: fin, polarization: "TEz", wallConductivity: 1e7 }, 1);
    expect(tm.wallQ).toBeNull();
    expect(te.wallQ).toBeGreaterThan(100);
  });
});

describe("modes refuses", () => {
  const open = { ...ELECTRIC, right: "absorbing" } as const;
  it("an absorbing edge, with the length that is open, unless metal lies all along it", () => {
    const bar = { kind: "rectangle", id: "m", medium: "pec", x: 28, y: 0, width: 2 } as const;
    expect(refusalOf({ edges: open, paint: [{ ...bar, height: 15 }] })).toEqual([
      {
        path: "edges.right",
        sentence:
          "The right edge absorbs and 5 mm of it are not covered by metal; modes need a closed section: make the edge electric or magnetic, or paint metal all along it.",
      },
    ]);
    const covered = modesOf({ edges: open, paint: [{ ...bar, height: 20 }] });
    expectClose(covered, box(HALF_C / 28, HALF_C / 20, 0), 2e-5);
  });

  it("media that change with frequency, where they are in use", () => {
    const media = [
      {
        id: "water",
        name: "Water",
        electricPoles: [{ kind: "debye", delta: 70, tauNs: 0.008 } as const],
      },
    ];
    const drop = { kind: "ellipse", id: "d", medium: "water", x: 9, y: 9, rx: 3, ry: 2 } as const;
    expect(
      refusalOf({ media, paint: [drop], band: { fromGHz: 0.1, toGHz: 1 } }).map(({ path }) => path),
    ).toEqual(["media[0].electricPoles"]);
    const hidden = { kind: "rectangle", id: "p", medium: "pec", x: 5, y: 6, width: 8, height: 7 } as const;
    expect(refusalOf({ media, paint: [drop, hidden], band: { fromGHz: 0.1, toGHz: 1 } })).toEqual([]);
  });

  it("a section of metal", () => {
    expect(refusalOf({ background: "pec" }).map(({ path }) => path)).toEqual(["paint"]);
  });
});
