/**
 * Delaunay triangles over points with prescribed sides.
 *
 * Delaunator makes the triangles; sides that are missing are put in by flips of the edges that cross them (S. W. Sloan, Computers &
 * Structures 47 (1993) 441), then edges around them are flipped back to Delaunay's criterion (C. L. Lawson, 1977) as far as the
 * prescribed ones allow. Signs of areas are exact (robust-predicates).
 */
import Delaunator from "delaunator";
import { orient2d } from "robust-predicates";

export interface Triangles {
  /** Corner of half-edge h; triangle t has the half-edges 3t, 3t + 1, 3t + 2, each from its corner to the next. */
  corners: Uint32Array;
  /** The half-edge the other way, or −1 on the hull. */
  twins: Int32Array;
}

export const nextHalf = (h: number): number => (h % 3 === 2 ? h - 2 : h + 1);
export const previousHalf = (h: number): number => (h % 3 === 0 ? h + 2 : h - 1);

/** Edges longer than this many flips per crossing edge do not settle: the points are not in general position. */
const FLIPS_PER_EDGE = 200;

/** A key for an edge between two of fewer than 2²⁶ vertices. */
export const edgeKey = (a: number, b: number): number => Math.min(a, b) * 2 ** 26 + Math.max(a, b);

class EdgeRecovery {
  private readonly outgoing: Int32Array;
  private readonly fixed = new Set<number>();

  constructor(
    private readonly xy: Float64Array,
    private readonly corners: Uint32Array,
    private readonly twins: Int32Array,
  ) {
    this.outgoing = new Int32Array(xy.length / 2).fill(-1);
    for (let h = 0; h < corners.length; h += 1) this.outgoing[corners[h]] = h;
  }

  private side(a: number, b: number, c: number): number {
    const { xy } = this;
    return orient2d(xy[2 * a], xy[2 * a + 1], xy[2 * b], xy[2 * b + 1], xy[2 * c], xy[2 * c + 1]);
  }

  /** Half-edges that leave a vertex, all around it. */
  private fan(vertex: number): number[] {
    const { twins, outgoing } = this;
    const start = outgoing[vertex];
    if (start < 0) return [];
    const halves: number[] = [];
    let h = start;
    do {
      halves.push(h);
      h = twins[previousHalf(h)];
    } while (h >= 0 && h !== start);
    if (h < 0) {
      h = twins[start];
      while (h >= 0) {
        h = nextHalf(h);
        halves.push(h);
        h = twins[h];
      }
    }
    return halves;
  }

  /** A half-edge between two vertices in either direction, or −1. */
  private between(a: number, b: number): number {
    for (const h of this.fan(a)) {
      if (this.corners[nextHalf(h)] === b) return h;
      if (this.corners[previousHalf(h)] === b) return previousHalf(h);
    }
    return -1;
  }

  /** Turns the edge of half-edge a (which has a twin) to the other diagonal of its two triangles. */
  private flip(a: number): void {
    const { corners, twins, outgoing } = this;
    const b = twins[a];
    const afterA = nextHalf(a);
    const beforeA = previousHalf(a);
    const afterB = nextHalf(b);
    const beforeB = previousHalf(b);
    const near = corners[beforeA];
    const far = corners[beforeB];
    corners[a] = far;
    corners[b] = near;
    this.link(a, twins[beforeB]);
    this.link(b, twins[beforeA]);
    this.link(beforeA, beforeB);
    for (const h of [a, afterA, b, afterB]) outgoing[corners[h]] = h;
  }

  private link(a: number, b: number): void {
    this.twins[a] = b;
    if (b >= 0) this.twins[b] = a;
  }

  /** Makes a–b an edge, in pieces where vertices lie on it. */
  recover(a: number, b: number): void {
    let from = a;
    for (let guard = 0; from !== b; guard += 1) {
      if (guard > this.corners.length)
        throw new Error("A border could not be followed by the mesh; draw it with fewer close corners.");
      from = this.recoverPiece(from, b);
    }
  }

