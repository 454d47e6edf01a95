/**
 * Resistive films where they lie: branches between the field points around them (see `Branch` in `stepping`).
 *
 * A film of sheet resistance R carries K = E/R along itself, and E across it has a kink: dE/dn jumps by μ·dK/dt. Between two lines of field
 * points h apart, at a fraction α from the first, the straight line between the two values therefore misses the film's E by
 * α(1 − α)h·μ·dK/dt, that is, E = (1 − α)E₁ + αE₂ − L·dK/dt with L = μα(1 − α)h; and a current at α acts on the two points by 1 − α and
 * α. So a film is a resistor and an inductor in series between them, which on a line of points is a conductance alone.
 * Between its points E is also curved, d²E/dn² = −ω²με·E, so that the straight line falls short of it by ω²με·α(1 − α)h²/2, and the
 * current's share of the points by as much: R is taken that much smaller, at the band's middle.
 * (Derived here: it is the exact circuit of a line of inductances μh and capacitances εh with a conductance at α.)
 *
 * TMz: E = Ez on the nodes. A film that is steeper than the diagonal has one branch for each row of nodes, with the part of the film within
 * half a cell of that row; a flatter one has one for each column. A slant changes that part's length, and of the kink only its share
 * along the row counts.
 *
 * TEz: E lies in the plane. The film is cut at the mesh lines; each piece feels ∫E·dl, with the two edges along x by their distance in y and
 * the two along y by their distance in x, and its current runs in the same edges by the same weights: such pieces leave no charge
 * between them. A film along the mesh is as exact as in TMz; at a slant, E along and across share edges, and the surplus that
 * `BranchMemory` gives back a step late acts across the film like a coating of a fraction of a cell.
 *
 * In the absorbing layers, where films that end on an absorbing edge go on straight outward, they are conductances on the points.
 */
import type { Point } from "../geometry/index.js";
import type { Lattice } from "../lattice/index.js";
import { columnShare, EPS0, MU0, rowShare } from "../lattice/index.js";
import type { Branch, BranchPoint, EngineField, RowCoefficients } from "../stepping/index.js";
import { rowCoefficients } from "../stepping/index.js";
import { isInLayer } from "./row-runs.js";

export interface Film {
  /** mm. */
  points: readonly Point[];
  /** Ω. */
  ohmsPerSquare: number;
}

/** A part of a film that makes one branch. */
interface Piece {
  points: readonly BranchPoint[];
  /** Ω, in the units in which V is the sum of weighted fields. */
  resistance: number;
  /** Inductance over μ, in the same units. */
  inductancePerMu: number;
  /** The point between, whose storage tells μ. */
  link: { field: EngineField; row: number; column: number };
  /** A point of E in the link's row, whose storage tells ε. */
  host: { field: EngineField; row: number; column: number };
  /** m: distance of the points along the film's normal, and their α(1 − α)h² in m². */
  reach: number;
  sag: number;
}

interface FilmLoss {
  field: EngineField;
  column: number;
  /** In units of (1 − a)/b. */
  loss: number;
}

/** Parts of a film shorter than this (in cells) are nothing, and nearer than this to a line of points they lie on it. */
const TINY = 1e-9;
const ON_EDGE = 1e-5;

/** Cuts 0 … 1 where the straight line from `a` to `b` crosses shift + integers. */
function crossings(a: number, b: number, shift: number): number[] {
  const cuts: number[] = [];
  if (Math.abs(b - a) < TINY) return cuts;
  for (let n = Math.ceil(Math.min(a, b) - shift); n + shift < Math.max(a, b); n += 1) {
    const t = (n + shift - a) / (b - a);
    if (t > 0 && t < 1) cuts.push(t);
  }
  return cuts;
}

const parts = (cuts: readonly number[]): [number, number][] => {
  const sorted = [0, ...[...cuts].sort((p, q) => p - q), 1];
  return sorted.slice(1).map((end, n) => [sorted[n], end]);
};

/** Lower line and fraction of a position in cells. */
function fractionOf(position: number): [number, number] {
  const low = Math.floor(position + TINY);
  const fraction = position - low;
  return [low, fraction < TINY ? 0 : fraction];
}

