/**
 * Oblique interfaces: the inverse storage of a partial cell is a tensor, which couples the two components of G.
 *
 * Across an interface 1/κ adds up by length, along it κ does; with n its normal the mean inverse over a cell is
 * ⟨κ⟩⁻¹(1 − nnᵀ) + ⟨κ⁻¹⟩nnᵀ. Its diagonal gives b of gx and gy, each over its own cell; its xy over the cell about a corner of four
 * G's couples them:
 *
 *   gx[k], gx[k+1]  += q·(sum of the differences of F along gy[k], gy[k+S]),
 *   gy[k], gy[k+S]  −= q·(the same along gx[k], gx[k+1]),     q = ¼·Δt·(κ⁻¹)xy,
 *
 * symmetric, as energy asks for (G. R. Werner and J. R. Cary, J. Comput. Phys. 226 (2007) 1085; means by A. Farjadpour et al., Opt. Lett.
 * 31 (2006) 2972; both from memory). q is held below what keeps the stored energy of the four positive. It acts between lossless media
 * without poles, inside the section and off conductors; elsewhere means are taken along x and y alone.
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
import type { RowCoefficients } from "../stepping/index.js";
import type { PairKind, Quarter } from "./averaging.js";
import type { ConductorMap } from "./conductors.js";
import type { CutCells } from "./cut-cells.js";
import type { SolverMedium } from "./properties.js";
import type { QuarterRaster } from "./quarters.js";
import { updateOf } from "./update.js";

interface InverseTensor {
  xx: number;
  yy: number;
  xy: number;
}

/** Weight of a neighbourhood's corners, so that it is nearly round and the moment of a half of it points along its normal. */
const CORNER = 0.5;
/** Shares of a cell that sum up to less are partly conductor. */
const WHOLE = 1 - 1e-9;
/** Largest q over the one that would leave no energy. */
const MARGIN = 0.95;
/** Couplings weaker than this are left out: they would only make small numbers of fields that are none. */
const NEGLIGIBLE = 1e-3;
/** Rows and columns of quarters about a point, and those of its own cell among the sixteen. */
const AROUND = [-2, -1, 0, 1];
const OWN: readonly number[] = [5, 6, 9, 10];
const isCorner = (n: number): boolean => n === 0 || n === 3 || n === 12 || n === 15;

/** κ of a quarter by area; null where it is lossy, dispersive or partly conductor. */
function plainStorage({ shares }: Quarter, kind: PairKind): number | null {
  let whole = 0;
  let sum = 0;
  for (const { share, properties } of shares) {
    const [storage, loss] =
      kind === "electric" ? [properties.epsilon, properties.sigma] : [properties.mu, properties.sigmaStar];
    if (loss > 0 || (properties.poles && properties.poles[kind].length > 0)) return null;
    whole += share;
    sum += share * storage;
  }
  return whole >= WHOLE ? sum / whole : null;
}

/** Over the four quarters in the middle of 4 × 4, lower row first; null where they are no plain media, or all of one. */
function inverseTensor(quarters: readonly Quarter[], kind: PairKind, aspect: number): InverseTensor | null {
  const means: number[] = [];
  for (const quarter of quarters) {
    const mean = plainStorage(quarter, kind);
    if (mean === null) return null;
    means.push(mean);
  }
  let sum = 0;
  let inverses = 0;
  for (const n of OWN) {
    for (const { share, properties } of quarters[n].shares) {
      const storage = kind === "electric" ? properties.epsilon : properties.mu;
      sum += (share * storage) / 4;
      inverses += share / storage / 4;
    }
  }
  const along = 1 / sum;
  const weights = means.map((_, n) => (isCorner(n) ? CORNER : 1));
  const total = weights.reduce((all, weight) => all + weight, 0);
  const mean = means.reduce((all, value, n) => all + weights[n] * value, 0) / total;
  let x = 0;
  let y = 0;
  means.forEach((value, n) => {
    x += weights[n] * (value - mean) * ((n % 4) - 1.5);
    y += weights[n] * (value - mean) * (Math.floor(n / 4) - 1.5) * aspect;
  });
  const squared = x * x + y * y;
  if (!(squared > 0) || inverses - along < 1e-12 * along) return { xx: along, yy: along, xy: 0 };
  const excess = (inverses - along) / squared;
  return { xx: along + excess * x * x, yy: along + excess * y * y, xy: excess * x * y };
}

export class InterfaceCouplings {
  constructor(
    private readonly lattice: Lattice,
    private readonly quarters: QuarterRaster,
    private readonly kind: PairKind,
    private readonly conductors: ConductorMap,
    private readonly cuts: CutCells | null,
  ) {}

