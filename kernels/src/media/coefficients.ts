/**
 * The update coefficients of a painted section, row by row: media with their partial cells, perfect conductors, and the
 * section's electric and magnetic walls, which are coefficients too:
 *
 *   - a wall through F's points fixes F (electric in TMz), or cuts its cell, its gx or its gy in half (magnetic in TMz);
 *   - a wall through G's points fixes G (electric in TEz), or has half a cell of storage behind it (magnetic in TEz),
 *     with the ring's F = 0 as the mean over the wall.
 *
 * Behind the absorbing layers stands an electric wall.
 */
import type { Lattice, Side } from "../lattice/index.js";
import { cellOfColumn, cellOfRow, columnShare, rowShare } from "../lattice/index.js";
import type { RowCoefficients } from "../stepping/index.js";
import type { PairKind, Quarter } from "./averaging.js";
import { arithmeticMean, inPlaneMean } from "./averaging.js";
import type { ConductorInput, LatticeBox } from "./conductors.js";
import { ConductorMap, FIXED_F, FIXED_GX, FIXED_GY } from "./conductors.js";
import { conformalCuts } from "./conformal.js";
import type { CutCells } from "./cut-cells.js";
import type { CutsBefore } from "./open-faces.js";
import type { Pair, Properties, SolverMedium } from "./properties.js";
import type { QuarterRow } from "./quarters.js";
import { QuarterRaster } from "./quarters.js";
import { scaledStorage, updateOf } from "./update.js";

export interface SectionMedia extends Omit<ConductorInput, "kinds"> {
  media: readonly SolverMedium[];
  /** rad/s at which means along a field are exact: the band's middle. */
  omega: number;
  /** How electric conductors are cut; default "staircase". Magnetic ones are always staircases. */
  metal?: "conformal" | "staircase";
}

interface MediumUpdates {
  fill: boolean;
  aF: number;
  bF: number;
  aG: number;
  bGx: number;
  bGy: number;
}

/** The section before an edit that changed nothing outside `box`. */
export interface SectionBefore {
  coefficients: SectionCoefficients;
  box: LatticeBox;
}

export class SectionCoefficients {
  private readonly quarters: QuarterRaster;
  private readonly conductors: ConductorMap;
  private readonly cuts: CutCells | null;
  private readonly updates: readonly MediumUpdates[];
  private readonly kindF: PairKind;
  private readonly kindG: PairKind;
  private readonly geometryF: number;
  private readonly geometryGx: number;
  private readonly geometryGy: number;

  private readonly columnShares: Float64Array;
  private readonly hasShares: boolean;

  constructor(
    private readonly lattice: Lattice,
    private readonly section: SectionMedia,
    previous?: SectionBefore,
  ) {
    const { dx, dy, nx, ny, polarization } = lattice;
    const { areas, background, media, widthMm, heightMm } = section;
    this.kindF = polarization === "TMz" ? "electric" : "magnetic";
    this.kindG = polarization === "TMz" ? "magnetic" : "electric";
    this.geometryF = 1 / (dx * dy);
    this.geometryGx = dx / dy;
    this.geometryGy = dy / dx;
    this.quarters = new QuarterRaster(areas, background, media, { widthMm, heightMm, nx, ny });
    const conformal = section.metal === "conformal";
    const kinds = media.map(({ kind }) =>
      kind === "fill" || (conformal && kind === "electric") ? "none" : kind === this.kindF ? "f" : "g",
    );
    this.conductors = new ConductorMap(
      lattice,
      { ...section, kinds, walls: conformal ? [] : section.walls },
      conformal ? undefined : previous && { map: previous.coefficients.conductors, box: previous.box },
    );
    this.cuts = conformal
      ? conformalCuts(lattice, section, this.conductors, previous?.coefficients.cutsBefore(previous.box))
      : null;
    this.columnShares = Float64Array.from({ length: lattice.columns + 2 }, (_, i) => columnShare(lattice, i));
    this.hasShares = this.columnShares.some((share) => share !== 1);
    this.updates = media.map((medium) =>
      medium.kind === "fill"
        ? this.updatesOf(medium.properties)
        : { fill: false, aF: 0, bF: 0, aG: 0, bGx: 0, bGy: 0 },
    );
  }

  /** What of its cuts an edit may keep; undefined where it had none. */
  cutsBefore(box: LatticeBox): CutsBefore | undefined {
    const { cuts, conductors } = this;
    return cuts ? { cuts, flags: conductors.flags, firstRow: box.firstRow, lastRow: box.lastRow } : undefined;
  }