function onNodes(lattice: Lattice, a: Point, b: Point, ohms: number): Piece[] {
  const { dx, dy, layers } = lattice;
  const length = Math.hypot((b[0] - a[0]) * dx, (b[1] - a[1]) * dy);
  const normal = [(Math.abs(b[1] - a[1]) * dy) / length, (Math.abs(b[0] - a[0]) * dx) / length];
  const steep = normal[0] >= normal[1];
  // Along the film's strips, and across them where it lies between two nodes.
  const [along, across] = steep ? [1, 0] : [0, 1];
  const pieces: Piece[] = [];
  for (const [from, to] of parts(crossings(a[along], b[along], 0.5))) {
    if ((to - from) * length < TINY * dx) continue;
    const strip = Math.round(a[along] + ((b[along] - a[along]) * (from + to)) / 2);
    // Where the piece, drawn out, crosses the line of nodes: beside that line it would feel E's kink from outside.
    const [low, alpha] = fractionOf(
      a[across] + ((b[across] - a[across]) * (strip - a[along])) / (b[along] - a[along]),
    );
    const at = (offset: number): { field: "f"; row: number; column: number } => {
      const [x, y] = steep ? [low + offset, strip] : [strip, low + offset];
      return { field: "f", row: y + 1 + layers.bottom, column: x + 1 + layers.left };
    };
    const part = (to - from) * length;
    pieces.push({
      points: [
        { ...at(0), weight: 1 - alpha },
        { ...at(1), weight: alpha },
      ],
      resistance: ohms / part,
      inductancePerMu: (alpha * (1 - alpha) * (steep ? dx : dy) * Math.max(...normal)) / part,
      link: { ...at(0), field: steep ? "gy" : "gx" },
      host: at(0),
      reach: steep ? dx * normal[0] : dy * normal[1],
      sag: alpha * (1 - alpha) * (steep ? dx * normal[0] : dy * normal[1]) ** 2,
    });
  }
  return pieces;
}

function onEdges(lattice: Lattice, a: Point, b: Point, ohms: number): Piece[] {
  const { dx, dy, layers } = lattice;
  const length = Math.hypot((b[0] - a[0]) * dx, (b[1] - a[1]) * dy);
  const [nx, ny] = [((b[1] - a[1]) * dy) / length, ((b[0] - a[0]) * dx) / length];
  const pieces: Piece[] = [];
  for (const [from, to] of parts([...crossings(a[0], b[0], 0), ...crossings(a[1], b[1], 0)])) {
    const part = (to - from) * length;
    if (part < TINY * dx) continue;
    const [x, y] = [0, 1].map((axis) => a[axis] + ((b[axis] - a[axis]) * (from + to)) / 2);
    const [cx, fx] = fractionOf(x);
    const [cy, fy] = fractionOf(y);
    const [sx, sy] = [(b[0] - a[0]) * (to - from), (b[1] - a[1]) * (to - from)];
    const column = cx + 1 + layers.left;
    const row = cy + 1 + layers.bottom;
    pieces.push({
      points: [
        { field: "gx", row: row - 1, column, weight: sx * (1 - fy) },
        { field: "gx", row, column, weight: sx * fy },
        { field: "gy", row, column: column - 1, weight: sy * (1 - fx) },
        { field: "gy", row, column, weight: sy * fx },
      ],
      resistance: ohms * part,
      inductancePerMu: (fx * (1 - fx) * dx * nx * nx + fy * (1 - fy) * dy * ny * ny) * part,
      link: { field: "f", row, column },
      host: { field: Math.abs(sx) > Math.abs(sy) ? "gx" : "gy", row, column },
      reach: Math.hypot(dx * nx, dy * ny),
      sag: fx * (1 - fx) * (dx * nx) ** 2 + fy * (1 - fy) * (dy * ny) ** 2,
    });
  }
  return pieces;
}

/** The film's segments in cells, with what goes on behind absorbing edges. */
function segmentsOf(lattice: Lattice, { points }: Film): [Point, Point][] {
  const { dx, dy, nx, ny, edges, layers } = lattice;
  const inCells = points.map(([x, y]): Point => [x / 1000 / dx, y / 1000 / dy]);
  const segments = inCells.slice(1).map((point, n): [Point, Point] => [inCells[n], point]);
  for (const [x, y] of [inCells[0], inCells[inCells.length - 1]]) {
    if (Math.abs(x) < ON_EDGE && edges.left === "absorbing")
      segments.push([
        [0, y],
        [-layers.left, y],
      ]);
    if (Math.abs(x - nx) < ON_EDGE && edges.right === "absorbing")
      segments.push([
        [nx, y],
        [nx + layers.right, y],
      ]);
    if (Math.abs(y) < ON_EDGE && edges.bottom === "absorbing")
      segments.push([
        [x, 0],
        [x, -layers.bottom],
      ]);
    if (Math.abs(y - ny) < ON_EDGE && edges.top === "absorbing")
      segments.push([
        [x, ny],
        [x, ny + layers.top],
      ]);
  }
  return segments.filter(([a, b]) => Math.hypot(b[0] - a[0], b[1] - a[1]) > TINY);
}

