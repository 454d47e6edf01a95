/**
 * Whether the drawn metal of a scene leaves the mesh lines, so that conformal cells are cut by it: known from the paint alone, so
 * that the time step is known before any geometry is computed.
 */
import { COMPUTED } from "./features.js";
import type { ResolvedPatch, ResolvedScene } from "./schema.js";
import { isPerfect } from "./schema-media.js";

type Drawn = Pick<ResolvedScene, "paint" | "mediaById" | "background" | "mesh" | "section">;

/** Corners this near to a mesh line (in cells) lie on it. */
const ON_LINE = 1e-6;

type Corner = readonly [number, number];

/** Rings of an area whose outline can lie on mesh lines; null for one that cannot. */
function ringsOf(patch: ResolvedPatch): (readonly Corner[])[] | null {
  switch (patch.kind) {
    case "rectangle": {
      const { x, y, width, height, angle } = patch;
      if (angle % 180 !== 0) return null;
      return [
        [
          [x, y],
          [x + width, y],
          [x + width, y + height],
          [x, y + height],
        ],
      ];
    }
    case "polygon":
      return [patch.points, ...patch.holes];
    case "wall":
      // There and back, so that it is a ring too.
      return [[...patch.points, ...[...patch.points].reverse()]];
    default:
      return null;
  }
}

/** Whether every side of the patch runs along a mesh line or outside the section. */
function isOnLines(patch: ResolvedPatch, nx: number, ny: number, section: Drawn["section"]): boolean {
  const rings = ringsOf(patch);
  if (!rings) return false;
  const onLine = (cells: number, count: number): boolean =>
    cells <= ON_LINE || cells >= count - ON_LINE || Math.abs(cells - Math.round(cells)) < ON_LINE;
  return rings.every((ring) =>
    ring.every(([x, y], n) => {
      const [nextX, nextY] = ring[(n + 1) % ring.length];
      const i = (x / section.widthMm) * nx;
      const j = (y / section.heightMm) * ny;
      const straight =
        Math.abs(i - (nextX / section.widthMm) * nx) < ON_LINE ||
        Math.abs(j - (nextY / section.heightMm) * ny) < ON_LINE;
      return straight && onLine(i, nx) && onLine(j, ny);
    }),
  );
}

/** Whether the engine cuts metal along its drawn edge in this scene. */
export const hasConformalMetal = ({ mesh }: Pick<ResolvedScene, "mesh">): boolean =>
  mesh.metal === "conformal" && COMPUTED.has("conformal-metal");

/** Whether conformal metal cuts cells of the mesh of nx × ny cells. What lies over metal counts as its edge. */
export function cutsCells(scene: Drawn, nx: number, ny: number): boolean {
  if (!hasConformalMetal(scene)) return false;
  const isMetal = (id: string): boolean => {
    const medium = scene.mediaById.get(id);
    return medium !== undefined && isPerfect(medium) && medium.perfect === "electric";
  };
  let metal = isMetal(scene.background);
  for (const patch of scene.paint) {
    if (patch.kind === "film") continue;
    metal ||= patch.kind === "wall" || isMetal(patch.medium);
    if (metal && !isOnLines(patch, nx, ny, scene.section)) return true;
  }
  return false;
}
