/**
 * The open part of cells that metal cuts, exactly: its area and the spans of the cell's four sides that bound it.
 *
 * The row sweep cuts a row into slabs whose edges are straight; in a slab the open part of a cell is made of trapezoids, and trapezoids
 * of neighbouring slabs belong together where they share a span of the level between them. Where metal divides a cell, the
 * largest connected part is the cell and the rest counts as metal: two sides of a sheet never share a cell, however thin it is.
 */
import type { Slab } from "./coverage.js";
import { CoverageSweep } from "./coverage.js";
import type { PaintedArea, Raster } from "./edge-table.js";

/** From … to along a side of a cell, 0 … 1 upward or rightward. */
export type Span = readonly [number, number];

export interface CutCell {
  /** Share of the cell's area. */
  area: number;
  left: readonly Span[];
  right: readonly Span[];
  bottom: readonly Span[];
  top: readonly Span[];
}

export type OpenCell = "open" | "metal" | CutCell;

/** Sides shorter and areas smaller than this share of a whole one are closed; within it of a whole one they are whole. */
export const SLIVER = 1e-4;
const TOUCH = 1e-9;
const WHOLE: readonly Span[] = [[0, 1]];
const NO_SPANS: readonly Span[] = [];

export type Side4 = "left" | "right" | "bottom" | "top";

/** Spans of one side of a cell. */
export const spansOf = (cell: OpenCell, side: Side4): readonly Span[] =>
  cell === "open" ? WHOLE : cell === "metal" ? NO_SPANS : cell[side];

export const areaOf = (cell: OpenCell): number => (cell === "open" ? 1 : cell === "metal" ? 0 : cell.area);

/** Length that two lists of spans have in common. */
export function commonLength(a: readonly Span[], b: readonly Span[]): number {
  let sum = 0;
  for (const [from, to] of a) {
    for (const [start, end] of b) sum += Math.max(0, Math.min(to, end) - Math.max(from, start));
  }
  return sum;
}

/** In cells: above rounding, below half the thickness of a wall. */
const ON_EDGE = 1e-6;

/** The cell beyond a side of the section, where what touches the side goes on straight outward. */
export function continued(cell: OpenCell, side: Side4): OpenCell {
  if (typeof cell === "string") return cell;
  let widest: Span = [0, 0];
  for (const span of cell[side]) if (span[1] - span[0] > widest[1] - widest[0]) widest = span;
  const area = widest[1] - widest[0];
  if (area < SLIVER) return "metal";
  // A wall along an edge takes less than a sliver of the cell, and closes that edge.
  const low = widest[0] < ON_EDGE ? WHOLE : NO_SPANS;
  const high = widest[1] > 1 - ON_EDGE ? WHOLE : NO_SPANS;
  if (low === WHOLE && high === WHOLE) return "open";
  return side === "left" || side === "right"
    ? { area, left: [widest], right: [widest], bottom: low, top: high }
    : { area, bottom: [widest], top: [widest], left: low, right: high };
}

interface Piece {
  part: number;
  area: number;
  left: Span | null;
  right: Span | null;
  low: Span | null;
  high: Span | null;
}

type Corner = readonly [number, number];

/** Keeps the part of a convex polygon on one side of x = limit. */
function clip(corners: readonly Corner[], limit: number, keepRight: boolean): Corner[] {
  const kept: Corner[] = [];
  const depth = ([x]: Corner): number => (keepRight ? x - limit : limit - x);
  for (let n = 0; n < corners.length; n += 1) {
    const p = corners[n];
    const q = corners[(n + 1) % corners.length];
    const dp = depth(p);
    const dq = depth(q);
    if (dp >= 0) kept.push(p);
    if ((dp > 0 && dq < 0) || (dp < 0 && dq > 0)) {
      kept.push([limit, p[1] + ((q[1] - p[1]) * dp) / (dp - dq)]);
    }
  }
  return kept;
}

function rangeOf(corners: readonly Corner[], axis: 0 | 1, at: number): Span | null {
  let from = Infinity;
  let to = -Infinity;
  for (const corner of corners) {
    if (corner[axis] !== at) continue;
    from = Math.min(from, corner[1 - axis]);
    to = Math.max(to, corner[1 - axis]);
  }
  return to > from ? [from, to] : null;
}

const moved = (span: Span | null, by: number): Span | null => span && [span[0] - by, span[1] - by];

/** An open trapezoid within column `c`, in the coordinates of the cell. */
function pieceOf(corners: readonly Corner[], slab: Slab, c: number, r: number): Piece | null {
  const inside = clip(clip(corners, c, true), c + 1, false);
  let twice = 0;
  inside.forEach(([x, y], n) => {
    const [nextX, nextY] = inside[(n + 1) % inside.length];
    twice += (x - c) * (nextY - r) - (nextX - c) * (y - r);
  });
  if (!(twice > 0)) return null;
  return {
    part: -1,
    area: twice / 2,
    left: moved(rangeOf(inside, 0, c), r),
    right: moved(rangeOf(inside, 0, c + 1), r),
    low: moved(rangeOf(inside, 1, slab.low), c),
    high: moved(rangeOf(inside, 1, slab.high), c),
  };
}

