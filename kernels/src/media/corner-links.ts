/**
 * Corners of metal, where the field goes as r^ν and no polynomial follows it: Ez as r^ν·sin(ν(φ − φ₀)) in TMz, Hz as a constant and
 * r^ν·cos(ν(φ − φ₀)) in TEz, ν = π over the field's angle. The plain lattice errs by cell^2ν there, with a factor that depends on where in
 * its cell the corner lies.
 *
 * The couplings of F's points near a corner are changed by the least that makes that very function a solution of the lattice: with
 * c the coupling (face over length) of each link, Σ c·(u − u') = 0 at every free point, min Σ (δc/c)². The couplings stay symmetric, so
 * energy is conserved; points whose couplings grow get more storage where they must. (The singular exponents: J. Meixner, IEEE Trans.
 * Antennas Propag. 20 (1972) 442, from memory; the rest is derived here.)
 */
import type { Lattice } from "../lattice/index.js";
import { cellOfColumn, cellOfRow } from "../lattice/index.js";
import { FIXED_F, FIXED_GX, FIXED_GY } from "./conductors.js";
import type { CutCells } from "./cut-cells.js";

/** A corner in metres, its field between the angles `from` and `from + opening`, straight out to `reach`. */
export interface FieldCorner {
  x: number;
  y: number;
  from: number;
  opening: number;
  reach: number;
}

/** A corner that asks for a coupling changed by less or more than these is left as it is; small ones stand at slivers of cells. */
const LEAST_FACTOR = 0.01;
const MOST_FACTOR = 3;

interface Link {
  /** The G between, the map that holds its factor, and its flag. */
  g: number;
  map: Map<number, number>;
  flag: number;
  /** What the plain lattice gives it: Δx/Δy for gx, Δy/Δx for gy. */
  plain: number;
}

/** Solves the symmetric positive definite system a·x = b in place (Cholesky); false where a is not positive. */
function solveSymmetric(a: Float64Array[], b: Float64Array): boolean {
  const n = b.length;
  for (let j = 0; j < n; j += 1) {
    for (let i = j; i < n; i += 1) {
      let sum = a[i][j];
      for (let k = 0; k < j; k += 1) sum -= a[i][k] * a[j][k];
      if (i === j) {
        if (!(sum > 0)) return false;
        a[j][j] = Math.sqrt(sum);
      } else a[i][j] = sum / a[j][j];
    }
  }
  for (let i = 0; i < n; i += 1) {
    for (let k = 0; k < i; k += 1) b[i] -= a[i][k] * b[k];
    b[i] /= a[i][i];
  }
  for (let i = n - 1; i >= 0; i -= 1) {
    for (let k = i + 1; k < n; k += 1) b[i] -= a[k][i] * b[k];
    b[i] /= a[i][i];
  }
  return true;
}