  /** Whether any two of the media differ in what they couple. */
  static between(media: readonly SolverMedium[], kind: PairKind): boolean {
    const storages = media.flatMap((medium) =>
      medium.kind === "fill" ? [kind === "electric" ? medium.properties.epsilon : medium.properties.mu] : [],
    );
    return new Set(storages).size > 1;
  }

  /** The tensor over the cell about (x, y), both in quarters from the section's lower left corner. */
  private tensorAt(x: number, y: number): InverseTensor | null {
    const { dx, dy } = this.lattice;
    const around = AROUND.flatMap((up) => {
      const row = this.quarters.row(y + up);
      return AROUND.map((right) => this.quarters.quarter(row, x + right));
    });
    return inverseTensor(around, this.kind, dy / dx);
  }

  private gx(i: number, j: number): InverseTensor | null {
    return this.tensorAt(2 * cellOfColumn(this.lattice, i), 2 * cellOfRow(this.lattice, j) + 1);
  }

  private gy(i: number, j: number): InverseTensor | null {
    return this.tensorAt(2 * cellOfColumn(this.lattice, i) + 1, 2 * cellOfRow(this.lattice, j));
  }

  /** Columns of F, or rows, between which corners lie: inside the section, off its walls and layers. */
  private range(first: number, count: number): [number, number] {
    return [first + 1, first + count - 3];
  }

  /** Whether the section's own media may differ within the quarters about (x, y): the quick look before the means. */
  private isMixed(x: number, y: number): boolean {
    const rows = [y - 2, y + 1].map((at) => this.quarters.row(at));
    const middle = this.quarters.row(y);
    const last = middle.medium.length - 1;
    const [from, to] = [Math.max(0, Math.min(last, x - 2)), Math.max(0, Math.min(last, x + 1))];
    const medium = middle.medium[from];
    if (medium < 0) return true;
    return [...rows, middle, this.quarters.row(y - 1)].some(
      (row) => row.medium[from] !== medium || (row.runEnd[from] <= to && from < to),
    );
  }

  /** Replaces b of the row's G's at interfaces and gives its couplings. */
  write(j: number, dt: number, geometryGx: number, geometryGy: number, out: RowCoefficients): void {
    const { lattice } = this;
    const [firstI, lastI] = this.range(firstColumn(lattice), sectionColumns(lattice));
    const [firstJ, lastJ] = this.range(firstRow(lattice), sectionRows(lattice));
    if (j < firstJ || j > lastJ + 1) return;
    const y = 2 * cellOfRow(lattice, j);
    for (let i = firstI; i <= lastI + 1; i += 1) {
      const x = 2 * cellOfColumn(lattice, i);
      if (!this.isMixed(x, y) && !this.isMixed(x + 1, y + 1)) continue;
      const [across, up] = [this.gx(i, j), this.gy(i, j)];
      if (across && j <= lastJ && this.isFree("lengthGx", i, j))
        out.bGx[i] = updateOf({ storage: 1 / across.xx, loss: 0 }, dt, geometryGx).b;
      if (up && i <= lastI && this.isFree("lengthGy", i, j))
        out.bGy[i] = updateOf({ storage: 1 / up.yy, loss: 0 }, dt, geometryGy).b;
      if (i > lastI || j > lastJ) continue;
      const corner = this.tensorAt(x + 1, y + 1);
      if (!corner || !across || !up) continue;
      if (Math.abs(corner.xy) < NEGLIGIBLE * Math.sqrt(corner.xx * corner.yy)) continue;
      const [right, above] = [this.gx(i + 1, j), this.gy(i, j + 1)];
      const free =
        this.isFree("lengthGx", i, j) &&
        this.isFree("lengthGx", i + 1, j) &&
        this.isFree("lengthGy", i, j) &&
        this.isFree("lengthGy", i, j + 1);
      if (!right || !above || !free) continue;
      const most = (2 * MARGIN) / Math.sqrt((1 / across.xx + 1 / right.xx) * (1 / up.yy + 1 / above.yy));
      const xy = Math.max(-most, Math.min(most, corner.xy));
      out.couplings.push({ column: i, factor: (dt * xy) / 4 });
    }
  }

  /** Whether no conductor touches the ends of a G. */
  private isFree(field: "lengthGx" | "lengthGy", i: number, j: number): boolean {
    const { stride } = this.lattice;
    const k = j * stride + i;
    const other = field === "lengthGx" ? k + stride : k + 1;
    if (this.conductors.flags[k] || this.conductors.flags[other]) return false;
    return !this.cuts?.[field].has(k) && !this.cuts?.storage.has(k) && !this.cuts?.storage.has(other);
  }
}
