/**
 * Perfect conductors on the lattice as a staircase.
 *
 * A conductor that forces F to zero (electric in TMz, magnetic in TEz) does so at every point of F from which it is reached
 * within half a cell along a mesh line: each place where its surface crosses a mesh line is rounded to the nearest point. A
 * conductor that forces G to zero (magnetic in TMz, electric in TEz) does so at every G whose line between two points
 * of F it touches: the cells around F's points are metal or free by their centres. So surfaces are off by half a cell at most
 * and by nothing on average, surfaces on mesh lines are exact, and no sheet is so thin that it vanishes or leaks.
 * A `wall` is the same with its line for a surface.
 */
import type { Interval, PaintedArea, Point, Raster } from "../geometry/index.js";
import { LineCutter } from "../geometry/index.js";
import type { Lattice } from "../lattice/index.js";
import { cellOfColumn, cellOfRow } from "../lattice/index.js";

export const FIXED_F = 1;
export const FIXED_GX = 2;
export const FIXED_GY = 4;

export type ConductorKind = "none" | "f" | "g";

/** Rounding noise at the ends of intervals, in cells; ties go to the upper point. */
const TIE = 1e-6;
/** Lines of F's points are probed this much to either side, so that surfaces on them count. */
const SIDE_STEP = 1e-5;
/**
 * Walls are moved by this much (in cells): one that ran exactly through a point of F would leave open to which side the point belongs,
 * and let the field through there.
 */
const WALL_SHIFT = [1.3e-6, 2.1e-6] as const;
/** How near an end of a wall (in cells) must be to an edge of the section to lie on it. */
const ON_EDGE = 1e-5;

interface Line {
  /** Columns (or rows) of F along the line, and the position of number i in cells. */
  count: number;
  position: (i: number) => number;
  cells: number;
  /** Conductors at the near and far end of the section go on outward. */
  openLow: boolean;
  openHigh: boolean;
}

export interface ConductorInput {
  areas: readonly PaintedArea[];
  background: number;
  /** By medium index. */
  kinds: readonly ConductorKind[];
  /** Thin electric walls, points in mm. */
  walls: readonly (readonly Point[])[];
  widthMm: number;
  heightMm: number;
}

/** Rows and columns of F, inclusive. */
export interface LatticeBox {
  firstColumn: number;
  lastColumn: number;
  firstRow: number;
  lastRow: number;
}

export const wholeLattice = (lattice: Lattice): LatticeBox => ({
  firstColumn: 0,
  lastColumn: lattice.columns + 1,
  firstRow: 0,
  lastRow: lattice.rows + 1,
});

/** Flags of the whole lattice, by array index: which of F, gx, gy stay zero on conductors. */
export class ConductorMap {
  readonly flags: Uint8Array;
  /** By row: whether any flag stands in it. */
  readonly touched: Uint8Array;
  private readonly wallFixesF: boolean;
  private readonly box: LatticeBox;

  /** @param previous the map of the section before an edit that changed nothing outside `box` */
  constructor(
    private readonly lattice: Lattice,
    private readonly input: ConductorInput,
    previous?: { map: ConductorMap; box: LatticeBox },
  ) {
    this.box = previous?.box ?? wholeLattice(lattice);
    this.flags = previous ? previous.map.flags.slice() : new Uint8Array(lattice.size);
    this.touched = new Uint8Array(lattice.rows + 2);
    if (previous) this.clearBox();
    this.wallFixesF = lattice.polarization === "TMz";
    if (input.kinds.some((kind) => kind !== "none")) {
      this.cutAlong("x");
      this.cutAlong("y");
    }
    for (const wall of input.walls) this.drawWall(wall);
    this.markTouched();
  }

  /** To be called after flags were raised from outside. */
  markTouched(rowsBesides: Iterable<number> = []): void {
    const { stride } = this.lattice;
    for (let j = 0; j < this.touched.length; j += 1) {
      const row = this.flags.subarray(j * stride, (j + 1) * stride);
      this.touched[j] = row.some((flag) => flag !== 0) ? 1 : 0;
    }
    for (const j of rowsBesides) this.touched[j] = 1;
  }

  private clearBox(): void {
    const { firstColumn, lastColumn, firstRow, lastRow } = this.box;
    for (let j = firstRow; j <= lastRow; j += 1) {
      const base = j * this.lattice.stride;
      this.flags.fill(0, base + firstColumn, base + lastColumn + 1);
    }
  }

  private flag(row: number, column: number, flag: number): void {
    const { firstColumn, lastColumn, firstRow, lastRow } = this.box;
    if (row < firstRow || row > lastRow || column < firstColumn || column > lastColumn) return;
    this.flags[row * this.lattice.stride + column] |= flag;
  }

  private lineOf(axis: "x" | "y"): Line {
    const { lattice } = this;
    const { edges } = lattice;
    return axis === "x"
      ? {
          count: lattice.columns,
          position: (i) => cellOfColumn(lattice, i),
          cells: lattice.nx,
          openLow: edges.left === "absorbing",
          openHigh: edges.right === "absorbing",
        }
      : {
          count: lattice.rows,
          position: (j) => cellOfRow(lattice, j),
          cells: lattice.ny,
          openLow: edges.bottom === "absorbing",
          openHigh: edges.top === "absorbing",
        };
  }

