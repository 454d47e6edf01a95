/**
 * The order in the cell size that a scene's geometry promises: what an extrapolation to zero cell size may count on. The worst
 * feature decides.
 *
 *   - the end of a thin wall or film, staircase metal off the mesh lines: 1 (E ∝ r^−1/2 at an edge);
 *   - a corner of metal into the field, 90°: 4/3 (E ∝ r^−1/3; J. Meixner, IEEE Trans. Antennas Propag. 20 (1972) 442, for the
 *     exponents; from memory), taken for every corner, for blunter ones are better;
 *   - a dielectric interface off the mesh lines where E crosses it (TEz), a magnetic one in TMz: 3/2;
 *   - else 2.
 */
import { cutsCells } from "./metal-cuts.js";
import type { ResolvedPatch, ResolvedScene } from "./schema.js";
import type { Medium } from "./schema-media.js";
import { isPerfect } from "./schema-media.js";

export const EDGE_ORDER = 1;
export const CORNER_ORDER = 4 / 3;
export const INTERFACE_ORDER = 3 / 2;
export const SMOOTH_ORDER = 2;

type Corner = readonly [number, number];

/** Corners nearer than this to the section's edge (as a share of its size) lie on it. */
const ON_EDGE = 1e-9;

/** Corners of a patch that lie inside the section, each with whether the patch's own angle there is under 180°. */
function cornersOf(patch: ResolvedPatch, scene: ResolvedScene): { convex: boolean }[] {
  const { widthMm, heightMm } = scene.section;
  const inside = ([x, y]: Corner): boolean =>
    x > ON_EDGE * widthMm &&
    x < (1 - ON_EDGE) * widthMm &&
    y > ON_EDGE * heightMm &&
    y < (1 - ON_EDGE) * heightMm;
  const ofRing = (ring: readonly Corner[], hole: boolean): { convex: boolean }[] => {
    const twice = ring.reduce((sum, [x, y], n) => {
      const [nextX, nextY] = ring[(n + 1) % ring.length];
      return sum + x * nextY - nextX * y;
    }, 0);
    return ring.flatMap((corner, n) => {
      if (!inside(corner)) return [];
      const before = ring[(n + ring.length - 1) % ring.length];
      const after = ring[(n + 1) % ring.length];
      const turn =
        (corner[0] - before[0]) * (after[1] - corner[1]) - (corner[1] - before[1]) * (after[0] - corner[0]);
      if (turn === 0) return [];
      return [{ convex: (turn > 0 === twice > 0) !== hole }];
    });
  };
  if (patch.kind === "polygon")
    return [...ofRing(patch.points, false), ...patch.holes.flatMap((hole) => ofRing(hole, true))];
  if (patch.kind !== "rectangle") return [];
  const { x, y, width, height, angle } = patch;
  const turn = (angle * Math.PI) / 180;
  const ring = [
    [-0.5, -0.5],
    [0.5, -0.5],
    [0.5, 0.5],
    [-0.5, 0.5],
  ].map(([u, v]): Corner => {
    const [dx, dy] = [u * width, v * height];
    return [
      x + width / 2 + dx * Math.cos(turn) - dy * Math.sin(turn),
      y + height / 2 + dx * Math.sin(turn) + dy * Math.cos(turn),
    ];
  });
  return ofRing(ring, false);
}

const isMetal = (medium: Medium | undefined): boolean =>
  medium !== undefined && isPerfect(medium) && medium.perfect === "electric";

/** Whether metal reaches into the field with a corner. */
function hasMetalCorner(scene: ResolvedScene): boolean {
  let metal = isMetal(scene.mediaById.get(scene.background));
  let openings = 0;
  for (const patch of scene.paint) {
    if (patch.kind === "wall" || patch.kind === "film") continue;
    const corners = cornersOf(patch, scene);
    if (isMetal(scene.mediaById.get(patch.medium))) {
      metal = true;
      if (corners.some(({ convex }) => convex)) return true;
    } else if (metal) {
      openings += 1;
      // Openings that meet make corners that neither has.
      if (corners.some(({ convex }) => !convex) || openings > 1) return true;
    }
  }
  return false;
}

/** Whether a medium meets another of other ε in TEz, of other μ in TMz. */
function hasCrossedInterface(scene: ResolvedScene): boolean {
  const figure = (id: string): number | null => {
    const medium = scene.mediaById.get(id);
    if (!medium || isPerfect(medium)) return null;
    return scene.polarization === "TEz" ? medium.relativePermittivity : medium.relativePermeability;
  };
  const figures = [scene.background, ...scene.paint.flatMap((p) => ("medium" in p ? [p.medium] : []))]
    .map(figure)
    .filter((value) => value !== null);
  return new Set(figures).size > 1;
}

/** What two meshes of a scene can tell. */
export interface MeshPromise {
  /** The order in the cell size. */
  order: number;
  /** Whether the error keeps its sign and factor from mesh to mesh: not where corners of metal lie off the mesh lines. */
  steady: boolean;
}

/** The order that the scene's geometry promises on a mesh of nx × ny cells. */
export function meshPromise(scene: ResolvedScene, nx: number, ny: number): MeshPromise {
  const thin = scene.paint.some(({ kind }) => kind === "wall" || kind === "film");
  const metal = [scene.background, ...scene.paint.flatMap((p) => ("medium" in p ? [p.medium] : []))].some(
    (id) => isMetal(scene.mediaById.get(id)),
  );
  if (thin || (metal && scene.mesh.metal === "staircase")) return { order: EDGE_ORDER, steady: false };
  if (hasMetalCorner(scene)) return { order: CORNER_ORDER, steady: !cutsCells(scene, nx, ny) };
  return { order: hasCrossedInterface(scene) ? INTERFACE_ORDER : SMOOTH_ORDER, steady: true };
}