  private updatesOf(properties: Properties): MediumUpdates {
    const { dt } = this.lattice;
    const pair = (kind: PairKind): Pair =>
      kind === "electric"
        ? { storage: properties.epsilon, loss: properties.sigma }
        : { storage: properties.mu, loss: properties.sigmaStar };
    const f = updateOf(pair(this.kindF), dt, this.geometryF);
    const gx = updateOf(pair(this.kindG), dt, this.geometryGx);
    const gy = updateOf(pair(this.kindG), dt, this.geometryGy);
    return { fill: true, aF: f.a, bF: f.b, aG: gx.a, bGx: gx.b, bGy: gy.b };
  }

  /** Writes row j, 0 … rows + 1. */
  readonly row = (j: number, out: RowCoefficients): void => {
    for (const values of [out.aF, out.bF, out.aGx, out.bGx, out.aGy, out.bGy]) values.fill(0);
    const { rows } = this.lattice;
    if (j > rows) return;
    const y = 2 * cellOfRow(this.lattice, j);
    const below = this.quarters.row(y - 1);
    const here = this.quarters.row(y);
    const above = this.quarters.row(y + 1);
    if (j >= 1) {
      this.writeF(below, here, out);
      this.writeGy(below, here, out);
    }
    if (this.hasGx(j)) this.writeGx(here, above, out);
    this.applyWalls(j, out);
    this.applyCuts(j, out);
    this.applyConductors(j, out);
  };

  /** gx exists between rows of F, and in TEz on the walls below and above them. */
  private hasGx(j: number): boolean {
    return this.lattice.polarization === "TEz" || (j >= 1 && j < this.lattice.rows);
  }

  private writeF(below: QuarterRow, here: QuarterRow, out: RowCoefficients): void {
    const { lattice } = this;
    const single = (i: number, x: number): void => {
      const mean = arithmeticMean(this.four(below, here, x), this.kindF);
      if (!mean) return;
      const update = updateOf(mean, lattice.dt, this.geometryF);
      out.aF[i] = update.a;
      out.bF[i] = update.b;
    };
    this.walkRuns(below, here, 1, lattice.columns, -1, single, (medium, from, to) => {
      out.aF.fill(medium.aF, from, to);
      out.bF.fill(medium.bF, from, to);
    });
  }

  private writeGx(here: QuarterRow, above: QuarterRow, out: RowCoefficients): void {
    const { lattice } = this;
    const single = (i: number, x: number): void => {
      const [q00, q01, q10, q11] = this.four(here, above, x);
      const lanes = [
        [q00, q01],
        [q10, q11],
      ] as const;
      const mean = inPlaneMean(lanes, this.kindG, this.section.omega);
      if (!mean) return;
      const update = updateOf(mean, lattice.dt, this.geometryGx);
      out.aGx[i] = update.a;
      out.bGx[i] = update.b;
    };
    this.walkRuns(here, above, 1, lattice.columns, -1, single, (medium, from, to) => {
      out.aGx.fill(medium.aG, from, to);
      out.bGx.fill(medium.bGx, from, to);
    });
  }

  private writeGy(below: QuarterRow, here: QuarterRow, out: RowCoefficients): void {
    const { lattice } = this;
    const onNodes = lattice.polarization === "TMz";
    const single = (i: number, x: number): void => {
      const [q00, q01, q10, q11] = this.four(below, here, x);
      const lanes = [
        [q00, q10],
        [q01, q11],
      ] as const;
      const mean = inPlaneMean(lanes, this.kindG, this.section.omega);
      if (!mean) return;
      const update = updateOf(mean, lattice.dt, this.geometryGy);
      out.aGy[i] = update.a;
      out.bGy[i] = update.b;
    };
    const last = onNodes ? lattice.columns - 1 : lattice.columns;
    this.walkRuns(below, here, onNodes ? 1 : 0, last, 0, single, (medium, from, to) => {
      out.aGy.fill(medium.aG, from, to);
      out.bGy.fill(medium.bGy, from, to);
    });
  }

  /**
   * Walks the points of a row from column `first` to `last`, whose left quarter is 2·(position) + `shift`: points whose four quarters are
   * of one medium in runs [from, to), the others singly.
   */
  private walkRuns(
    lower: QuarterRow,
    upper: QuarterRow,
    first: number,
    last: number,
    shift: number,
    single: (i: number, left: number) => void,
    run: (medium: MediumUpdates, from: number, to: number) => void,
  ): void {
    const end = this.quarters.columns;
    const origin = 2 * cellOfColumn(this.lattice, 0) + shift;
    let i = first;
    while (i <= last) {
      const left = origin + 2 * i;
      // Quarters outside the section repeat the outermost ones.
      const l = Math.min(end - 1, Math.max(0, left));
      const medium = lower.medium[l];
      const runEnd = Math.min(lower.runEnd[l], upper.runEnd[l]);
      const reach = runEnd === end ? Number.POSITIVE_INFINITY : runEnd;
      if (medium < 0 || upper.medium[l] !== medium || left + 1 >= reach) {
        single(i, left);
        i += 1;
        continue;
      }
      const count = Math.min(last + 1 - i, Math.floor((reach - left) / 2));
      run(this.updates[medium], i, i + count);
      i += count;
    }
  }

