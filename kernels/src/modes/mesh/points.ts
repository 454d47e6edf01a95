/** Where the mesh has its vertices: on the frame, in rings around singular places, on a square grid elsewhere. */
import type { Raster } from "../../geometry/index.js";
import { CoverageSweep } from "../../geometry/index.js";
import { distanceToSegment, SegmentBuckets } from "./buckets.js";
import type { Drawing } from "./drawing.js";
import type { Frame, FrameEdge } from "./frame.js";
import { isFill } from "./frame.js";
import type { SingularVertex } from "./singular.js";

export interface MeshPoints {
  /** x, y of point n at 2n, 2n + 1 (mm). */
  coordinates: Float64Array;
  /** Pieces of the frame between points. */
  pieces: { from: number; to: number; edge: FrameEdge }[];
  /** By square of the raster: its only medium, or −1. */
  onlyMedium: Int32Array;
}

/** Grid points keep this share of a leg away from the frame. */
const CLEARANCE = 0.5;
/** Rings: the outermost in legs, each next one in the ratio, points of a whole ring. */
const OUTER_LEGS = 2;
const RING_RATIO = 0.62;
const RING_POINTS = 14;
/** Points of all rings together stay about below this. */
const MOST_RING_POINTS = 60_000;
/** Above this many pairs the neighbourhood of singular vertices is not measured but taken as half a leg. */
const MOST_PAIRS = 2e7;
const RING_CLEARANCE = 0.3;

interface Rings {
  vertex: number;
  x: number;
  y: number;
  /** Falling radii. */
  radii: number[];
}

function ringsAround(frame: Frame, singular: readonly SingularVertex[], legMm: number): Rings[] {
  const { vertices, edges } = frame;
  const most = Math.floor(MOST_RING_POINTS / (RING_POINTS * Math.max(1, singular.length)));
  const measured = singular.length * edges.length <= MOST_PAIRS;
  return singular.map(({ vertex, exponent }) => {
    const x = vertices[2 * vertex];
    const y = vertices[2 * vertex + 1];
    let room = OUTER_LEGS * legMm;
    if (measured) {
      for (const { from, to } of edges) {
        if (from === vertex || to === vertex) continue;
        const distance = distanceToSegment(
          x,
          y,
          vertices[2 * from],
          vertices[2 * from + 1],
          vertices[2 * to],
          vertices[2 * to + 1],
        );
        room = Math.min(room, 0.7 * distance);
      }
      for (const other of singular) {
        if (other.vertex === vertex) continue;
        const distance = Math.hypot(vertices[2 * other.vertex] - x, vertices[2 * other.vertex + 1] - y);
        room = Math.min(room, 0.45 * distance);
      }
    } else room = legMm / 2;
    // The share of the eigenvalue that a disc of radius r holds goes as r^(2p): the same is left for every exponent.
    const innermost = legMm * 0.03 ** (2 / 3 / exponent);
    const radii: number[] = [];
    for (let r = room; r > innermost && radii.length < most; r *= RING_RATIO) radii.push(r);
    return { vertex, x, y, radii };
  });
}

class PointSet {
  readonly coordinates: number[] = [];

  add(x: number, y: number): number {
    this.coordinates.push(x, y);
    return this.coordinates.length / 2 - 1;
  }
}

/** Places between 0 and `length` at which an edge is divided. */
function divisions(length: number, legMm: number, near: readonly number[], far: readonly number[]): number[] {
  const fromNear = near.filter((r) => r < 0.9 * length).reverse();
  const fromFar = far
    .filter((r) => r < 0.9 * length && length - r > (fromNear.at(-1) ?? 0) * 1.1)
    .map((r) => length - r);
  const fixed = [0, ...fromNear, ...fromFar, length];
  const places: number[] = [];
  for (let n = 1; n < fixed.length; n += 1) {
    const span = fixed[n] - fixed[n - 1];
    const parts = Math.max(1, Math.ceil(span / legMm - 1e-6));
    for (let part = 1; part <= parts; part += 1) {
      if (n < fixed.length - 1 || part < parts) places.push(fixed[n - 1] + (span * part) / parts);
    }
  }
  return places;
}

/** Divides the frame's edges and gives every piece its end points. */
function divideFrame(
  drawing: Drawing,
  frame: Frame,
  rings: readonly Rings[],
  legMm: number,
  points: PointSet,
): MeshPoints["pieces"] {
  const { vertices } = frame;
  const radiiAt = new Map(rings.map((entry) => [entry.vertex, entry.radii]));
  const pointOf = new Map<number, number>();
  const place = (vertex: number): number => {
    let point = pointOf.get(vertex);
    if (point === undefined) {
      point = points.add(vertices[2 * vertex], vertices[2 * vertex + 1]);
      pointOf.set(vertex, point);
    }
    return point;
  };
  const pieces: MeshPoints["pieces"] = [];
  for (const edge of frame.edges) {
    const ax = vertices[2 * edge.from];
    const ay = vertices[2 * edge.from + 1];
    const dx = vertices[2 * edge.to] - ax;
    const dy = vertices[2 * edge.to + 1] - ay;
    const length = Math.hypot(dx, dy);
    const open = isFill(drawing, edge.left) || isFill(drawing, edge.right);
    const places = open
      ? divisions(length, legMm, radiiAt.get(edge.from) ?? [], radiiAt.get(edge.to) ?? [])
      : [];
    let from = place(edge.from);
    for (const at of places) {
      const to = points.add(ax + (dx * at) / length, ay + (dy * at) / length);
      pieces.push({ from, to, edge });
      from = to;
    }
    pieces.push({ from, to: place(edge.to), edge });
  }
  return pieces;
}

