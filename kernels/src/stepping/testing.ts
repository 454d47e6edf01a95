/** A section with everything in it, for the specs that compare engines. */
import { absorbingLayers } from "../boundaries/index.js";
import type { EdgeKind, Lattice, LatticePolarization, Side } from "../lattice/index.js";
import { buildLattice } from "../lattice/index.js";
import type { Film, SectionMedia, SolverMedium } from "../media/index.js";
import { SectionCoefficients, VACUUM } from "../media/index.js";
import type { Engine, EngineSetup } from "./index.js";

type Edges = Readonly<Record<Side, EdgeKind>>;
export const edgesOf = (left: EdgeKind, right: EdgeKind, bottom: EdgeKind, top: EdgeKind): Edges => ({
  left,
  right,
  bottom,
  top,
});
export const BOX = edgesOf("electric", "electric", "electric", "electric");
export const OPEN = edgesOf("absorbing", "absorbing", "absorbing", "absorbing");

const glass: SolverMedium = {
  kind: "fill",
  properties: { ...VACUUM, epsilon: 2.3 * VACUUM.epsilon, sigma: 0.02 },
};
const ferrite: SolverMedium = {
  kind: "fill",
  properties: { ...VACUUM, mu: 1.7 * VACUUM.mu, sigmaStar: 400 },
};
/** Lossless, so that its oblique edges couple. */
const ceramic: SolverMedium = {
  kind: "fill",
  properties: { ...VACUUM, epsilon: 2.6 * VACUUM.epsilon, mu: 1.5 * VACUUM.mu },
};
const MEDIA: readonly SolverMedium[] = [
  { kind: "fill", properties: VACUUM },
  glass,
  ferrite,
  { kind: "electric" },
  { kind: "magnetic" },
  ceramic,
];

/** Paint of every kind of medium over a good part of the section, one patch into the absorbing edge. */
const painted = (lattice: Lattice): SectionMedia => {
  const [w, h] = [lattice.nx * lattice.dx * 1000, lattice.ny * lattice.dy * 1000];
  const ellipse = (medium: number, x: number, y: number, rx: number, ry: number, angle = 0) => ({
    medium,
    shape: { kind: "ellipse" as const, x: x * w, y: y * h, rx: rx * w, ry: ry * h, angle },
  });
  return {
    media: MEDIA,
    areas: [
      ellipse(1, 0.3, 0.4, 0.22, 0.18, 20),
      {
        medium: 2,
        shape: { kind: "rectangle", x: 0.55 * w, y: 0.2 * h, width: 0.6 * w, height: 0.31 * h, angle: 0 },
      },
      ellipse(3, 0.7, 0.7, 0.06, 0.09),
      ellipse(4, 0.2, 0.8, 0.05, 0.04),
      ellipse(5, 0.42, 0.77, 0.13, 0.15, 30),
    ],
    background: 0,
    walls: [
      [
        [0.4 * w, 0.6 * h],
        [0.4 * w, 0.95 * h],
      ],
    ],
    widthMm: w,
    heightMm: h,
    omega: 3e10,
  };
};

const mixed: SolverMedium = {
  kind: "fill",
  properties: {
    ...VACUUM,
    epsilon: 1.4 * VACUUM.epsilon,
    sigma: 0.01,
    poles: {
      electric: [
        { kind: "debye", delta: 3, tauNs: 0.02 },
        { kind: "lorentz", delta: 1.5, resonanceGHz: 6, dampingGHz: 0.4 },
        { kind: "lorentz", delta: 0.5, resonanceGHz: 3, dampingGHz: 9 },
      ],
      magnetic: [{ kind: "lorentz", delta: 0.8, resonanceGHz: 4, dampingGHz: 1 }],
    },
  },
};
const relaxing: SolverMedium = {
  kind: "fill",
  properties: {
    ...VACUUM,
    mu: 1.2 * VACUUM.mu,
    poles: { electric: [], magnetic: [{ kind: "debye", delta: 2, tauNs: 0.05 }] },
  },
};

/** The same paint, the lossy media replaced by dispersive ones. */
export const dispersive = (lattice: Lattice): SectionMedia => ({
  ...painted(lattice),
  media: MEDIA.map((medium) => (medium === glass ? mixed : medium === ferrite ? relaxing : medium)),
});

/** Films of every kind over the dispersive paint: along the mesh, off its lines, slanted, bent, crossing, into an absorbing edge. */
export const filmed = (lattice: Lattice): SectionMedia => {
  const section = dispersive(lattice);
  const [w, h] = [section.widthMm, section.heightMm];
  const film = (ohmsPerSquare: number, ...points: [number, number][]): Film => ({
    ohmsPerSquare,
    points: points.map(([x, y]): [number, number] => [x * w, y * h]),
  });
  return {
    ...section,
    films: [
      film(50, [0.15, 0.1], [0.15, 0.9]),
      film(377, [0.1, 0.55], [0.62, 0.55], [0.62, 0.2]),
      film(5, [0.3, 0.15], [0.8, 0.9], [0.9, 0.45]),
      film(1e4, [0, 0.31], [1, 0.31]),
    ],
  };
};

/** The same without what couples obliquely. */
export const uncoupled = (lattice: Lattice): SectionMedia => {
  const section = painted(lattice);
  return { ...section, areas: section.areas.filter(({ medium }) => MEDIA[medium] !== ceramic) };
};

export interface Case {
  polarization: LatticePolarization;
  edges: Edges;
  nx: number;
  ny: number;
  media?: (lattice: Lattice) => SectionMedia;
}

export const empty = (lattice: Lattice): SectionMedia => ({ ...painted(lattice), areas: [], walls: [] });

export const setupOf = ({ polarization, edges, nx, ny, media = painted }: Case): EngineSetup => {
  const lattice = buildLattice({ polarization, nx, ny, dx: 1e-3, dy: 1.3e-3, edges });
  const { rows, columns } = lattice;
  const coefficients = new SectionCoefficients(lattice, media(lattice));
  return {
    lattice,
    coefficients: coefficients.row,
    branches: coefficients.branches,
    layers: absorbingLayers(lattice, 5e9),
    drives: [
      { row: Math.ceil(rows / 2), column: Math.ceil(columns / 2), weight: 0.7, signal: 0 },
      { row: Math.ceil(rows / 2) + 1, column: Math.ceil(columns / 2), weight: 0.3, signal: 0 },
      { row: Math.ceil(rows / 3), column: Math.ceil(columns / 3), weight: 1, signal: 1 },
    ],
    signals: 2,
    taps: [
      { row: Math.ceil(rows / 3), column: 2, field: "f", weight: 0.25, record: 0 },
      { row: Math.ceil(rows / 2), column: 3, field: "f", weight: 0.75, record: 0 },
      { row: Math.ceil(rows / 2), column: Math.ceil(columns / 2), field: "gx", weight: -2, record: 1 },
      { row: 1, column: Math.ceil(columns / 2), field: "gy", weight: 3, record: 2 },
    ],
    records: 3,
  };
};

export const STEPS = 240;
export const signalsFor = (steps: number): Float64Array =>
  Float64Array.from({ length: 2 * steps }, (_, n) => {
    const t = n >> 1;
    return Math.exp(-(((t - 40) / 13) ** 2)) * (n % 2 === 0 ? 1 : Math.sin(t / 5));
  });

export const run = (engine: Engine, steps = STEPS, from = 0): Float64Array => {
  const records = new Float64Array(3 * steps);
  engine.advance(steps, signalsFor(from + steps).subarray(2 * from), records);
  return records;
};

export const bytesOf = (engine: Engine): string => Buffer.from(engine.save()).toString("base64");