const overlap = (a: Span | null, b: Span | null): boolean =>
  a !== null && b !== null && Math.min(a[1], b[1]) - Math.max(a[0], b[0]) > TOUCH;

/** Joins touching pieces of consecutive slabs and makes a cell of the largest part. */
function largestPart(slabs: readonly (readonly Piece[])[]): OpenCell {
  const all = slabs.flat();
  all.forEach((piece, index) => {
    piece.part = index;
  });
  const join = (from: number, to: number): void => {
    for (const piece of all) if (piece.part === from) piece.part = to;
  };
  for (let n = 1; n < slabs.length; n += 1) {
    for (const lower of slabs[n - 1]) {
      for (const upper of slabs[n]) {
        if (lower.part !== upper.part && overlap(lower.high, upper.low)) join(upper.part, lower.part);
      }
    }
  }
  const areas = new Map<number, number>();
  for (const { part, area } of all) areas.set(part, (areas.get(part) ?? 0) + area);
  let best = -1;
  let area = 0;
  for (const [part, sum] of areas) {
    if (sum <= area) continue;
    best = part;
    area = sum;
  }
  if (area < SLIVER) return "metal";
  const parts = all.filter(({ part }) => part === best);
  const spans = (pick: (piece: Piece) => Span | null): Span[] =>
    parts.map(pick).filter((span): span is Span => span !== null);
  const first = new Set(slabs[0]);
  const last = new Set(slabs[slabs.length - 1]);
  return {
    area: area > 1 - SLIVER ? 1 : area,
    left: spans((piece) => piece.left),
    right: spans((piece) => piece.right),
    bottom: spans((piece) => (first.has(piece) ? piece.low : null)),
    top: spans((piece) => (last.has(piece) ? piece.high : null)),
  };
}

export class OpenCellSweep {
  private readonly sweep: CoverageSweep;
  private readonly slabs: Slab[] = [];

  /** @param closed whether the medium of that index is metal */
  constructor(
    areas: readonly PaintedArea[],
    private readonly background: number,
    private readonly raster: Raster,
    private readonly closed: (medium: number) => boolean,
  ) {
    this.sweep = new CoverageSweep(areas, background, raster, (slab) => this.slabs.push(slab));
  }

  /** The cells of row r; rising rows cost least. */
  row(r: number): OpenCell[] {
    this.slabs.length = 0;
    const painted = this.sweep.row(r);
    const cells: OpenCell[] = Array.from(painted.medium, (medium) =>
      medium >= 0 && this.closed(medium) ? "metal" : "open",
    );
    const cut = painted.cut.filter((cell) => {
      const shares = painted.shares(cell);
      const metal = shares.filter(({ medium }) => this.closed(medium)).length;
      if (metal === shares.length) cells[cell] = "metal";
      return metal > 0 && metal < shares.length;
    });
    if (cut.length === 0) return cells;
    const pieces = new Map(cut.map((cell): [number, Piece[][]] => [cell, []]));
    for (const slab of this.slabs) this.cutSlab(slab, r, pieces);
    for (const [cell, slabs] of pieces) cells[cell] = largestPart(slabs);
    return cells;
  }

  private cutSlab(slab: Slab, r: number, pieces: ReadonlyMap<number, Piece[][]>): void {
    for (const slabs of pieces.values()) slabs.push([]);
    for (const [[a0, b0], [a1, b1]] of this.openTrapezoids(slab)) {
      const first = Math.min(a0, b0);
      const last = Math.max(a1, b1);
      const corners: Corner[] = [
        [a0, slab.low],
        [a1, slab.low],
        [b1, slab.high],
        [b0, slab.high],
      ];
      for (const [cell, slabs] of pieces) {
        if (cell + 1 <= first || cell >= last) continue;
        const piece = pieceOf(corners, slab, cell, r);
        if (piece) slabs[slabs.length - 1].push(piece);
      }
    }
  }

  /** Open stretches of a slab as pairs of sides, each with its x at the slab's lower and upper level. */
  private openTrapezoids({ changes }: Slab): [Corner, Corner][] {
    const found: [Corner, Corner][] = [];
    const far = this.raster.columns + 1;
    let open: Corner | null = this.closed(this.background) ? null : [-1, -1];
    for (const { a, b, medium } of changes) {
      const closes = this.closed(medium);
      if (open && closes) {
        found.push([open, [a, b]]);
        open = null;
      } else if (!open && !closes) open = [a, b];
    }
    if (open) found.push([open, [far, far]]);
    return found;
  }
}