  /** Recovers the edge from a to the first vertex on the way to b, and returns that vertex. */
  private recoverPiece(a: number, b: number): number {
    if (this.between(a, b) >= 0) {
      this.fixed.add(edgeKey(a, b));
      return b;
    }
    const { corners, twins } = this;
    const crossing: [number, number][] = [];
    let reached = -1;
    for (const h of this.fan(a)) {
      const p = corners[nextHalf(h)];
      const q = corners[previousHalf(h)];
      const atP = this.side(a, b, p);
      const atQ = this.side(a, b, q);
      const ahead = (v: number): boolean => this.forward(a, b, v);
      if (atP === 0 && ahead(p)) return this.settle(a, p);
      if (atQ === 0 && ahead(q)) return this.settle(a, q);
      if (atP * atQ >= 0 || this.side(p, q, a) * this.side(p, q, b) > 0) continue;
      let half = nextHalf(h);
      let signOfStart = atP;
      for (;;) {
        const from = corners[half];
        const to = corners[nextHalf(half)];
        crossing.push([from, to]);
        const twin = twins[half];
        if (twin < 0) throw new Error("A border leaves the section's mesh.");
        const opposite = corners[previousHalf(twin)];
        const at = opposite === b ? 0 : this.side(a, b, opposite);
        if (at === 0) {
          reached = opposite;
          break;
        }
        // `twin` runs to → from; the border goes on through the side whose ends lie on either side of it.
        const sameAsStart = at > 0 === signOfStart > 0;
        half = sameAsStart ? previousHalf(twin) : nextHalf(twin);
        signOfStart = this.side(a, b, corners[half]);
      }
      break;
    }
    if (reached < 0) throw new Error("A border could not be followed by the mesh.");
    this.flipAway(a, reached, crossing);
    return this.settle(a, reached);
  }

  private settle(a: number, b: number): number {
    this.fixed.add(edgeKey(a, b));
    return b;
  }

  private forward(a: number, b: number, v: number): boolean {
    const { xy } = this;
    const dx = xy[2 * b] - xy[2 * a];
    const dy = xy[2 * b + 1] - xy[2 * a + 1];
    return (xy[2 * v] - xy[2 * a]) * dx + (xy[2 * v + 1] - xy[2 * a + 1]) * dy > 0;
  }

  private flipAway(a: number, b: number, crossing: [number, number][]): void {
    const { corners, twins } = this;
    const made: [number, number][] = [];
    let left = FLIPS_PER_EDGE * (crossing.length + 5);
    while (crossing.length > 0) {
      left -= 1;
      const pair = crossing.shift();
      if (pair === undefined || left < 0)
        throw new Error("A border could not be followed by the mesh; its corners lie too close together.");
      const [u, v] = pair;
      const h = this.between(u, v);
      const twin = h < 0 ? -1 : twins[h];
      if (twin < 0) throw new Error("A border leaves the section's mesh.");
      const p = corners[previousHalf(h)];
      const q = corners[previousHalf(twin)];
      const convex =
        this.side(p, q, u) * this.side(p, q, v) < 0 && this.side(u, v, p) * this.side(u, v, q) < 0;
      if (!convex) {
        crossing.push(pair);
        continue;
      }
      this.flip(h);
      const shares = p === a || p === b || q === a || q === b;
      if (!shares && this.side(a, b, p) * this.side(a, b, q) < 0) crossing.push([p, q]);
      else made.push([p, q]);
    }
    this.fixed.add(edgeKey(a, b));
    this.restore(made);
  }

  /** Flips the given edges, and what that disturbs, where the angles opposite to them add up to more than π. */
  private restore(edges: [number, number][]): void {
    const { corners, twins } = this;
    let left = FLIPS_PER_EDGE * (edges.length + 5);
    while (edges.length > 0 && left > 0) {
      left -= 1;
      const pair = edges.pop();
      if (pair === undefined || this.fixed.has(edgeKey(pair[0], pair[1]))) continue;
      const h = this.between(pair[0], pair[1]);
      const twin = h < 0 ? -1 : twins[h];
      if (twin < 0) continue;
      const u = corners[h];
      const v = corners[twin];
      const p = corners[previousHalf(h)];
      const q = corners[previousHalf(twin)];
      if (this.opposite(u, v, p) + this.opposite(u, v, q) <= Math.PI + 1e-9) continue;
      if (!(this.side(p, q, u) * this.side(p, q, v) < 0)) continue;
      this.flip(h);
      edges.push([u, p], [p, v], [v, q], [q, u]);
    }
  }

  /** Angle at p over the edge u–v. */
  private opposite(u: number, v: number, p: number): number {
    const { xy } = this;
    const ax = xy[2 * u] - xy[2 * p];
    const ay = xy[2 * u + 1] - xy[2 * p + 1];
    const bx = xy[2 * v] - xy[2 * p];
    const by = xy[2 * v + 1] - xy[2 * p + 1];
    return Math.atan2(Math.abs(ax * by - ay * bx), ax * bx + ay * by);
  }
}

/** Triangulates the convex hull of the points so that every piece is an edge (or, where points lie on it, several). */
export function triangulate(
  coordinates: Float64Array,
  pieces: readonly { from: number; to: number }[],
): Triangles {
  const { triangles: corners, halfedges: twins } = new Delaunator(coordinates);
  const recovery = new EdgeRecovery(coordinates, corners, twins);
  for (const { from, to } of pieces) recovery.recover(from, to);
  return { corners, twins };
}
