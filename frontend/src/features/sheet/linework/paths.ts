import type { ResolvedPatch } from "@heddle/kernels/scene";
import type { Xy } from "../geometry/points";
import { rectangleCorners } from "../geometry/shapes";

/** Path of a patch in millimetres; areas closed, strokes and lines open. Kept per resolved patch. */
const kept = new WeakMap<ResolvedPatch, Path2D>();

function polyline(path: Path2D, points: readonly Xy[], closed: boolean): void {
  points.forEach(([x, y], i) => {
    if (i === 0) path.moveTo(x, y);
    else path.lineTo(x, y);
  });
  if (closed) path.closePath();
}

function build(patch: ResolvedPatch): Path2D {
  const path = new Path2D();
  switch (patch.kind) {
    case "rectangle":
      polyline(path, rectangleCorners(patch), true);
      break;
    case "ellipse":
      path.ellipse(
        patch.x,
        patch.y,
        Math.max(0, patch.rx),
        Math.max(0, patch.ry),
        (patch.angle * Math.PI) / 180,
        0,
        2 * Math.PI,
      );
      break;
    case "polygon":
      for (const ring of [patch.points, ...patch.holes]) polyline(path, ring, true);
      break;
    default: {
      polyline(path, patch.points, false);
      // A stroke of one point is a dot: a line of no length gets round caps.
      const [first] = patch.points;
      if (patch.points.length === 1) path.lineTo(first[0], first[1]);
    }
  }
  return path;
}

export function pathOf(patch: ResolvedPatch): Path2D {
  let path = kept.get(patch);
  if (path === undefined) {
    path = build(patch);
    kept.set(patch, path);
  }
  return path;
}
