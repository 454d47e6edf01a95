import type { Length, ResolvedPatch } from "@heddle/kernels/scene";
import { figure } from "../camera/lengths-in-words";
import type { DrawnItem } from "../document/drawing";
import type { Item } from "../document/refs";
import { frameOf } from "../geometry/handles";
import { distance, turn, type Xy } from "../geometry/points";

/** A dimension of the drawing: from one point to another, its line set off to the side of the body. */
export interface Dimension {
  from: Xy;
  to: Xy;
  /** Unit vector in mm space toward which the dimension line is set off. */
  away: Xy;
  text: string;
}

/** More legs than this are not dimensioned one by one. */
const MOST_LEGS = 12;

/** The number, or the expression with its number: "a/2 - gap = 12.3". */
export const dimensionText = (written: Length | undefined, value: number): string =>
  typeof written === "string" ? `${written} = ${figure(value)}` : figure(value);

function frameDimensions(item: DrawnItem, widthText: string, heightText: string): Dimension[] {
  const frame = frameOf(item);
  if (frame === null) return [];
  const { box, centre, angle } = frame;
  const corner = (x: number, y: number): Xy => turn([x, y], centre, angle);
  const direction = (x: number, y: number): Xy => turn([x, y], [0, 0], angle);
  return [
    {
      from: corner(box.left, box.bottom),
      to: corner(box.right, box.bottom),
      away: direction(0, -1),
      text: widthText,
    },
    {
      from: corner(box.left, box.bottom),
      to: corner(box.left, box.top),
      away: direction(-1, 0),
      text: heightText,
    },
  ];
}

function legDimensions(points: readonly Xy[], closed: boolean): Dimension[] {
  const ends = closed ? [...points.slice(1), ...points.slice(0, 1)] : points.slice(1);
  if (ends.length > MOST_LEGS) return [];
  const area = points.reduce((sum, [x, y], i) => {
    const next = points[(i + 1) % points.length] ?? [x, y];
    return sum + x * next[1] - next[0] * y;
  }, 0);
  // Outside of a closed shape: to the right of its legs where it runs counter-clockwise.
  const side = closed && area < 0 ? -1 : 1;
  return ends.flatMap((to, i) => {
    const from = points[i];
    const length = distance(from, to);
    if (length === 0) return [];
    const away: Xy = [(side * (to[1] - from[1])) / length, (-side * (to[0] - from[0])) / length];
    return { from, to, away, text: figure(length) };
  });
}

/** The dimensions of one selected item, with the words of the document beside the figures. */
export function dimensionsOf(item: Item, drawn: DrawnItem): Dimension[] {
  if ("width" in drawn && "width" in item)
    return frameDimensions(
      drawn,
      dimensionText(item.width, drawn.width),
      dimensionText(item.height, drawn.height),
    );
  if ("rx" in drawn && "rx" in item) {
    const double = (written: Length, value: number): string =>
      typeof written === "string" ? `2 × (${written}) = ${figure(2 * value)}` : figure(2 * value);
    if (item.rx === item.ry) return frameDimensions(drawn, `⌀ ${double(item.rx, drawn.rx)}`, "").slice(0, 1);
    return frameDimensions(drawn, double(item.rx, drawn.rx), double(item.ry, drawn.ry));
  }
  if ("from" in drawn) return legDimensions([drawn.from, drawn.to], false);
  if (!("points" in drawn)) return [];
  const patch: Exclude<ResolvedPatch, { kind: "rectangle" | "ellipse" }> = drawn;
  if (patch.kind === "stroke") return [];
  return legDimensions(patch.points, patch.kind === "polygon");
}
