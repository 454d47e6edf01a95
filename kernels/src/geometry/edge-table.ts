/**
 * The edges of all painted shapes in raster units (one unit is one raster cell), ready for a sweep along y: struct of arrays,
 * in the order of the raster rows of their lower ends, each with its patch and the change of winding number on crossing it rightward.
 */
import type { AreaShape, Point } from "./outline.js";
import { outlineOf } from "./outline.js";

/** An area of one medium; later ones cover earlier ones. */
export interface PaintedArea {
  shape: AreaShape;
  /** Index of its medium in the caller's list. */
  medium: number;
}

/** A raster over the section: `columns` × `rows` cells over width × height mm, row 0 at the bottom. */
export interface Raster {
  widthMm: number;
  heightMm: number;
  columns: number;
  rows: number;
}

export interface EdgeTable {
  readonly count: number;
  readonly x0: Float64Array;
  readonly y0: Float64Array;
  readonly x1: Float64Array;
  readonly y1: Float64Array;
  readonly turn: Int8Array;
  readonly patch: Int32Array;
  /** Edges along x: y and the x range, for marking the cells they cut. */
  readonly level: { y: number; from: number; to: number }[];
  /** By patch. */
  readonly medium: Int32Array;
  readonly evenOdd: Uint8Array;
}

/** Corners closer than this to a raster line (in cells) are taken to lie on it. */
const SNAP = 1e-7;
/** Chords leave curves by at most this share of a raster cell. */
export const CHORD_TOLERANCE = 4e-3;

const snapped = (value: number): number => {
  const nearest = Math.round(value);
  return Math.abs(value - nearest) < SNAP ? nearest : value;
};

/** Counting sort of the edges by the raster row of their lower end; all below the raster count as one row, all above too. */
function orderByRow(raw: readonly number[], count: number, rows: number): Uint32Array {
  const rowOf = (n: number): number => Math.min(rows, Math.max(-1, Math.floor(raw[n * 6 + 1]))) + 1;
  const order = new Uint32Array(count);
  const starts = new Uint32Array(rows + 3);
  for (let n = 0; n < count; n += 1) starts[rowOf(n) + 1] += 1;
  for (let row = 1; row < starts.length; row += 1) starts[row] += starts[row - 1];
  for (let n = 0; n < count; n += 1) {
    const row = rowOf(n);
    order[starts[row]] = n;
    starts[row] += 1;
  }
  return order;
}

/** Builds the table. `swapAxes` exchanges x and y, for cuts along vertical lines. */
export function buildEdgeTable(areas: readonly PaintedArea[], raster: Raster, swapAxes = false): EdgeTable {
  const scaleX = raster.columns / raster.widthMm;
  const scaleY = raster.rows / raster.heightMm;
  const tolerance = CHORD_TOLERANCE / Math.max(scaleX, scaleY);
  const raw: number[] = [];
  const level: { y: number; from: number; to: number }[] = [];
  const medium = new Int32Array(areas.length);
  const evenOdd = new Uint8Array(areas.length);
  const place = ([x, y]: Point): Point => {
    const px = snapped(x * scaleX);
    const py = snapped(y * scaleY);
    return swapAxes ? [py, px] : [px, py];
  };
  areas.forEach((area, patch) => {
    const outline = outlineOf(area.shape, tolerance);
    medium[patch] = area.medium;
    evenOdd[patch] = outline.rule === "even-odd" ? 1 : 0;
    for (const ring of outline.rings) {
      let [fromX, fromY] = place(ring[ring.length - 1]);
      for (const corner of ring) {
        const [toX, toY] = place(corner);
        if (fromY === toY) {
          if (fromX !== toX) level.push({ y: toY, from: Math.min(fromX, toX), to: Math.max(fromX, toX) });
        } else if (fromY < toY) raw.push(fromX, fromY, toX, toY, 1, patch);
        else raw.push(toX, toY, fromX, fromY, -1, patch);
        fromX = toX;
        fromY = toY;
      }
    }
  });
  const count = raw.length / 6;
  const order = orderByRow(raw, count, swapAxes ? raster.columns : raster.rows);
  const pick = (slot: number): Float64Array => {
    const values = new Float64Array(count);
    for (let n = 0; n < count; n += 1) values[n] = raw[order[n] * 6 + slot];
    return values;
  };
  level.sort((p, q) => p.y - q.y);
  return {
    count,
    x0: pick(0),
    y0: pick(1),
    x1: pick(2),
    y1: pick(3),
    turn: Int8Array.from(pick(4)),
    patch: Int32Array.from(pick(5)),
    level,
    medium,
    evenOdd,
  };
}

/** x of an edge at height y, never outside the edge's own extent. */
export function edgeX(table: EdgeTable, edge: number, y: number): number {
  const y0 = table.y0[edge];
  const y1 = table.y1[edge];
  const x0 = table.x0[edge];
  const x1 = table.x1[edge];
  if (y <= y0) return x0;
  if (y >= y1) return x1;
  return x0 + ((x1 - x0) * (y - y0)) / (y1 - y0);
}
