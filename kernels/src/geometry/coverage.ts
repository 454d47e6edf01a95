/**
 * Exact area coverage of raster cells by painted shapes, later ones over earlier ones.
 *
 * A row is cut into slabs at the corners and crossings of the edges in it. Inside a slab edges are straight and keep their
 * order, so walking them from left to right gives the visible medium of every trapezoid, and each change of medium adds
 * the exact area right of its edge to the cells it passes (signed, so that what leaves one medium enters the other).
 *
 * Error: none but rounding for straight shapes (10⁻¹² of a cell); for curves see `outline.ts`. A row with more than
 * `MAX_SPLITS` crossings leaves the rest unsplit, which misplaces less than the area between the crossing edges.
 */
import { CoverStack } from "./cover-stack.js";
import type { EdgeTable, PaintedArea, Raster } from "./edge-table.js";
import { buildEdgeTable, edgeX } from "./edge-table.js";

/** One row of raster cells. Do not keep: the next row reuses it. */
export interface PaintedRow {
  /** By cell: index of the only medium, or −1 where several meet. */
  readonly medium: Int32Array;
  /** The cells that are −1 above, from left to right. */
  readonly cut: readonly number[];
  /** Shares of the media of such a cell; they sum to 1. Empty elsewhere. */
  shares(cell: number): readonly MediumShare[];
}

export interface MediumShare {
  medium: number;
  share: number;
}

/** A part of a row between two heights in which edges are straight and do not cross. Do not keep. */
export interface Slab {
  low: number;
  high: number;
  /** Where the visible medium changes, from left to right: x at `low` and at `high`, and the medium to the right. */
  changes: readonly { a: number; b: number; medium: number }[];
}

const MAX_SPLITS = 4096;
/** Slabs thinner and shares smaller than this are rounding. */
const NOTHING = 1e-12;
const CROSSING = 1e-10;
const NO_SHARES: readonly MediumShare[] = [];

export class CoverageSweep {
  readonly columns: number;
  readonly rows: number;
  private readonly table: EdgeTable;
  private readonly stack: CoverStack;
  private readonly background: number;
  private readonly medium: Int32Array;
  private readonly mixed: Uint8Array;
  /** Signed areas by medium, as differences along the row; a medium's array is made when it is first seen. */
  private readonly sums = new Map<number, Float64Array>();
  private readonly seen = new Set<number>();
  private mixedShares = new Map<number, MediumShare[]>();
  private active: number[] = [];
  private nextEdge = 0;
  private nextLevel = 0;
  private nextRow = 0;
  private splits = 0;
  private filled = false;

  /**
   * @param background index of the medium where nothing is painted
   * @param onSlab called for every slab of a row from below upward, before `row` returns; not for rows without edges
   */
  constructor(
    areas: readonly PaintedArea[],
    background: number,
    raster: Raster,
    private readonly onSlab?: (slab: Slab) => void,
  ) {
    this.columns = raster.columns;
    this.rows = raster.rows;
    this.background = background;
    this.table = buildEdgeTable(areas, raster);
    this.stack = new CoverStack(this.table, background);
    this.medium = new Int32Array(raster.columns);
    this.mixed = new Uint8Array(raster.columns);
  }

  /** Coverage of row r. Rows asked for in rising order cost least. */
  row(r: number): PaintedRow {
    if (!Number.isInteger(r) || r < 0 || r >= this.rows) {
      throw new RangeError(`Row ${r} lies outside the raster of ${this.rows} rows.`);
    }
    if (r !== this.nextRow) this.rewind(r);
    this.nextRow = r + 1;
    this.gather(r);
    this.mixedShares = new Map();
    if (this.active.length === 0) {
      this.medium.fill(this.background);
    } else {
      this.markCutCells(r);
      this.sweepRow(r);
      this.collectShares();
    }
    const shares = this.mixedShares;
    return { medium: this.medium, cut: [...shares.keys()], shares: (cell) => shares.get(cell) ?? NO_SHARES };
  }

  private rewind(r: number): void {
    const { table } = this;
    this.active = [];
    this.nextEdge = 0;
    while (this.nextEdge < table.count && table.y0[this.nextEdge] < r) {
      if (table.y1[this.nextEdge] > r) this.active.push(this.nextEdge);
      this.nextEdge += 1;
    }
    this.nextLevel = 0;
    while (this.nextLevel < table.level.length && table.level[this.nextLevel].y <= r) this.nextLevel += 1;
  }

  private gather(r: number): void {
    const { table } = this;
    this.active = this.active.filter((edge) => table.y1[edge] > r);
    while (this.nextEdge < table.count && table.y0[this.nextEdge] < r + 1) {
      if (table.y1[this.nextEdge] > r) this.active.push(this.nextEdge);
      this.nextEdge += 1;
    }
  }

  private mark(from: number, to: number): void {
    const first = Math.max(0, Math.floor(from));
    const last = Math.min(this.columns, Math.ceil(to));
    if (first < last) this.mixed.fill(1, first, last);
  }

  private markCutCells(r: number): void {
    const { table } = this;
    this.mixed.fill(0);
    for (const edge of this.active) {
      const a = edgeX(table, edge, r);
      const b = edgeX(table, edge, r + 1);
      this.mark(Math.min(a, b), Math.max(a, b));
    }
    while (this.nextLevel < table.level.length && table.level[this.nextLevel].y < r + 1) {
      const { y, from, to } = table.level[this.nextLevel];
      if (y > r) this.mark(from, to);
      this.nextLevel += 1;
    }
  }

