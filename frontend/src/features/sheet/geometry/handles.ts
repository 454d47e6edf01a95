import type { ResolvedPatch } from "@heddle/kernels/scene";
import type { DrawnItem } from "../document/drawing";
import { boxOf, growBox, turn, type BoxMm, type Xy } from "./points";
import { rectangleCentre } from "./shapes";

/** A handle of the item's box, by the side it moves (−1 left or bottom, 0 neither, 1 right or top), or one of its points. */
export type Handle =
  | { kind: "side"; sx: -1 | 0 | 1; sy: -1 | 0 | 1; at: Xy; angle: number }
  | { kind: "vertex"; index: number; at: Xy };

const SIDES: readonly (readonly [-1 | 0 | 1, -1 | 0 | 1])[] = [
  [-1, -1],
  [0, -1],
  [1, -1],
  [1, 0],
  [1, 1],
  [0, 1],
  [-1, 1],
  [-1, 0],
];

/** Beyond this a point a handle would cover the shape; the numbers and the box remain. */
const MOST_VERTICES = 80;

/** The box that an item's side handles pull, in the item's own turned frame. */
export interface Frame {
  box: BoxMm;
  centre: Xy;
  angle: number;
}

export function frameOf(item: DrawnItem): Frame | null {
  if (!("kind" in item)) return null;
  switch (item.kind) {
    case "rectangle":
    case "area": {
      const angle = item.kind === "rectangle" ? item.angle : 0;
      const box = { left: item.x, bottom: item.y, right: item.x + item.width, top: item.y + item.height };
      return { box, centre: rectangleCentre(item), angle };
    }
    case "ellipse": {
      const box = {
        left: item.x - item.rx,
        bottom: item.y - item.ry,
        right: item.x + item.rx,
        top: item.y + item.ry,
      };
      return { box, centre: [item.x, item.y], angle: item.angle };
    }
    case "stroke": {
      const box = growBox(boxOf(item.points), item.widthMm / 2);
      return { box, centre: [(box.left + box.right) / 2, (box.bottom + box.top) / 2], angle: 0 };
    }
    default:
      return null;
  }
}

function sideHandles({ box, centre, angle }: Frame): Handle[] {
  const [halfWidth, halfHeight] = [(box.right - box.left) / 2, (box.top - box.bottom) / 2];
  return SIDES.map(([sx, sy]) => ({
    kind: "side",
    sx,
    sy,
    angle,
    at: turn([centre[0] + sx * halfWidth, centre[1] + sy * halfHeight], centre, angle),
  }));
}

const vertexHandles = (points: readonly Xy[]): Handle[] =>
  points.length > MOST_VERTICES ? [] : points.map((at, index) => ({ kind: "vertex", index, at }));

/** The vertices that can be pulled one by one: outline, then holes; the ends of ports and line probes. */
export function verticesOf(item: DrawnItem): Xy[] {
  if ("from" in item) return [item.from, item.to];
  const patch = item as ResolvedPatch;
  if (patch.kind === "polygon") return [patch.points, ...patch.holes].flat();
  return patch.kind === "wall" || patch.kind === "film" ? patch.points : [];
}

export function handlesOf(item: DrawnItem): Handle[] {
  const frame = frameOf(item);
  return frame === null ? vertexHandles(verticesOf(item)) : sideHandles(frame);
}