function addRings(
  rings: readonly Rings[],
  nearest: (x: number, y: number) => number,
  points: PointSet,
): void {
  for (const { x, y, radii } of rings) {
    radii.forEach((radius, n) => {
      for (let k = 0; k < RING_POINTS; k += 1) {
        const angle = (2 * Math.PI * (k + (n % 2) / 2)) / RING_POINTS;
        const px = x + radius * Math.cos(angle);
        const py = y + radius * Math.sin(angle);
        if (nearest(px, py) > RING_CLEARANCE * radius) points.add(px, py);
      }
    });
  }
}

/** The only medium of every square of the raster, −1 where several meet. */
function onlyMedia(drawing: Drawing, raster: Raster): Int32Array {
  const sweep = new CoverageSweep(drawing.areas, drawing.background, raster);
  const only = new Int32Array(raster.columns * raster.rows);
  for (let r = 0; r < raster.rows; r += 1) only.set(sweep.row(r).medium, r * raster.columns);
  return only;
}

/** The vertices of the mesh and the pieces of the frame that must be sides of elements. */
export function placePoints(
  drawing: Drawing,
  frame: Frame,
  singular: readonly SingularVertex[],
  legMm: number,
  raster: Raster,
): MeshPoints {
  const { widthMm, heightMm } = drawing;
  const points = new PointSet();
  const rings = ringsAround(frame, singular, legMm);
  const pieces = divideFrame(drawing, frame, rings, legMm, points);
  const buckets = new SegmentBuckets(widthMm, heightMm, legMm);
  const { coordinates } = points;
  pieces.forEach(({ from, to }, index) =>
    buckets.add(
      index,
      coordinates[2 * from],
      coordinates[2 * from + 1],
      coordinates[2 * to],
      coordinates[2 * to + 1],
      0.75 * legMm,
    ),
  );
  const nearest = (x: number, y: number): number => {
    if (x < 0 || y < 0 || x > widthMm || y > heightMm) return 0;
    let distance = 0.75 * legMm;
    for (const index of buckets.at(x, y)) {
      const { from, to } = pieces[index];
      const here = distanceToSegment(
        x,
        y,
        coordinates[2 * from],
        coordinates[2 * from + 1],
        coordinates[2 * to],
        coordinates[2 * to + 1],
      );
      if (here < distance) distance = here;
    }
    return distance;
  };
  addRings(rings, nearest, points);
  const onlyMedium = onlyMedia(drawing, raster);
  addGrid(drawing, raster, onlyMedium, rings, (x, y) => nearest(x, y) > CLEARANCE * legMm, points);
  return { coordinates: Float64Array.from(coordinates), pieces, onlyMedium };
}

/** Points of the square grid inside the section, away from the frame, the rings and the inside of conductors. */
function addGrid(
  drawing: Drawing,
  raster: Raster,
  onlyMedium: Int32Array,
  rings: readonly Rings[],
  clear: (x: number, y: number) => boolean,
  points: PointSet,
): void {
  const { columns, rows } = raster;
  const dx = drawing.widthMm / columns;
  const dy = drawing.heightMm / rows;
  const taken = new Uint8Array((columns + 1) * (rows + 1));
  for (const { x, y, radii } of rings) {
    const reach = 1.25 * (radii[0] ?? 0);
    for (let j = Math.ceil((y - reach) / dy); j <= (y + reach) / dy; j += 1) {
      for (let i = Math.ceil((x - reach) / dx); i <= (x + reach) / dx; i += 1) {
        const inside = i >= 0 && j >= 0 && i <= columns && j <= rows;
        if (inside && Math.hypot(i * dx - x, j * dy - y) < reach) taken[j * (columns + 1) + i] = 1;
      }
    }
  }
  const solid = (i: number, j: number): boolean => {
    const medium = onlyMedium[j * columns + i];
    return medium >= 0 && drawing.media[medium].kind !== "fill";
  };
  for (let j = 1; j < rows; j += 1) {
    for (let i = 1; i < columns; i += 1) {
      if (taken[j * (columns + 1) + i] === 1) continue;
      if (solid(i - 1, j - 1) && solid(i, j - 1) && solid(i - 1, j) && solid(i, j)) continue;
      if (clear(i * dx, j * dy)) points.add(i * dx, j * dy);
    }
  }
}