  private sweepRow(r: number): void {
    const { table, active } = this;
    const heights = [r, r + 1];
    for (const edge of active) {
      if (table.y0[edge] > r) heights.push(table.y0[edge]);
      if (table.y1[edge] < r + 1) heights.push(table.y1[edge]);
    }
    heights.sort((p, q) => p - q);
    this.sums.forEach((sum, medium) => {
      if (this.seen.has(medium)) sum.fill(0);
    });
    this.seen.clear();
    this.splits = 0;
    this.filled = false;
    for (let i = 1; i < heights.length; i += 1) {
      const low = heights[i - 1];
      const high = heights[i];
      if (high - low > NOTHING) this.sweepSlab(low, high);
    }
  }

  /** One slab without corners inside; splits itself where edges cross. */
  private sweepSlab(low: number, high: number): void {
    const { table } = this;
    const middle = (low + high) / 2;
    const edges: { edge: number; a: number; b: number }[] = [];
    for (const edge of this.active) {
      if (table.y0[edge] < middle && table.y1[edge] > middle) {
        edges.push({ edge, a: edgeX(table, edge, low), b: edgeX(table, edge, high) });
      }
    }
    edges.sort((p, q) => p.a + p.b - (q.a + q.b) || p.edge - q.edge);
    const split = this.findCrossing(edges);
    if (split !== null) {
      const y = low + (high - low) * split;
      if (y - low > NOTHING && high - y > NOTHING) {
        this.splits += 1;
        this.sweepSlab(low, y);
        this.sweepSlab(y, high);
        return;
      }
    }
    this.walk(edges, low, high);
  }

  /** Where in the slab (0…1) two neighbours cross; null where none do. */
  private findCrossing(edges: readonly { a: number; b: number }[]): number | null {
    if (this.splits >= MAX_SPLITS) return null;
    for (let i = 1; i < edges.length; i += 1) {
      const p = edges[i - 1];
      const q = edges[i];
      const atLow = q.a - p.a;
      const atHigh = q.b - p.b;
      if (atLow < -CROSSING || atHigh < -CROSSING) return atLow / (atLow - atHigh);
    }
    return null;
  }

  private walk(edges: readonly { edge: number; a: number; b: number }[], low: number, high: number): void {
    const { stack } = this;
    const height = high - low;
    const changes: { a: number; b: number; medium: number }[] = [];
    stack.reset();
    let current = this.background;
    let filledTo = 0;
    this.sumOf(current)[0] += height;
    for (const { edge, a, b } of edges) {
      stack.cross(edge);
      const next = stack.medium;
      if (next === current) continue;
      if (this.onSlab) changes.push({ a, b, medium: next });
      this.addRightOf(this.sumOf(current), a, b, -height);
      this.addRightOf(this.sumOf(next), a, b, height);
      if (!this.filled) {
        const upTo = Math.min(this.columns, Math.max(filledTo, Math.round(Math.max(a, b))));
        this.medium.fill(current, filledTo, upTo);
        filledTo = upTo;
      }
      current = next;
    }
    if (!this.filled) this.medium.fill(current, filledTo, this.columns);
    this.filled = true;
    this.onSlab?.({ low, high, changes });
  }

  private sumOf(medium: number): Float64Array {
    let sum = this.sums.get(medium);
    if (!sum) {
      sum = new Float64Array(this.columns + 2);
      this.sums.set(medium, sum);
    }
    this.seen.add(medium);
    return sum;
  }

  /** Adds the area right of the line from a (below) to b (above) over `height`, as differences along the row. */
  private addRightOf(sum: Float64Array, a: number, b: number, height: number): void {
    const left = Math.min(a, b);
    const right = Math.max(a, b);
    const { columns } = this;
    if (right <= 0) {
      sum[0] += height;
      return;
    }
    if (left >= columns) return;
    if (right - left < 1e-14) {
      this.addPiece(sum, left, left, height);
      return;
    }
    const perUnit = height / (right - left);
    let x = left;
    if (x < 0) {
      sum[0] += -x * perUnit;
      x = 0;
    }
    const stop = Math.min(right, columns);
    while (x < stop) {
      const next = Math.min(stop, Math.floor(x) + 1);
      this.addPiece(sum, x, next, (next - x) * perUnit);
      x = next;
    }
  }

  /** A piece of a line within one cell. */
  private addPiece(sum: Float64Array, from: number, to: number, height: number): void {
    const cell = Math.min(this.columns, Math.floor(from));
    const leftShare = (from + to) / 2 - cell;
    sum[cell] += height * (1 - leftShare);
    sum[cell + 1] += height * leftShare;
  }

  private collectShares(): void {
    const { mixed, medium, mixedShares } = this;
    for (let cell = mixed.indexOf(1); cell >= 0; cell = mixed.indexOf(1, cell + 1)) mixedShares.set(cell, []);
    if (mixedShares.size === 0) return;
    for (const index of this.seen) {
      const sum = this.sumOf(index);
      let share = 0;
      let reached = 0;
      for (const [cell, shares] of mixedShares) {
        for (; reached <= cell; reached += 1) share += sum[reached];
        if (share > 1e-9) shares.push({ medium: index, share });
      }
    }
    for (const [cell, shares] of mixedShares) {
      if (shares.length === 1) {
        medium[cell] = shares[0].medium;
        mixedShares.delete(cell);
      } else {
        medium[cell] = -1;
        shares.sort((p, q) => p.medium - q.medium);
      }
    }
  }
}
