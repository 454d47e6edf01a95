/**
 * The lines of a drawing cut where they meet: every shape's edge, the thin lines and the section's edges, as edges between
 * common vertices that touch nowhere else. Vertices closer than the tolerance are one.
 */
import { SegmentBuckets } from "./buckets.js";

export interface Segment {
  ax: number;
  ay: number;
  bx: number;
  by: number;
  /** A number of the caller's, kept on every piece; OUTLINE for edges of areas. */
  tag: number;
}

export const OUTLINE = -1;

export interface Arrangement {
  /** x, y of vertex n at 2n, 2n + 1. */
  vertices: number[];
  /** Pieces between vertices, each once. */
  edges: { from: number; to: number; tags: number[] }[];
}

/** Finds or makes the vertex at a place. */
class VertexTable {
  readonly vertices: number[] = [];
  private readonly cells = new Map<string, number[]>();

  constructor(private readonly tolerance: number) {}

  at(x: number, y: number): number {
    const size = 2 * this.tolerance;
    const column = Math.floor(x / size);
    const row = Math.floor(y / size);
    for (let r = row - 1; r <= row + 1; r += 1) {
      for (let c = column - 1; c <= column + 1; c += 1) {
        for (const vertex of this.cells.get(`${c},${r}`) ?? []) {
          const dx = this.vertices[2 * vertex] - x;
          const dy = this.vertices[2 * vertex + 1] - y;
          if (dx * dx + dy * dy <= this.tolerance * this.tolerance) return vertex;
        }
      }
    }
    const made = this.vertices.length / 2;
    this.vertices.push(x, y);
    const key = `${column},${row}`;
    const cell = this.cells.get(key);
    if (cell) cell.push(made);
    else this.cells.set(key, [made]);
    return made;
  }
}

/** The part of a segment within the section; null where there is none (Liang and Barsky's clipping by parameters). */
function clipped(segment: Segment, width: number, height: number): Segment | null {
  const dx = segment.bx - segment.ax;
  const dy = segment.by - segment.ay;
  let from = 0;
  let to = 1;
  for (const [step, room] of [
    [-dx, segment.ax],
    [dx, width - segment.ax],
    [-dy, segment.ay],
    [dy, height - segment.ay],
  ]) {
    if (step === 0) {
      if (room < 0) return null;
    } else if (step < 0) from = Math.max(from, room / step);
    else to = Math.min(to, room / step);
  }
  if (from > to) return null;
  const within = (value: number, most: number): number => Math.min(most, Math.max(0, value));
  return {
    ax: within(segment.ax + from * dx, width),
    ay: within(segment.ay + from * dy, height),
    bx: within(segment.ax + to * dx, width),
    by: within(segment.ay + to * dy, height),
    tag: segment.tag,
  };
}

/** Adds to both segments the places where they meet: as parameters along each. */
function meet(p: Segment, q: Segment, onP: number[], onQ: number[], tolerance: number): void {
  const ux = p.bx - p.ax;
  const uy = p.by - p.ay;
  const vx = q.bx - q.ax;
  const vy = q.by - q.ay;
  endOn(p, q.ax, q.ay, onP, tolerance);
  endOn(p, q.bx, q.by, onP, tolerance);
  endOn(q, p.ax, p.ay, onQ, tolerance);
  endOn(q, p.bx, p.by, onQ, tolerance);
  const cross = ux * vy - uy * vx;
  if (Math.abs(cross) <= 1e-12 * Math.hypot(ux, uy) * Math.hypot(vx, vy)) return;
  const s = ((q.ax - p.ax) * vy - (q.ay - p.ay) * vx) / cross;
  const t = ((q.ax - p.ax) * uy - (q.ay - p.ay) * ux) / cross;
  if (s > 0 && s < 1 && t > 0 && t < 1) {
    onP.push(s);
    onQ.push(t);
  }
}

function endOn(segment: Segment, x: number, y: number, places: number[], tolerance: number): void {
  const ux = segment.bx - segment.ax;
  const uy = segment.by - segment.ay;
  const length2 = ux * ux + uy * uy;
  if (length2 === 0) return;
  const along = ((x - segment.ax) * ux + (y - segment.ay) * uy) / length2;
  if (along <= 0 || along >= 1) return;
  const across = Math.abs((x - segment.ax) * uy - (y - segment.ay) * ux) / Math.sqrt(length2);
  if (across <= tolerance) places.push(along);
}

/**
 * Arranges segments within the section of width × height.
 *
 * @param sizeMm the squares in which segments are compared with each other
 * @param tolerance vertices this close are one (mm)
 */
export function arrange(
  segments: readonly Segment[],
  width: number,
  height: number,
  sizeMm: number,
  tolerance: number,
): Arrangement {
  const kept: Segment[] = [];
  for (const segment of segments) {
    const part = clipped(segment, width, height);
    if (part && Math.hypot(part.bx - part.ax, part.by - part.ay) > 0) kept.push(part);
  }
  const places: number[][] = kept.map(() => []);
  const buckets = new SegmentBuckets(width, height, sizeMm);
  kept.forEach((s, index) => buckets.add(index, s.ax, s.ay, s.bx, s.by, tolerance));
  for (const group of buckets.groups()) {
    for (let i = 1; i < group.length; i += 1) {
      for (let j = 0; j < i; j += 1) {
        const p = group[i];
        const q = group[j];
        meet(kept[p], kept[q], places[p], places[q], tolerance);
      }
    }
  }
  const table = new VertexTable(tolerance);
  // Corners first, so that a vertex keeps the place that was drawn and not that of a computed crossing.
  for (const s of kept) {
    table.at(s.ax, s.ay);
    table.at(s.bx, s.by);
  }
  const edges = new Map<number, { from: number; to: number; tags: number[] }>();
  const most = 2 ** 26;
  kept.forEach((s, index) => {
    const along = places[index].sort((a, b) => a - b);
    let from = table.at(s.ax, s.ay);
    for (const place of [...along, 1]) {
      const to =
        place === 1
          ? table.at(s.bx, s.by)
          : table.at(s.ax + (s.bx - s.ax) * place, s.ay + (s.by - s.ay) * place);
      if (to === from) continue;
      const key = Math.min(from, to) * most + Math.max(from, to);
      const known = edges.get(key);
      if (!known) edges.set(key, { from, to, tags: [s.tag] });
      else if (!known.tags.includes(s.tag)) known.tags.push(s.tag);
      from = to;
    }
  });
  return { vertices: table.vertices, edges: [...edges.values()] };
}
