/**
 * The mode of a guide on the lattice's own line.
 *
 * Along the guide let u count points of F inward, and let F = ψ_u·φ, g = s·b_G·φ·γ half a step before and after (g the in-plane
 * field whose difference of F runs along the guide, s its sign in the lattice). With aF = aG = 1 the lattice's step becomes
 *
 *   γ ← γ + δψ,   Θ ← Θ + ψ,   ψ ← ψ + r·δγ − λ·Θ,
 *
 * exactly where b_F·b_G = r at every point of the line and −∂(b∂φ) = (λ/b_F)·φ, a symmetric tridiagonal eigenproblem. Modes are
 * orthogonal with weight b_G, and ½Re ΣF·g* is the power (W/m). Where metal lies off the mesh lines, r and λ are the mode's
 * own means, whose error is that of the cells along the walls.
 */
import type { Lattice } from "../lattice/index.js";
import {
  cellOfColumn,
  cellOfRow,
  firstColumn,
  firstRow,
  sectionColumns,
  sectionRows,
} from "../lattice/index.js";
import type { CoefficientSource } from "../stepping/index.js";
import { rowCoefficients } from "../stepping/index.js";
import { tridiagonalPair } from "./tridiagonal.js";

export interface PortSpec {
  id: string;
  /** mm. */
  from: readonly [number, number];
  to: readonly [number, number];
  inward: "+x" | "-x" | "+y" | "-y";
  mode: number;
  shiftMm: number;
}

export interface LinePoint {
  row: number;
  column: number;
}

export interface PortMode {
  id: string;
  /** F's points on the line (u = 0), and those of g half a step behind it. */
  points: readonly LinePoint[];
  behind: readonly LinePoint[];
  field: "gx" | "gy";
  /** s: g = sign·b_G·φ·γ. */
  sign: 1 | -1;
  /** φ at each point, at most 1; positive next to `from`. */
  profile: Float64Array;
  /** b_G at each point. */
  weight: Float64Array;
  /** Σ b_G·φ². */
  norm: number;
  r: number;
  lambda: number;
  /** Metres between points along the guide. */
  cell: number;
  /** Steps of u from the line to the port's own place and to its reference plane. */
  planeCells: number;
  shiftCells: number;
  /** The sign of the transverse E of a wave inward whose ψ is positive, and of one outward. */
  inwardE: 1 | -1;
  outwardE: 1 | -1;
}

const ON_LINE = 1e-6;

/** The last point of F along the guide at or before the port, at least one within the section. */
function lineIndex(along: Along, direction: 1 | -1): number {
  const exact = along.position - along.origin;
  return direction > 0
    ? Math.max(along.first + 1, Math.floor(exact + ON_LINE))
    : Math.min(along.last - 1, Math.ceil(exact - ON_LINE));
}

/** One axis of F's points: point n at `origin` + n cells; the port's place on it in cells. */
interface Along {
  origin: number;
  first: number;
  last: number;
  position: number;
}

interface Across {
  /** b of F, of the transverse G beyond each point (toward higher indices) and before it, and of g behind the line. */
  bF: number;
  bAbove: number;
  bBelow: number;
  bG: number;
  index: number;
}

/** Coefficients across the guide, of the points one step behind the line and of g between. */
function across(
  lattice: Lattice,
  coefficients: CoefficientSource,
  horizontalGuide: boolean,
  index: number,
  direction: 1 | -1,
  [low, high]: readonly [number, number],
): Across[] {
  const here = rowCoefficients(lattice.stride);
  const before = rowCoefficients(lattice.stride);
  const guide = index - direction;
  const half = direction > 0 ? index - 1 : index;
  const found: Across[] = [];
  const take = (entry: Across): void => {
    if (entry.bF > 0 && entry.bG > 0) found.push(entry);
  };
  if (horizontalGuide) {
    coefficients(low - 1, before);
    let below = before.bGx[guide];
    for (let j = low; j <= high; j += 1) {
      coefficients(j, here);
      take({ bF: here.bF[guide], bAbove: here.bGx[guide], bBelow: below, bG: here.bGy[half], index: j });
      below = here.bGx[guide];
    }
  } else {
    coefficients(guide, here);
    coefficients(half, before);
    for (let i = low; i <= high; i += 1)
      take({
        bF: here.bF[i],
        bAbove: here.bGy[i],
        bBelow: here.bGy[i - 1],
        bG: before.bGx[i],
        index: i,
      });
  }
  return found;
}

