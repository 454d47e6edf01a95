import type { ResolvedPatch } from "@heddle/kernels/scene";
import { rectangleCentre, rectangleCorners } from "./shapes";
import { turn, type Xy } from "./points";

export type KeyPointKind = "corner" | "end" | "centre" | "quadrant";
export interface KeyPoint {
  at: Xy;
  kind: KeyPointKind;
}

const kept = new WeakMap<ResolvedPatch, readonly KeyPoint[]>();

const as =
  (kind: KeyPointKind) =>
  (at: Xy): KeyPoint => ({ at, kind });

function compute(patch: ResolvedPatch): KeyPoint[] {
  switch (patch.kind) {
    case "rectangle":
      return [...rectangleCorners(patch).map(as("corner")), as("centre")(rectangleCentre(patch))];
    case "ellipse": {
      const centre: Xy = [patch.x, patch.y];
      const quadrants: Xy[] = [
        [patch.x + patch.rx, patch.y],
        [patch.x, patch.y + patch.ry],
        [patch.x - patch.rx, patch.y],
        [patch.x, patch.y - patch.ry],
      ];
      return [as("centre")(centre), ...quadrants.map((at) => as("quadrant")(turn(at, centre, patch.angle)))];
    }
    case "polygon":
      return [patch.points, ...patch.holes].flat().map(as("corner"));
    case "stroke":
      // A freehand stroke's inner points are the hand's, not the designer's.
      return [patch.points[0], patch.points.at(-1)].flatMap((at) => (at === undefined ? [] : as("end")(at)));
    default:
      return patch.points.map((at, i) => as(i === 0 || i === patch.points.length - 1 ? "end" : "corner")(at));
  }
}

/** Points of a patch that a designer aims at: corners, ends, centres, an ellipse's quadrants. */
export function keyPointsOf(patch: ResolvedPatch): readonly KeyPoint[] {
  let points = kept.get(patch);
  if (points === undefined) {
    points = compute(patch);
    kept.set(patch, points);
  }
  return points;
}
