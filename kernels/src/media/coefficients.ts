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
import type { Branch, EngineField, RowCoefficients } from "../stepping/index.js";
import type { PairKind, Quarter } from "./averaging.js";
import { arithmeticMean, inPlaneMean } from "./averaging.js";
import type { ConductorInput, LatticeBox } from "./conductors.js";
import { ConductorMap } from "./conductors.js";
import { fixConductors } from "./fix-conductors.js";
import { conformalCuts } from "./conformal.js";
import type { FieldCorner } from "./corner-links.js";
import { InterfaceCouplings } from "./couplings.js";
import type { CutCells } from "./cut-cells.js";
import type { PointMean, WeightedPole } from "./dispersion.js";
import { DispersiveMeans } from "./dispersion.js";
import type { Film, FilmPlan } from "./films.js";
import { planFilms } from "./films.js";
import type { CutsBefore } from "./open-faces.js";
import type { Properties, SolverMedium } from "./properties.js";
import type { QuarterRow } from "./quarters.js";
import { QuarterRaster } from "./quarters.js";
import { RowTerms } from "./row-terms.js";
import { layerZones, walkRuns } from "./row-runs.js";
import { addedLoss, scaledStorage, updateOf } from "./update.js";

export interface SectionMedia extends Omit<ConductorInput, "kinds"> {
  media: readonly SolverMedium[];
  /** rad/s at which means along a field are exact: the band's middle. */
  omega: number;
  /** Default: none. */
  films?: readonly Film[];
  /** How electric conductors are cut; default "staircase". Magnetic ones are always staircases. */
  metal?: "conformal" | "staircase";
  /** Corners of conformal metal, whose singular field the lattice is to follow; default none. */
  corners?: readonly FieldCorner[];
}

interface MediumUpdates {
  aF: number;
  bF: number;
  aG: number;
  bGx: number;
  bGy: number;
  polesF: readonly WeightedPole[];
  polesG: readonly WeightedPole[];
}

/** The section before an edit that changed nothing outside `box`. */
export interface SectionBefore {
  coefficients: SectionCoefficients;
  box: LatticeBox;
}

const NOTHING: MediumUpdates = { aF: 0, bF: 0, aG: 0, bGx: 0, bGy: 0, polesF: [], polesG: [] };