/** Throws a RangeError where the line has too few points for the mode. */
export function portMode(lattice: Lattice, coefficients: CoefficientSource, port: PortSpec): PortMode {
  const onNodes = lattice.polarization === "TMz";
  const horizontalGuide = port.inward.endsWith("x");
  const direction = port.inward.startsWith("+") ? 1 : -1;
  const cells = [lattice.dx * 1000, lattice.dy * 1000] as const;
  const columns = {
    origin: cellOfColumn(lattice, 0),
    first: firstColumn(lattice),
    last: firstColumn(lattice) + sectionColumns(lattice) - 1,
  };
  const rows = {
    origin: cellOfRow(lattice, 0),
    first: firstRow(lattice),
    last: firstRow(lattice) + sectionRows(lattice) - 1,
  };
  const axis = horizontalGuide ? 0 : 1;
  const cross = horizontalGuide ? 1 : 0;
  const along = { ...(horizontalGuide ? columns : rows), position: port.from[axis] / cells[axis] };
  const index = lineIndex(along, direction);

  // Points whose cell reaches in between the walls (TEz), or which lie between them (TMz).
  const ends = [port.from[cross] / cells[cross], port.to[cross] / cells[cross]] as const;
  const crossing = horizontalGuide ? rows : columns;
  const reach = onNodes ? -ON_LINE : 0.5 - ON_LINE;
  const low = Math.max(crossing.first, Math.ceil(Math.min(...ends) - crossing.origin - reach));
  const high = Math.min(crossing.last, Math.floor(Math.max(...ends) - crossing.origin + reach));
  const line = across(lattice, coefficients, horizontalGuide, index, direction, [low, high]);
  const number = onNodes ? port.mode - 1 : port.mode;
  if (!(number >= 0 && number < line.length))
    throw new RangeError(
      `The port "${port.id}" has ${line.length} mesh points across its guide, too few for mode ${port.mode}.`,
    );

  // (1/b_F)^-½ · T · (1/b_F)^-½
  const scale = Float64Array.from(line, ({ bF }) => Math.sqrt(bF));
  const diagonal = Float64Array.from(line, ({ bAbove, bBelow }, n) => (bAbove + bBelow) * scale[n] ** 2);
  const beside = Float64Array.from({ length: line.length - 1 }, (_, n) => {
    return -line[n].bAbove * scale[n] * scale[n + 1];
  });
  const { vector } = tridiagonalPair(diagonal, beside, number);
  const raw = vector.map((value, n) => value * scale[n]);
  const upward = ends[1] > ends[0];
  const largest = raw.reduce((most, value) => Math.max(most, Math.abs(value)), 0);
  const first = upward ? raw[0] : raw[raw.length - 1];
  const profile = raw.map((value) => value / (first < 0 ? -largest : largest));

  let [storage, transverse, norm] = [0, 0, 0];
  line.forEach(({ bF, bAbove, bBelow, bG }, n) => {
    const value = profile[n];
    storage += value ** 2 / bF;
    norm += bG * value ** 2;
    if (n === 0) transverse += bBelow * value ** 2;
    transverse += bAbove * ((n + 1 < line.length ? profile[n + 1] : 0) - value) ** 2;
  });
  const place = (n: number, at: number): LinePoint =>
    horizontalGuide ? { row: line[n].index, column: at } : { row: at, column: line[n].index };
  const half = direction > 0 ? index - 1 : index;
  const facing = inwardFacing(port.inward, upward);
  return {
    id: port.id,
    points: line.map((_, n) => place(n, index)),
    behind: line.map((_, n) => place(n, half)),
    field: horizontalGuide ? "gy" : "gx",
    sign: (horizontalGuide ? direction : -direction) > 0 ? 1 : -1,
    profile,
    weight: Float64Array.from(line, ({ bG }) => bG),
    norm,
    r: norm / storage,
    lambda: transverse / storage,
    cell: cells[axis] / 1000,
    planeCells: direction * (along.position - along.origin - index),
    shiftCells: port.shiftMm / cells[axis],
    inwardE: onNodes ? 1 : facing,
    outwardE: onNodes ? 1 : facing > 0 ? -1 : 1,
  };
}

/** n·(t × z) for the direction n inward and t along the line: the sign of E along t of a wave along n with a positive Hz. */
function inwardFacing(inward: PortSpec["inward"], upward: boolean): 1 | -1 {
  const t = upward ? 1 : -1;
  const signs: Readonly<Record<PortSpec["inward"], number>> = { "+x": t, "-x": -t, "+y": -t, "-y": t };
  return signs[inward] > 0 ? 1 : -1;
}
