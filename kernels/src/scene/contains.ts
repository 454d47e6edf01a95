/** Which medium lies at a point: the point-wise meaning of a scene's paint, before any mesh. */
import type { ResolvedAreaPatch, ResolvedScene } from "./schema.js";
import type { Medium } from "./schema-media.js";

type Point = readonly [number, number];

/** The point in the frame of a shape that is turned by `angle` degrees about (cx, cy). */
const turnedBack = (x: number, y: number, cx: number, cy: number, angle: number): Point => {
  const turn = (-angle * Math.PI) / 180;
  const dx = x - cx;
  const dy = y - cy;
  return [dx * Math.cos(turn) - dy * Math.sin(turn), dx * Math.sin(turn) + dy * Math.cos(turn)];
};

const crossings = (ring: readonly Point[], x: number, y: number): number => {
  let count = 0;
  ring.forEach(([x1, y1], index) => {
    const [x2, y2] = ring[(index + 1) % ring.length];
    if (y1 > y !== y2 > y && x < x1 + ((y - y1) * (x2 - x1)) / (y2 - y1)) count += 1;
  });
  return count;
};

/** Distance in mm from a point to a segment. */
export const distanceToSegmentMm = (x: number, y: number, [x1, y1]: Point, [x2, y2]: Point): number => {
  const length2 = (x2 - x1) ** 2 + (y2 - y1) ** 2;
  const along = length2 === 0 ? 0 : ((x - x1) * (x2 - x1) + (y - y1) * (y2 - y1)) / length2;
  const t = Math.min(1, Math.max(0, along));
  return Math.hypot(x - x1 - t * (x2 - x1), y - y1 - t * (y2 - y1));
};

/** Distance in mm from a point to a line of segments (or to its only point). */
export const distanceToLineMm = (x: number, y: number, points: readonly Point[]): number => {
  const first = points.at(0);
  if (first === undefined) return Number.POSITIVE_INFINITY;
  if (points.length === 1) return Math.hypot(x - first[0], y - first[1]);
  let nearest = Number.POSITIVE_INFINITY;
  for (let index = 1; index < points.length; index++) {
    nearest = Math.min(nearest, distanceToSegmentMm(x, y, points[index - 1], points[index]));
  }
  return nearest;
};

/** Whether an area covers the point (x, y), in mm. */
export const patchContains = (patch: ResolvedAreaPatch, x: number, y: number): boolean => {
  switch (patch.kind) {
    case "rectangle": {
      const [u, v] = turnedBack(x, y, patch.x + patch.width / 2, patch.y + patch.height / 2, patch.angle);
      return Math.abs(u) <= patch.width / 2 && Math.abs(v) <= patch.height / 2;
    }
    case "ellipse": {
      const [u, v] = turnedBack(x, y, patch.x, patch.y, patch.angle);
      return (u / patch.rx) ** 2 + (v / patch.ry) ** 2 <= 1;
    }
    case "polygon":
      return [patch.points, ...patch.holes].reduce((sum, ring) => sum + crossings(ring, x, y), 0) % 2 === 1;
    case "stroke":
      return distanceToLineMm(x, y, patch.points) <= patch.widthMm / 2;
  }
};

/** The medium at a point in mm: of the last area painted over it, else the background. */
export const mediumAt = (
  scene: Pick<ResolvedScene, "paint" | "background" | "mediaById">,
  x: number,
  y: number,
): Medium | undefined => {
  for (let index = scene.paint.length - 1; index >= 0; index--) {
    const patch = scene.paint[index];
    if (patch.kind === "wall" || patch.kind === "film") continue;
    if (patchContains(patch, x, y)) return scene.mediaById.get(patch.medium);
  }
  return scene.mediaById.get(scene.background);
};