export class SectionCoefficients {
  private readonly quarters: QuarterRaster;
  private readonly conductors: ConductorMap;
  private readonly cuts: CutCells | null;
  /** Null where all media agree in what G stores. */
  private readonly couplings: InterfaceCouplings | null;
  private readonly means: DispersiveMeans;
  private readonly updates: readonly MediumUpdates[];
  /** Those of the absorbing layers. */
  private readonly layerUpdates: readonly MediumUpdates[];
  private readonly films: FilmPlan;
  private terms: RowTerms;
  private frozen = false;
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
    this.couplings = InterfaceCouplings.between(media, this.kindG)
      ? new InterfaceCouplings(lattice, this.quarters, this.kindG, this.conductors, this.cuts)
      : null;
    this.columnShares = Float64Array.from({ length: lattice.columns + 2 }, (_, i) => columnShare(lattice, i));
    this.hasShares = this.columnShares.some((share) => share !== 1);
    this.means = new DispersiveMeans(
      media.flatMap((medium) => (medium.kind === "fill" ? [medium.properties] : [])),
      lattice.dt,
      section.omega,
    );
    const updates = (inLayer: boolean): MediumUpdates[] =>
      media.map((medium) => (medium.kind === "fill" ? this.updatesOf(medium.properties, inLayer) : NOTHING));
    this.updates = updates(false);
    this.layerUpdates = this.means.any ? updates(true) : this.updates;
    this.terms = new RowTerms(lattice.stride);
    this.films = planFilms(lattice, section.films ?? [], section.omega, (j, out) => this.writeRow(j, out));
  }

  /** The films, in an engine's form; their losses are among the coefficients. */
  get branches(): readonly Branch[] {
    return this.films.branches;
  }

  /** Whether a film in TEz does not run along the mesh, and is so much the less exact. */
  get slantsFilms(): boolean {
    return this.films.slanted;
  }

  /** What of its cuts an edit may keep; undefined where it had none. */
  cutsBefore(box: LatticeBox): CutsBefore | undefined {
    const { cuts, conductors } = this;
    return cuts ? { cuts, flags: conductors.flags, firstRow: box.firstRow, lastRow: box.lastRow } : undefined;
  }

  /** Whether a row that was written has a dispersive medium in an absorbing layer, where it has its ε and σ of the band's middle. */
  get freezesPoles(): boolean {
    return this.frozen;
  }

  private updatesOf(properties: Properties, inLayer: boolean): MediumUpdates {
    const { dt } = this.lattice;
    const quarters: Quarter[] = [{ shares: [{ share: 1, properties }] }];
    const of = (kind: PairKind): PointMean =>
      this.means.of(quarters, kind, inLayer, (q) => arithmeticMean(q, kind)) ?? {
        pair: { storage: 1, loss: 0 },
        poles: [],
      };
    const [f, g] = [of(this.kindF), of(this.kindG)];
    const own = updateOf(f.pair, dt, this.geometryF);
    const gx = updateOf(g.pair, dt, this.geometryGx);
    const gy = updateOf(g.pair, dt, this.geometryGy);
    return {
      ...{ aF: own.a, bF: own.b, aG: gx.a, bGx: gx.b, bGy: gy.b },
      ...{ polesF: f.poles, polesG: g.poles },
    };
  }

  /** Writes row j, 0 … rows + 1. */
  readonly row = (j: number, out: RowCoefficients): void => {
    this.writeRow(j, out);
    for (const { field, column, loss } of this.films.losses.get(j) ?? []) {
      const { a, b } = this.arraysOf(field, out);
      if (b[column] === 0) continue;
      const update = addedLoss({ a: a[column], b: b[column] }, loss);
      this.terms.scale(field, column, update.b / b[column]);
      a[column] = update.a;
      b[column] = update.b;
    }
    // A film's loss at one of four coupled G's would not be symmetric any more.
    if (this.films.losses.has(j) || this.films.losses.has(j + 1)) out.couplings = [];
    out.terms = this.terms.finish(out);
  };

  /** The row without films; its terms wait in `terms`. */
  private writeRow(j: number, out: RowCoefficients): void {
    for (const values of [out.aF, out.bF, out.aGx, out.bGx, out.aGy, out.bGy]) values.fill(0);
    out.couplings = [];
    const { rows } = this.lattice;
    this.terms = new RowTerms(this.lattice.stride);
    if (j > rows) return;
    const y = 2 * cellOfRow(this.lattice, j);
    const below = this.quarters.row(y - 1);
    const here = this.quarters.row(y);
    const above = this.quarters.row(y + 1);
    const { columns, polarization } = this.lattice;
    const onNodes = polarization === "TMz";
    if (j >= 1) {
      this.writeField("f", j, below, here, 1, columns, out);
      this.writeField("gy", j, below, here, onNodes ? 1 : 0, onNodes ? columns - 1 : columns, out);
    }
    if (this.hasGx(j)) this.writeField("gx", j, here, above, 1, columns, out);
    const { dt } = this.lattice;
    this.couplings?.write(j, dt, this.geometryGx, this.geometryGy, out);
    this.applyWalls(j, out);
    this.applyCuts(j, out);
    fixConductors(this.lattice, this.conductors, j, out);
  }

  /** gx exists between rows of F, and in TEz on the walls below and above them. */
  private hasGx(j: number): boolean {
    return this.lattice.polarization === "TEz" || (j >= 1 && j < this.lattice.rows);
  }

  /** The update of a single point; its poles go among the row's terms. */
  private single(
    field: EngineField,
    i: number,
    quarters: readonly Quarter[],
    inLayer: boolean,
    out: RowCoefficients,
  ): void {
    const kind = field === "f" ? this.kindF : this.kindG;
    const mean = this.means.of(quarters, kind, inLayer, (four) => {
      if (field === "f") return arithmeticMean(four, kind);
      const [q00, q01, q10, q11] = four;
      const lanes =
        field === "gx"
          ? ([
              [q00, q01],
              [q10, q11],
            ] as const)
          : ([
              [q00, q10],
              [q01, q11],
            ] as const);
      return inPlaneMean(lanes, kind, this.section.omega);
    });
    if (!mean) return;
    const { a, b, geometry } = this.arraysOf(field, out);
    const update = updateOf(mean.pair, this.lattice.dt, geometry);
    a[i] = update.a;
    b[i] = update.b;
    this.terms.fill(field, mean.poles, i, i + 1);
  }

  private arraysOf(
    field: EngineField,
    out: RowCoefficients,
  ): { a: Float64Array; b: Float64Array; geometry: number } {
    if (field === "f") return { a: out.aF, b: out.bF, geometry: this.geometryF };
    return field === "gx"
      ? { a: out.aGx, b: out.bGx, geometry: this.geometryGx }
      : { a: out.aGy, b: out.bGy, geometry: this.geometryGy };
  }

  /**
   * Writes one field's points of a row, columns `first` to `last`, points whose four quarters are of one medium in runs, the others
   * singly.
   */
  private writeField(
    field: EngineField,
    j: number,
    lower: QuarterRow,
    upper: QuarterRow,
    first: number,
    last: number,
    out: RowCoefficients,
  ): void {
    const { a, b } = this.arraysOf(field, out);
    const origin = 2 * cellOfColumn(this.lattice, 0) + (field === "gy" ? 0 : -1);
    const zones = this.means.any
      ? layerZones(this.lattice, field, j, first, last)
      : [[first, last, false] as const];
    for (const [from, to, inLayer] of zones) {
      const single = (i: number, left: number): void =>
        this.single(field, i, this.four(lower, upper, left), inLayer, out);
      walkRuns(lower, upper, from, to, origin, single, (medium, start, end) => {
        const updates = (inLayer ? this.layerUpdates : this.updates)[medium];
        a.fill(field === "f" ? updates.aF : updates.aG, start, end);
        b.fill(field === "f" ? updates.bF : field === "gx" ? updates.bGx : updates.bGy, start, end);
        const poles = field === "f" ? updates.polesF : updates.polesG;
        if (poles.length > 0) this.terms.fill(field, poles, start, end);
        if (inLayer && this.updates[medium].polesF.length + this.updates[medium].polesG.length > 0) {
          this.frozen = true;
        }
      });
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
      if (!cuts.scalesLoss) this.terms.scale("f", i, update.b / out.bF[i]);
      out.aF[i] = update.a;
      out.bF[i] = update.b;
    }
  }
}
