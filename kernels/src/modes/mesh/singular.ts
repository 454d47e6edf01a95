/**
 * Places where the field's gradient has no bound or a steep one: re-entrant corners and ends of metal, corners of media of unlike
 * stiffness, borders between electric and magnetic walls on a flat surface. Elements grow geometrically around them
 * (how singular each is: J. Meixner, IEEE Trans. Antennas Propag. 20 (1972) 442).
 */
import type { Drawing } from "./drawing.js";
import { SIDES } from "./drawing.js";
import type { Frame, FrameEdge } from "./frame.js";
import { OUTSIDE } from "./frame.js";

export interface SingularVertex {
  vertex: number;
  /** Exponent p of the field's leading term, F ≈ r^p, where metal alone sets it; smaller is more singular. */
  exponent: number;
}

/** Openings up to this are left alone: it takes in the corners of polygons that stand for curves. */
const FLAT = (216 * Math.PI) / 180;
/** Where an electric wall meets a magnetic one, any opening above this is singular. */
const MIXED = (100 * Math.PI) / 180;
const BENT = (20 * Math.PI) / 180;
/** Ratio of two media's stiffness from which a corner of their border counts. */
const CONTRAST = 1.5;

interface Ray {
  angle: number;
  edge: FrameEdge;
  /** Medium counter-clockwise of the ray. */
  after: number;
}

type Bound = "electric" | "magnetic" | null;

function boundOf(drawing: Drawing, medium: number, edge: FrameEdge): Bound {
  if (edge.wall >= 0) return "electric";
  if (medium === OUTSIDE) {
    const kind = edge.side >= 0 ? drawing.edges[SIDES[edge.side]] : "electric";
    return kind === "magnetic" ? "magnetic" : "electric";
  }
  const { kind } = drawing.media[medium];
  return kind === "fill" ? null : kind;
}

/** A stretch of filled sectors between two conductors, or all around. */
interface Opening {
  angle: number;
  first: Bound;
  last: Bound;
  media: number[];
  /** Directions of the borders inside. */
  borders: number[];
}

function openingsOf(drawing: Drawing, rays: readonly Ray[]): Opening[] {
  const count = rays.length;
  const width = (n: number): number => {
    const turn = rays[(n + 1) % count].angle - rays[n].angle;
    return turn > 0 ? turn : turn + 2 * Math.PI;
  };
  const before = (n: number): number => rays[(n + count - 1) % count].after;
  const filled = (medium: number): boolean => medium !== OUTSIDE && drawing.media[medium].kind === "fill";
  /** What a filled sector ends at, at ray n: null where the fill goes on. */
  const stop = (n: number, beyond: number): Bound => boundOf(drawing, beyond, rays[n].edge);
  const openings: Opening[] = [];
  const starts: number[] = [];
  for (let n = 0; n < count; n += 1) if (filled(rays[n].after) && stop(n, before(n)) !== null) starts.push(n);
  if (starts.length === 0 && rays.every((ray) => filled(ray.after))) {
    openings.push({
      angle: 2 * Math.PI,
      first: null,
      last: null,
      media: rays.map((ray) => ray.after),
      borders: rays.map((ray) => ray.angle),
    });
  }
  for (const start of starts) {
    const opening: Opening = {
      angle: 0,
      first: stop(start, before(start)),
      last: null,
      media: [],
      borders: [],
    };
    for (let step = 0; step < count; step += 1) {
      const n = (start + step) % count;
      opening.angle += width(n);
      opening.media.push(rays[n].after);
      const next = (n + 1) % count;
      opening.last = stop(next, rays[next].after);
      if (opening.last !== null) break;
      opening.borders.push(rays[next].angle);
    }
    openings.push(opening);
  }
  return openings;
}

function exponentOf(opening: Opening, stiffness: (medium: number) => number): number | null {
  const { angle, first, last, media, borders } = opening;
  const unlike = first !== null && last !== null && first !== last;
  const regular = unlike ? MIXED : FLAT;
  const values = media.map(stiffness);
  const contrast = Math.max(...values) / Math.min(...values);
  if (first !== null && angle > regular) return (unlike ? Math.PI / 2 : Math.PI) / angle;
  if (contrast < CONTRAST || borders.length === 0) return null;
  if (first === null && borders.length === 2) {
    const turn = Math.abs(Math.abs(borders[0] - borders[1]) - Math.PI);
    return turn < BENT ? null : 2 / 3;
  }
  const flat = Math.abs(angle - Math.PI) < BENT || Math.abs(angle - Math.PI / 2) < BENT;
  return first !== null && borders.length === 1 && flat ? null : 2 / 3;
}

/**
 * The singular vertices of a frame.
 *
 * @param stiffness the coefficient under ∇F of a medium, up to inversion: ε for TE, μ for TM
 */
export function singularVertices(
  drawing: Drawing,
  frame: Frame,
  stiffness: (medium: number) => number,
): SingularVertex[] {
  const rays = new Map<number, Ray[]>();
  const add = (vertex: number, ray: Ray): void => {
    const list = rays.get(vertex);
    if (list) list.push(ray);
    else rays.set(vertex, [ray]);
  };
  for (const edge of frame.edges) {
    const { vertices } = frame;
    const dx = vertices[2 * edge.to] - vertices[2 * edge.from];
    const dy = vertices[2 * edge.to + 1] - vertices[2 * edge.from + 1];
    add(edge.from, { angle: Math.atan2(dy, dx), edge, after: edge.left });
    add(edge.to, { angle: Math.atan2(-dy, -dx), edge, after: edge.right });
  }
  const found: SingularVertex[] = [];
  for (const [vertex, list] of rays) {
    list.sort((p, q) => p.angle - q.angle);
    const exponents = openingsOf(drawing, list)
      .map((opening) => exponentOf(opening, stiffness))
      .filter((exponent) => exponent !== null);
    if (exponents.length > 0) found.push({ vertex, exponent: Math.min(...exponents) });
  }
  return found;
}