/** ε or μ at a point, from its coefficients; `vacuum` where nothing can change. */
function storageAt(
  lattice: Lattice,
  row: RowCoefficients,
  { field, row: j, column }: Piece["link"],
  vacuum: number,
): number {
  const { dx, dy, dt } = lattice;
  const [a, b, geometry] =
    field === "f"
      ? [row.aF, row.bF, dx * dy * columnShare(lattice, column) * rowShare(lattice, j)]
      : field === "gx"
        ? [row.aGx, row.bGx, dy / dx / columnShare(lattice, column)]
        : [row.aGy, row.bGy, dx / dy / rowShare(lattice, j)];
  return b[column] > 0 ? (dt * (1 + a[column])) / (2 * b[column]) / geometry : vacuum;
}

/** Phases beyond this, far from any useful mesh, are not made good. */
const LARGEST_PHASE = 1;

/**
 * The factor of R for the curve of E between the points, and for what a wave that meets the film at right angles sees of it on the mesh: a
 * conductance of a point counts cos(ωΔt/2) in time, and against the wave's admittance in space 1/cos(kh/2).
 *
 * @param k wave number at the band's middle, 1/m
 */
function corrected(k: number, turn: number, { sag, reach }: Piece): number {
  const phase = Math.min(LARGEST_PHASE, k * reach);
  const inTime = Math.cos(Math.min(LARGEST_PHASE, turn));
  return (Math.max(0.5, 1 - k * k * sag) * inTime) / Math.cos(phase / 2);
}

export interface FilmPlan {
  branches: readonly Branch[];
  /** By row: what is added to the coefficients. */
  losses: ReadonlyMap<number, readonly FilmLoss[]>;
  /** Whether a film in TEz does not run along the mesh. */
  slanted: boolean;
}

/**
 * @param omega rad/s at which E's curve between two points is made good: the band's middle
 * @param plainRow the coefficients without films
 */
export function planFilms(
  lattice: Lattice,
  films: readonly Film[],
  omega: number,
  plainRow: (j: number, out: RowCoefficients) => void,
): FilmPlan {
  const { rows, columns, dt, polarization } = lattice;
  let slanted = false;
  const pieces = films.flatMap((film) =>
    segmentsOf(lattice, film).flatMap(([a, b]) => {
      if (polarization === "TMz") return onNodes(lattice, a, b, film.ohmsPerSquare);
      slanted ||= Math.abs(b[0] - a[0]) > ON_EDGE && Math.abs(b[1] - a[1]) > ON_EDGE;
      return onEdges(lattice, a, b, film.ohmsPerSquare);
    }),
  );
  const branches: Branch[] = [];
  const losses = new Map<number, FilmLoss[]>();
  const lose = ({ field, row, column }: BranchPoint, loss: number): void => {
    const list = losses.get(row) ?? [];
    losses.set(row, list);
    list.push({ field, column, loss });
  };
  const coefficients = rowCoefficients(lattice.stride);
  let read = -1;
  for (const piece of pieces.sort((p, q) => p.link.row - q.link.row)) {
    const points = piece.points.filter(
      ({ row, column, weight }) =>
        Math.abs(weight) > TINY && row >= 0 && row <= rows && column >= 0 && column <= columns,
    );
    if (points.length === 0) continue;
    const total = points.reduce((sum, { weight }) => sum + Math.abs(weight), 0);
    const row = Math.min(rows, Math.max(0, piece.link.row));
    if (row !== read) plainRow(row, coefficients);
    read = row;
    const inLayer = points.some((point) => isInLayer(lattice, point.field, point.row, point.column));
    const mu = storageAt(lattice, coefficients, piece.link, MU0);
    const epsilon = storageAt(lattice, coefficients, piece.host, EPS0);
    const resistance = piece.resistance * corrected(omega * Math.sqrt(mu * epsilon), (omega * dt) / 2, piece);
    const reactance = inLayer ? 0 : (2 * piece.inductancePerMu * mu) / dt;
    const conductance = 1 / (resistance + reactance);
    for (const point of points) lose(point, conductance * Math.abs(point.weight) * total);
    if (!inLayer && points.length > 1)
      branches.push({ points, conductance, decay: (reactance - resistance) * conductance });
  }
  return { branches, losses, slanted };
}
