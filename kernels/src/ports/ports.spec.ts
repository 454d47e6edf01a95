import { describe, expect, it } from "vitest";
import { buildLattice } from "../lattice/index.js";
import { SectionCoefficients, VACUUM } from "../media/index.js";
import type { PortSpec } from "./index.js";
import {
  complexTable,
  guidePhase,
  largestGain,
  latticeCutoff,
  portMode,
  scatteringColumns,
} from "./index.js";
import { tridiagonalPair } from "./tridiagonal.js";

const C0 = 299792458;

describe("the mode of a port's line", () => {
  const NX = 30;
  const NY = 20;
  const [dx, dy] = [1e-3, 1.3e-3];
  const modeOf = (polarization: "TMz" | "TEz", port: Partial<PortSpec>) => {
    const lattice = buildLattice({
      polarization,
      nx: NX,
      ny: NY,
      dx,
      dy,
      edges: { left: "absorbing", right: "absorbing", bottom: "electric", top: "electric" },
    });
    const section = {
      media: [{ kind: "fill" as const, properties: VACUUM }],
      areas: [],
      walls: [],
      background: 0,
      widthMm: NX,
      heightMm: NY * 1.3,
      omega: 6e10,
    };
    const whole: PortSpec = {
      id: "p",
      from: [8, 0],
      to: [8, 26],
      inward: "+x",
      mode: 1,
      shiftMm: 0,
      ...port,
    };
    return { lattice, mode: portMode(lattice, new SectionCoefficients(lattice, section).row, whole) };
  };

  it.each([
    ["TMz", 1],
    ["TMz", 3],
    ["TEz", 0],
    ["TEz", 2],
  ] as const)("%s, mode %i: sine or cosine, with the lattice's own cut-off", (polarization, m) => {
    const { lattice, mode } = modeOf(polarization, { mode: m });
    const { dt } = lattice;
    expect(mode.points.length).toBe(polarization === "TMz" ? NY - 1 : NY);
    expect(mode.r).toBeCloseTo(((C0 * dt) / dx) ** 2, 12);
    expect(mode.lambda).toBeCloseTo(4 * ((C0 * dt) / dy) ** 2 * Math.sin((m * Math.PI) / 2 / NY) ** 2, 12);
    const shape = (n: number): number =>
      polarization === "TMz"
        ? Math.sin((m * Math.PI * (n + 1)) / NY)
        : Math.cos((m * Math.PI * (n + 0.5)) / NY);
    const largest = Math.max(...mode.profile.map((_, n) => Math.abs(shape(n))));
    mode.profile.forEach((value, n) => expect(value).toBeCloseTo(shape(n) / largest, 9));
    // sin(ωΔt/2)/(cΔt) = sin(mπ/2N)/Δy at cut-off; above it κ obeys the lattice's dispersion relation.
    const cutoff = Math.asin(((C0 * dt) / dy) * Math.sin((m * Math.PI) / 2 / NY)) / (Math.PI * dt);
    expect(latticeCutoff(lattice, mode) / 1e9).toBeCloseTo(cutoff / 1e9, 6);
    expect(m === 0 || guidePhase(lattice, mode, 0.99 * cutoff) === null).toBe(true);
    const f = cutoff + 3e9;
    const kappa = guidePhase(lattice, mode, f)?.kappa ?? Number.NaN;
    const sum = (Math.sin(kappa / 2) / dx) ** 2 + (Math.sin((m * Math.PI) / 2 / NY) / dy) ** 2;
    expect(sum / (Math.sin(Math.PI * f * dt) / (C0 * dt)) ** 2).toBeCloseTo(1, 9);
  });

  it("stands on the mesh line at or behind the port, and never in an absorbing layer", () => {
    const planes = (polarization: "TMz" | "TEz", x: number, inward: "+x" | "-x"): number =>
      modeOf(polarization, { from: [x, 0], to: [x, 26], inward }).mode.planeCells;
    expect(planes("TMz", 8, "+x")).toBeCloseTo(0, 12);
    expect(planes("TMz", 8.4, "+x")).toBeCloseTo(0.4, 12);
    expect(planes("TMz", 8.4, "-x")).toBeCloseTo(0.6, 12);
    expect(planes("TEz", 8, "+x")).toBeCloseTo(0.5, 12);
    expect(planes("TMz", 0, "+x")).toBeCloseTo(-1, 12);
    expect(planes("TMz", 30, "-x")).toBeCloseTo(-1, 12);
  });

  it("refuses a mode that the line's points cannot carry", () => {
    expect(() => modeOf("TMz", { mode: 20 })).toThrow(/too few for mode 20/);
  });
});

