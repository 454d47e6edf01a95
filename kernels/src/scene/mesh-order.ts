/** What two meshes of a scene can tell: the order in the cell size that its geometry promises. The worst feature decides. */
import { metalCorners } from "./metal-corners.js";
import { cutsCells } from "./metal-cuts.js";
import type { ResolvedScene } from "./schema.js";
import type { Medium } from "./schema-media.js";
import { isPerfect } from "./schema-media.js";

/** The end of a film, the bend of a thin wall, E ∝ r^−1/2; staircase metal off the mesh lines. */
const EDGE_ORDER = 1;
/**
 * A corner of metal of 90° where the lattice does not follow its field (J. Meixner, IEEE Trans. Antennas Propag. 20 (1972) 442; from memory). It
 * does (media/corner-links.ts), and more than this is seen; but it is what can be promised, for ends of thin walls too.
 */
const CORNER_ORDER = 4 / 3;
/** A dielectric interface off the mesh lines that E crosses (TEz), a magnetic one that H crosses (TMz). */
const INTERFACE_ORDER = 3 / 2;
const SMOOTH_ORDER = 2;

/** The singular field of a corner is followed out to this many cells where nothing stands nearer. */
export const CORNER_CELLS = 5;
/** A corner that has fewer to itself errs by where in its cell it lies. */
const STEADY_CELLS = 2;

export interface MeshPromise {
  order: number;
  /** Whether the error keeps its sign and factor from mesh to mesh: not where corners without room lie off the mesh lines. */
  steady: boolean;
}

const isMetal = (medium: Medium | undefined): boolean =>
  medium !== undefined && isPerfect(medium) && medium.perfect === "electric";

const mediaOf = (scene: ResolvedScene): string[] => [
  scene.background,
  ...scene.paint.flatMap((patch) => ("medium" in patch ? [patch.medium] : [])),
];

/** Whether a medium meets another of other ε in TEz, of other μ in TMz. */
function hasCrossedInterface(scene: ResolvedScene): boolean {
  const figures = mediaOf(scene).flatMap((id) => {
    const medium = scene.mediaById.get(id);
    if (!medium || isPerfect(medium)) return [];
    return [scene.polarization === "TEz" ? medium.relativePermittivity : medium.relativePermeability];
  });
  return new Set(figures).size > 1;
}

/** The promise of the scene's geometry on a mesh of nx × ny cells. */
export function meshPromise(scene: ResolvedScene, nx: number, ny: number): MeshPromise {
  const thin = scene.paint.some(
    (patch) => patch.kind === "film" || (patch.kind === "wall" && patch.points.length > 2),
  );
  const walls = scene.paint.some(({ kind }) => kind === "wall");
  const metal = walls || mediaOf(scene).some((id) => isMetal(scene.mediaById.get(id)));
  if (thin || (metal && scene.mesh.metal === "staircase")) return { order: EDGE_ORDER, steady: false };
  const cellMm = Math.max(scene.section.widthMm / nx, scene.section.heightMm / ny);
  const corners = metal ? metalCorners(scene, CORNER_CELLS * cellMm) : [];
  if (corners.length > 0) {
    const roomy = corners.every(({ reachMm }) => reachMm >= STEADY_CELLS * cellMm);
    return { order: CORNER_ORDER, steady: roomy || !cutsCells(scene, nx, ny) };
  }
  return { order: hasCrossedInterface(scene) ? INTERFACE_ORDER : SMOOTH_ORDER, steady: true };
}