/** Changes the factors of the links about one corner; gives the free points of F whose couplings changed. */
function correctCorner(lattice: Lattice, corner: FieldCorner, cut: CutCells, flags: Uint8Array): number[] {
  const { stride, dx, dy } = lattice;
  const exponent = Math.PI / corner.opening;
  const column = (x: number): number => x / dx - cellOfColumn(lattice, 0);
  const row = (y: number): number => y / dy - cellOfRow(lattice, 0);
  const atMetalZero = lattice.polarization === "TMz";
  const singular = (k: number): number => {
    if (atMetalZero && flags[k] & FIXED_F) return 0;
    const x = (cellOfColumn(lattice, 0) + (k % stride)) * dx - corner.x;
    const y = (cellOfRow(lattice, 0) + Math.floor(k / stride)) * dy - corner.y;
    const phi = (Math.atan2(y, x) - corner.from + 4 * Math.PI) % (2 * Math.PI);
    const radial = Math.hypot(x, y) ** exponent;
    if (atMetalZero) return phi >= corner.opening ? 0 : radial * Math.sin(exponent * phi);
    // The centre of a cut cell may lie in metal, on the far side of either face.
    return radial * Math.cos(exponent * (phi > Math.PI + corner.opening / 2 ? phi - 2 * Math.PI : phi));
  };
  const nodes: number[] = [];
  const number = new Map<number, number>();
  for (let j = Math.ceil(row(corner.y - corner.reach)); j <= row(corner.y + corner.reach); j += 1) {
    for (let i = Math.ceil(column(corner.x - corner.reach)); i <= column(corner.x + corner.reach); i += 1) {
      const k = j * stride + i;
      const away = Math.hypot((i - column(corner.x)) * dx, (j - row(corner.y)) * dy);
      if (away > corner.reach || flags[k] & FIXED_F) continue;
      number.set(k, nodes.length);
      nodes.push(k);
    }
  }
  const allLinksOf = (k: number): { other: number; link: Link }[] => [
    { other: k - 1, link: { g: k - 1, map: cut.lengthGy, flag: FIXED_GY, plain: dy / dx } },
    { other: k + 1, link: { g: k, map: cut.lengthGy, flag: FIXED_GY, plain: dy / dx } },
    { other: k - stride, link: { g: k - stride, map: cut.lengthGx, flag: FIXED_GX, plain: dx / dy } },
    { other: k + stride, link: { g: k, map: cut.lengthGx, flag: FIXED_GX, plain: dx / dy } },
  ];
  const linksOf = (k: number): { other: number; link: Link }[] =>
    allLinksOf(k).filter(({ link }) => !(flags[link.g] & link.flag));
  const size = nodes.length;
  const matrix = Array.from({ length: size }, () => new Float64Array(size));
  const lacking = new Float64Array(size);
  /**
   * Links to free nodes farther away stay in TMz: what flows to them is right already, and the metal has to make up for it. In TEz nothing
   * flows into metal, and they take up what little is missing.
   */
  const isOutside = (other: number, within: number | undefined): boolean =>
    atMetalZero && within === undefined && !(flags[other] & FIXED_F);
  const scaled = (link: Link, difference: number): number =>
    link.plain * (link.map.get(link.g) ?? 1) * difference;
  nodes.forEach((k, n) => {
    for (const { other, link } of linksOf(k)) {
      // Relative changes are the unknowns: each enters the balances of its two ends with opposite signs.
      const flow = scaled(link, singular(k) - singular(other));
      lacking[n] -= flow;
      const m = number.get(other);
      if (isOutside(other, m)) continue;
      matrix[n][n] += flow * flow;
      if (m !== undefined) matrix[n][m] -= flow * flow;
    }
  });
  if (!solveSymmetric(matrix, lacking)) return [];
  const changes = new Map<Link, number>();
  const done = new Set<string>();
  nodes.forEach((k, n) => {
    for (const { other, link } of linksOf(k)) {
      const name = `${link.map === cut.lengthGx ? "x" : "y"}${String(link.g)}`;
      if (done.has(name)) continue;
      done.add(name);
      const m = number.get(other);
      if (isOutside(other, m)) continue;
      const flow = scaled(link, singular(k) - singular(other));
      changes.set(link, 1 + flow * (lacking[n] - (m === undefined ? 0 : lacking[m])));
    }
  });
  const factors = [...changes.values()];
  if (factors.some((factor) => !(factor > LEAST_FACTOR && factor < MOST_FACTOR))) return [];
  for (const [{ g, map }, factor] of changes) map.set(g, (map.get(g) ?? 1) * factor);
  return nodes;
}

/** Corrects the links about every corner, nearer things first served. Returns the free points of F whose couplings changed. */
export function correctCorners(
  lattice: Lattice,
  corners: readonly FieldCorner[],
  cut: CutCells,
  flags: Uint8Array,
): Set<number> {
  return new Set(corners.flatMap((corner) => correctCorner(lattice, corner, cut, flags)));
}