describe("eigenpairs of a tridiagonal matrix", () => {
  it("fulfil their equation, also where neighbouring values nearly coincide", () => {
    const n = 41;
    // Two nearly separate halves (J. H. Wilkinson's matrix W21+ has such pairs).
    const diagonal = Float64Array.from({ length: n }, (_, i) => Math.abs(i - 20));
    const beside = Float64Array.from({ length: n - 1 }, () => 1);
    for (const index of [0, 1, 20, 39, 40]) {
      const { value, vector } = tridiagonalPair(diagonal, beside, index);
      for (let i = 0; i < n; i += 1) {
        const left = i > 0 ? beside[i - 1] * vector[i - 1] : 0;
        const right = i + 1 < n ? beside[i] * vector[i + 1] : 0;
        expect(Math.abs(left + diagonal[i] * vector[i] + right - value * vector[i])).toBeLessThan(1e-11);
      }
    }
    expect(() => tridiagonalPair(diagonal, beside, n)).toThrow(RangeError);
  });
});

describe("S from waves", () => {
  const table = (rows: number, columns: number, of: (i: number, j: number) => [number, number]) => {
    const made = complexTable(rows, columns);
    for (let i = 0; i < rows; i += 1)
      for (let j = 0; j < columns; j += 1) [made.re[i * columns + j], made.im[i * columns + j]] = of(i, j);
    return made;
  };
  const s = table(3, 3, (i, j) => [0.3 * Math.cos(1 + i + 2 * j + i * j), 0.4 * Math.sin(2 + 3 * i - j)]);
  const product = (a: typeof s): typeof s =>
    table(3, a.columns, (i, j) => {
      let [re, im] = [0, 0];
      for (let k = 0; k < 3; k += 1) {
        const [p, q] = [i * 3 + k, k * a.columns + j];
        re += s.re[p] * a.re[q] - s.im[p] * a.im[q];
        im += s.re[p] * a.im[q] + s.im[p] * a.re[q];
      }
      return [re, im];
    });

  it("takes out what comes back into every port where all were driven, in whatever order", () => {
    const driven = [2, 0, 1];
    const a = table(3, 3, (i, j) => (i === driven[j] ? [0, 2] : [0.1 * (i - j), 0.05 * i]));
    const found = scatteringColumns(a, product(a), driven);
    driven.forEach((port, run) => {
      for (let i = 0; i < 3; i += 1) {
        expect(found.re[i * 3 + run]).toBeCloseTo(s.re[i * 3 + port], 12);
        expect(found.im[i * 3 + run]).toBeCloseTo(s.im[i * 3 + port], 12);
      }
    });
  });

  it("divides by the driven port's wave where not all were driven", () => {
    const a = table(3, 1, (i) => (i === 1 ? [0.5, -1] : [0, 0]));
    const found = scatteringColumns(a, product(a), [1]);
    for (let i = 0; i < 3; i += 1) expect(found.re[i]).toBeCloseTo(s.re[i * 3 + 1], 12);
  });

  it("finds the largest gain over all excitations", () => {
    // A lossless two-port times 0.8, and with one column turned by a lossless phase.
    const [c, d] = [Math.cos(0.7), Math.sin(0.7)];
    const lossless = table(2, 2, (i, j) => (i === j ? [0.8 * c, 0] : [0, 0.8 * d]));
    expect(largestGain(lossless)).toBeCloseTo(0.64, 12);
    const one = table(2, 2, (i, j) => (i === j ? [i === 0 ? 0.2 : 1.1, 0] : [0, 0]));
    expect(largestGain(one)).toBeCloseTo(1.21, 9);
  });
});
