import type { ResolvedPatch, ResolvedPort, ResolvedProbe } from "@heddle/kernels/scene";
import { type BoxMm, boxOf, distanceToPolyline, growBox, insideRings, turn, type Xy } from "./points";

type Of<Kind extends ResolvedPatch["kind"]> = Extract<ResolvedPatch, { kind: Kind }>;

export const rectangleCentre = (r: { x: number; y: number; width: number; height: number }): Xy => [
  r.x + r.width / 2,
  r.y + r.height / 2,
];

/** Lower-left, lower-right, upper-right, upper-left, turned about the centre. */
export function rectangleCorners(r: {
  x: number;
  y: number;
  width: number;
  height: number;
  angle?: number;
}): [Xy, Xy, Xy, Xy] {
  const centre = rectangleCentre(r);
  const corner = (x: number, y: number): Xy => turn([x, y], centre, r.angle ?? 0);
  return [
    corner(r.x, r.y),
    corner(r.x + r.width, r.y),
    corner(r.x + r.width, r.y + r.height),
    corner(r.x, r.y + r.height),
  ];
}

function ellipseBox(e: Of<"ellipse">): BoxMm {
  const radians = (e.angle * Math.PI) / 180;
  const halfWidth = Math.hypot(e.rx * Math.cos(radians), e.ry * Math.sin(radians));
  const halfHeight = Math.hypot(e.rx * Math.sin(radians), e.ry * Math.cos(radians));
  return { left: e.x - halfWidth, right: e.x + halfWidth, bottom: e.y - halfHeight, top: e.y + halfHeight };
}

/** The smallest upright box around the patch, a stroke's width included. */
export function patchBox(patch: ResolvedPatch): BoxMm {
  switch (patch.kind) {
    case "rectangle":
      return boxOf(rectangleCorners(patch));
    case "ellipse":
      return ellipseBox(patch);
    case "stroke":
      return growBox(boxOf(patch.points), patch.widthMm / 2);
    default:
      return boxOf(patch.points);
  }
}

/** Whether the area covers the point; a wall or film, which has no area, within `reachMm` of its line. */
export function patchCovers(patch: ResolvedPatch, at: Xy, reachMm: number): boolean {
  switch (patch.kind) {
    case "rectangle": {
      const [x, y] = turn(at, rectangleCentre(patch), -patch.angle);
      return x >= patch.x && x <= patch.x + patch.width && y >= patch.y && y <= patch.y + patch.height;
    }
    case "ellipse": {
      const [x, y] = turn(at, [patch.x, patch.y], -patch.angle);
      if (patch.rx <= 0 || patch.ry <= 0) return false;
      return ((x - patch.x) / patch.rx) ** 2 + ((y - patch.y) / patch.ry) ** 2 <= 1;
    }
    case "polygon":
      return insideRings(at, [patch.points, ...patch.holes]);
    case "stroke":
      return distanceToPolyline(at, patch.points) <= patch.widthMm / 2;
    default:
      return distanceToPolyline(at, patch.points) <= reachMm;
  }
}

export function probeBox(probe: ResolvedProbe): BoxMm {
  if (probe.kind === "point") return boxOf([[probe.x, probe.y]]);
  if (probe.kind === "line") return boxOf([probe.from, probe.to]);
  return boxOf(rectangleCorners(probe));
}

export const portBox = (port: ResolvedPort): BoxMm => boxOf([port.from, port.to]);