  private four(lower: QuarterRow, upper: QuarterRow, left: number): [Quarter, Quarter, Quarter, Quarter] {
    const { quarters } = this;
    return [
      quarters.quarter(lower, left),
      quarters.quarter(lower, left + 1),
      quarters.quarter(upper, left),
      quarters.quarter(upper, left + 1),
    ];
  }

  private applyWalls(j: number, out: RowCoefficients): void {
    const { lattice } = this;
    const { columns, rows, edges } = lattice;
    const isMagnetic = (side: Side): boolean => edges[side] === "magnetic";
    const fix = (values: readonly Float64Array[], i: number): void => {
      for (const array of values) array[i] = 0;
    };
    if (lattice.polarization === "TMz") {
      if (!isMagnetic("left")) fix([out.aF, out.bF], 1);
      if (!isMagnetic("right")) fix([out.aF, out.bF], columns);
      const wholeRowFixed = (j === 1 && !isMagnetic("bottom")) || (j === rows && !isMagnetic("top"));
      if (wholeRowFixed) for (const values of [out.aF, out.bF]) values.fill(0);
      const vertical = rowShare(lattice, j);
      if (vertical === 1 && !this.hasShares) return;
      for (let i = 1; i <= columns; i += 1) {
        const horizontal = this.columnShares[i];
        out.bF[i] /= horizontal * vertical;
        out.bGx[i] *= horizontal;
        out.bGy[i] *= vertical;
      }
      return;
    }
    const side = (magnetic: boolean, a: Float64Array, b: Float64Array, i: number): void => {
      if (magnetic) b[i] *= 2;
      else fix([a, b], i);
    };
    side(isMagnetic("left"), out.aGy, out.bGy, 0);
    side(isMagnetic("right"), out.aGy, out.bGy, columns);
    if (j === 0 || j === rows) {
      const magnetic = isMagnetic(j === 0 ? "bottom" : "top");
      for (let i = 1; i <= columns; i += 1) side(magnetic, out.aGx, out.bGx, i);
    }
  }

  /** Lengths and storages of what conformal metal cuts. */
  private applyCuts(j: number, out: RowCoefficients): void {
    const { cuts, conductors } = this;
    if (!cuts || conductors.touched[j] === 0) return;
    const base = j * this.lattice.stride;
    for (let i = 0; i <= this.lattice.columns; i += 1) {
      const k = base + i;
      out.bGx[i] *= cuts.lengthGx.get(k) ?? 1;
      out.bGy[i] *= cuts.lengthGy.get(k) ?? 1;
      const storage = cuts.storage.get(k);
      if (storage === undefined || out.bF[i] === 0) continue;
      const update = scaledStorage({ a: out.aF[i], b: out.bF[i] }, storage, cuts.scalesLoss);
      out.aF[i] = update.a;
      out.bF[i] = update.b;
    }
  }

  private applyConductors(j: number, out: RowCoefficients): void {
    const { stride, columns } = this.lattice;
    const { flags, touched } = this.conductors;
    if (touched[j] === 0) return;
    const base = j * stride;
    for (let i = 0; i <= columns; i += 1) {
      const k = base + i;
      const own = flags[k];
      // Between fixed points of F (or inside fixed G) nothing can change: no field is left frozen there.
      const fBoth = own & FIXED_F;
      const fixGx = own & FIXED_GX || (fBoth && flags[k + stride] & FIXED_F);
      const fixGy = own & FIXED_GY || (fBoth && flags[k + 1] & FIXED_F);
      const enclosed =
        own & FIXED_GX &&
        own & FIXED_GY &&
        k > stride &&
        flags[k - 1] & FIXED_GY &&
        flags[k - stride] & FIXED_GX;
      if (own & FIXED_F || enclosed) {
        out.aF[i] = 0;
        out.bF[i] = 0;
      }
      if (fixGx) {
        out.aGx[i] = 0;
        out.bGx[i] = 0;
      }
      if (fixGy) {
        out.aGy[i] = 0;
        out.bGy[i] = 0;
      }
    }
  }
}
