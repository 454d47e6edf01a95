/**
 * Corners of drawn metal that reach into the field: where E is singular, whatever the mesh. Found on the drawing itself, so that
 * overlapping patches make one outline.
 */
import { distanceToLineMm, mediumAt } from "./contains.js";
import type { ResolvedScene } from "./schema.js";
import { isPerfect } from "./schema-media.js";

/** A corner whose sides are straight, and the medium between them one, out to `reachMm`; 0 where something is nearer than that. */
export interface MetalCorner {
  x: number;
  y: number;
  /** Radians from +x, counter-clockwise: the field lies between `from` and `from + opening`. */
  from: number;
  /** Radians, above π up to 2π. */
  opening: number;
  reachMm: number;
}

const SAMPLES = 96;
const BISECTIONS = 40;
/** Sides are told apart from curves by their angles agreeing within this, in radians. */
const STRAIGHT = 1e-6;
/** Field angles less than this above π bend E too little to matter. */
const LEAST_BEND = 0.05;
const MOST_CORNERS = 500;
/** Corners nearer than this to the section's edge (as a share of its width) lie on it. */
const ON_EDGE = 1e-9;

/** Sides are looked at from the whole reach down to this share of it, by this factor each time. */
const LEAST_REACH = 0.25;
const SHORTER = 0.75;
/** What a corner is as such shows at this share of the reach. */
const AT_CORNER = 0.01;

/** The drawing around a point: 1 in metal, else the index of its medium. */
type Around = (x: number, y: number) => number;

function aroundOf(scene: ResolvedScene): Around {
  const ids = [...scene.mediaById.values()];
  return (x, y) => {
    const medium = mediumAt(scene, x, y);
    if (medium === undefined) return 0;
    return isPerfect(medium) ? (medium.perfect === "electric" ? 1 : -1) : 2 + ids.indexOf(medium);
  };
}

interface Sector {
  from: number;
  opening: number;
  medium: number;
}

/** The one field sector on a circle about a point; null where there is none or more than one, or several media in it. */
function sectorOn(around: Around, x: number, y: number, radius: number): Sector | null {
  const at = (phi: number): number => around(x + radius * Math.cos(phi), y + radius * Math.sin(phi));
  const step = (2 * Math.PI) / SAMPLES;
  // Off the axes by an odd share of a step, so that no sample lies on a side.
  const offset = 0.3719 * step;
  const media = Array.from({ length: SAMPLES }, (_, n) => at(offset + n * step));
  const changes = media.flatMap((medium, n) => (medium !== media[(n + 1) % SAMPLES] ? [n] : []));
  if (changes.length !== 2) return null;
  const ends = changes.map((n) => {
    let [low, high] = [offset + n * step, offset + (n + 1) * step];
    for (let i = 0; i < BISECTIONS; i += 1) {
      const middle = (low + high) / 2;
      if (at(middle) === media[n]) low = middle;
      else high = middle;
    }
    return (low + high) / 2;
  });
  // From metal into the field, counter-clockwise.
  const start = changes.findIndex((n) => media[n] === 1);
  if (start < 0) return null;
  const medium = media[(changes[start] + 1) % SAMPLES];
  const from = ends[start];
  const opening = (ends[1 - start] - from + 4 * Math.PI) % (2 * Math.PI);
  return medium >= 2 ? { from, opening, medium } : null;
}

function verticesOf(scene: ResolvedScene): [number, number][] {
  const found: [number, number][] = [];
  for (const patch of scene.paint) {
    if (patch.kind === "polygon") {
      for (const ring of [patch.points, ...patch.holes]) for (const [x, y] of ring) found.push([x, y]);
    } else if (patch.kind === "rectangle") {
      const { x, y, width, height, angle } = patch;
      const turn = (angle * Math.PI) / 180;
      for (const [u, v] of [
        [-0.5, -0.5],
        [0.5, -0.5],
        [0.5, 0.5],
        [-0.5, 0.5],
      ]) {
        const [dx, dy] = [u * width, v * height];
        found.push([
          x + width / 2 + dx * Math.cos(turn) - dy * Math.sin(turn),
          y + height / 2 + dx * Math.sin(turn) + dy * Math.cos(turn),
        ]);
      }
    }
  }
  return found;
}

