/**
 * What painted shapes cover along single lines: the base of staircase and of conformal metal. The line y = const (or x = const)
 * is cut into intervals, each of the one medium that is visible there; cuts are exact up to the chords of curves.
 */
import { CoverStack } from "./cover-stack.js";
import type { EdgeTable, PaintedArea, Raster } from "./edge-table.js";
import { buildEdgeTable, edgeX } from "./edge-table.js";

export interface Interval {
  /** In raster cells along the line. */
  from: number;
  to: number;
  medium: number;
}

export class LineCutter {
  private readonly table: EdgeTable;
  private readonly stack: CoverStack;
  private active: number[] = [];
  private nextEdge = 0;
  private last = Number.NEGATIVE_INFINITY;

  /** @param axis "x": lines y = const, intervals along x; "y": lines x = const, intervals along y */
  constructor(
    areas: readonly PaintedArea[],
    private readonly background: number,
    raster: Raster,
    axis: "x" | "y",
  ) {
    this.table = buildEdgeTable(areas, raster, axis === "y");
    this.stack = new CoverStack(this.table, background);
  }

  /** Intervals of the line at `position` raster cells, from left to right; the outermost run to ±∞. Rising positions cost least. */
  cut(position: number): Interval[] {
    const { table } = this;
    if (position < this.last) {
      this.active = [];
      this.nextEdge = 0;
    }
    this.last = position;
    const row = Math.floor(position);
    while (this.nextEdge < table.count && Math.floor(table.y0[this.nextEdge]) <= row) {
      this.active.push(this.nextEdge);
      this.nextEdge += 1;
    }
    this.active = this.active.filter((edge) => table.y1[edge] > position);
    const crossings: { edge: number; x: number }[] = [];
    for (const edge of this.active) {
      if (table.y0[edge] <= position) crossings.push({ edge, x: edgeX(table, edge, position) });
    }
    crossings.sort((p, q) => p.x - q.x || p.edge - q.edge);
    const intervals: Interval[] = [];
    this.stack.reset();
    let medium = this.background;
    let from = Number.NEGATIVE_INFINITY;
    for (const { edge, x } of crossings) {
      this.stack.cross(edge);
      if (this.stack.medium === medium) continue;
      if (x > from) intervals.push({ from, to: x, medium });
      medium = this.stack.medium;
      from = x;
    }
    intervals.push({ from, to: Number.POSITIVE_INFINITY, medium });
    return intervals;
  }
}