  private cutAlong(axis: "x" | "y"): void {
    const { lattice, input } = this;
    const raster: Raster = {
      widthMm: input.widthMm,
      heightMm: input.heightMm,
      columns: lattice.nx,
      rows: lattice.ny,
    };
    const cutter = new LineCutter(input.areas, input.background, raster, axis);
    const along = this.lineOf(axis);
    const across = this.lineOf(axis === "x" ? "y" : "x");
    const highest = across.cells - SIDE_STEP;
    const { box } = this;
    const lowest = Math.max(1, axis === "x" ? box.firstRow : box.firstColumn);
    const last = Math.min(across.count, axis === "x" ? box.lastRow : box.lastColumn);
    for (let n = lowest; n <= last; n += 1) {
      const position = Math.min(highest, Math.max(SIDE_STEP, across.position(n)));
      for (const side of this.sidesOf(position, across.cells)) {
        for (const interval of cutter.cut(side)) this.fix(axis, n, interval, along);
      }
    }
  }

  /** A line of nodes is probed on both sides: a surface that runs along it belongs to the conductor. */
  private sidesOf(position: number, cells: number): number[] {
    if (this.lattice.polarization !== "TMz") return [position];
    return [Math.max(SIDE_STEP, position - SIDE_STEP), Math.min(cells - SIDE_STEP, position + SIDE_STEP)];
  }

  private fix(axis: "x" | "y", n: number, interval: Interval, along: Line): void {
    const kind = this.input.kinds[interval.medium];
    if (kind === "none") return;
    // Paint ends at the section, unless it touches an absorbing edge: then it goes on behind it.
    let { from, to } = interval;
    if (to <= TIE || from >= along.cells - TIE) return;
    from = from <= TIE ? (along.openLow ? Number.NEGATIVE_INFINITY : 0) : from;
    to = to >= along.cells - TIE ? (along.openHigh ? Number.POSITIVE_INFINITY : along.cells) : to;
    const origin = along.position(0);
    const round = kind === "f" ? Math.round : Math.floor;
    const first = Math.max(kind === "f" ? 1 : 0, round(from - origin + TIE));
    const last = Math.min(along.count, round(to - origin + TIE));
    const flag = kind === "f" ? FIXED_F : axis === "x" ? FIXED_GY : FIXED_GX;
    for (let i = first; i <= last; i += 1) {
      if (axis === "x") this.flag(n, i, flag);
      else this.flag(i, n, flag);
    }
  }

  private drawWall(points: readonly Point[]): void {
    const { widthMm, heightMm } = this.input;
    const { nx, ny } = this.lattice;
    const inCells = points.map(
      ([x, y]): Point => [(x / widthMm) * nx + WALL_SHIFT[0], (y / heightMm) * ny + WALL_SHIFT[1]],
    );
    for (let i = 1; i < inCells.length; i += 1) this.drawSegment(inCells[i - 1], inCells[i]);
    this.continueOutward(inCells[0]);
    this.continueOutward(inCells[inCells.length - 1]);
  }

  /** A wall that ends on an absorbing edge goes on behind it, straight outward. */
  private continueOutward([x, y]: Point): void {
    const { lattice } = this;
    const { nx, ny, edges, layers } = lattice;
    if (Math.abs(x) < ON_EDGE && edges.left === "absorbing") this.drawSegment([x, y], [-layers.left, y]);
    if (Math.abs(x - nx) < ON_EDGE && edges.right === "absorbing")
      this.drawSegment([x, y], [nx + layers.right, y]);
    if (Math.abs(y) < ON_EDGE && edges.bottom === "absorbing") this.drawSegment([x, y], [x, -layers.bottom]);
    if (Math.abs(y - ny) < ON_EDGE && edges.top === "absorbing")
      this.drawSegment([x, y], [x, ny + layers.top]);
  }

  private drawSegment(a: Point, b: Point): void {
    this.crossLines(a, b, "y");
    this.crossLines([a[1], a[0]], [b[1], b[0]], "x");
  }

  /**
   * Crossings of a segment with the lines through F's points: for axis "y" the lines x = const, else, with the segment's
   * coordinates exchanged, the lines y = const.
   */
  private crossLines(a: Point, b: Point, axis: "x" | "y"): void {
    const along = this.lineOf(axis);
    const across = this.lineOf(axis === "x" ? "y" : "x");
    const low = Math.min(a[0], b[0]) - ON_EDGE;
    const high = Math.max(a[0], b[0]) + ON_EDGE;
    if (Math.abs(b[0] - a[0]) < TIE) return;
    const acrossOrigin = across.position(0);
    const alongOrigin = along.position(0);
    const first = Math.max(1, Math.ceil(low - acrossOrigin));
    const last = Math.min(across.count, Math.floor(high - acrossOrigin));
    for (let n = first; n <= last; n += 1) {
      const share = Math.min(1, Math.max(0, (across.position(n) - a[0]) / (b[0] - a[0])));
      const at = a[1] + (b[1] - a[1]) * share - alongOrigin;
      const i = this.wallFixesF ? Math.round(at) : Math.floor(at);
      if (i < (this.wallFixesF ? 1 : 0) || i > along.count) continue;
      if (axis === "y") this.flag(i, n, this.wallFixesF ? FIXED_F : FIXED_GX);
      else this.flag(n, i, this.wallFixesF ? FIXED_F : FIXED_GY);
    }
  }
}