/** The sector that holds out to a reach; null where the sides bend, or another thing stands, within it. */
function straightSector(around: Around, x: number, y: number, reach: number): Sector | null {
  const outer = sectorOn(around, x, y, reach);
  if (!outer) return null;
  const same = [0.6, 0.3].every((share) => {
    const inner = sectorOn(around, x, y, share * reach);
    return (
      inner !== null &&
      inner.medium === outer.medium &&
      Math.abs(inner.from - outer.from) < STRAIGHT &&
      Math.abs(inner.opening - outer.opening) < STRAIGHT
    );
  });
  return same ? outer : null;
}

function cornerAt(around: Around, x: number, y: number, reachMm: number, freeMm: number): MetalCorner | null {
  for (let reach = Math.min(reachMm, 0.999 * freeMm); reach > LEAST_REACH * reachMm; reach *= SHORTER) {
    const sector = straightSector(around, x, y, reach);
    if (!sector) continue;
    const { from, opening } = sector;
    return opening > Math.PI + LEAST_BEND ? { x, y, from, opening, reachMm: reach } : null;
  }
  const bare = sectorOn(around, x, y, Math.min(AT_CORNER * reachMm, 0.5 * freeMm));
  if (!bare || bare.opening <= Math.PI + LEAST_BEND) return null;
  return { x, y, from: bare.from, opening: bare.opening, reachMm: 0 };
}

/** Whether nothing but one filling medium lies on circles about a point out to `radius`. */
function isUniform(around: Around, x: number, y: number, radius: number): boolean {
  const own = around(x, y);
  return (
    own >= 2 &&
    [1, 0.6, 0.3].every((share) =>
      Array.from({ length: SAMPLES }, (_, n) => (2 * Math.PI * n) / SAMPLES).every(
        (phi) => around(x + share * radius * Math.cos(phi), y + share * radius * Math.sin(phi)) === own,
      ),
    )
  );
}

/** Free ends of thin walls: corners with the whole turn about them. */
function wallEnds(scene: ResolvedScene, around: Around, reachMm: number): MetalCorner[] {
  const { widthMm, heightMm } = scene.section;
  const walls = scene.paint.flatMap((patch) => (patch.kind === "wall" ? [patch.points] : []));
  return walls.flatMap((points, index) =>
    [points, [...points].reverse()].flatMap(([end, next, ...rest]): MetalCorner[] => {
      const [x, y] = end;
      const freeMm = Math.min(x, widthMm - x, y, heightMm - y);
      const others = walls.filter((_, other) => other !== index);
      const nearest = Math.min(...others.map((other) => distanceToLineMm(x, y, other)));
      // An end on another wall, or on the section's edge, is none.
      if (!(freeMm > ON_EDGE * widthMm) || nearest < ON_EDGE * widthMm) return [];
      const own = rest.length > 0 ? distanceToLineMm(x, y, [next, ...rest]) : Number.POSITIVE_INFINITY;
      const straight = Math.hypot(next[0] - x, next[1] - y);
      let reach = Math.min(reachMm, 0.999 * freeMm, 0.999 * nearest, straight, own);
      while (reach > LEAST_REACH * reachMm && !isUniform(around, x, y, reach)) reach *= SHORTER;
      if (!isUniform(around, x, y, Math.min(reach, AT_CORNER * reachMm))) return [];
      const from = Math.atan2(next[1] - y, next[0] - x);
      return [{ x, y, from, opening: 2 * Math.PI, reachMm: reach > LEAST_REACH * reachMm ? reach : 0 }];
    }),
  );
}

/**
 * All corners of metal inside the section about which the field has more than a half-plane, free ends of thin walls among them.
 *
 * @param reachMm how far sides are followed; each corner has at most half the way to the next one
 */
export function metalCorners(scene: ResolvedScene, reachMm: number): MetalCorner[] {
  const around = aroundOf(scene);
  const { widthMm, heightMm } = scene.section;
  const seen = new Set<string>();
  const corners: MetalCorner[] = wallEnds(scene, around, reachMm);
  for (const [x, y] of verticesOf(scene)) {
    const key = `${x.toFixed(9)} ${y.toFixed(9)}`;
    const freeMm = Math.min(x, widthMm - x, y, heightMm - y);
    if (seen.has(key) || corners.length >= MOST_CORNERS || !(freeMm > ON_EDGE * widthMm)) continue;
    seen.add(key);
    const corner = cornerAt(around, x, y, reachMm, freeMm);
    if (corner) corners.push(corner);
  }
  return corners.map((corner) => {
    const others = corners.filter((other) => other !== corner);
    const nearest = Math.min(...others.map((other) => Math.hypot(other.x - corner.x, other.y - corner.y)));
    return { ...corner, reachMm: Math.min(corner.reachMm, nearest / 2) };
  });
}
