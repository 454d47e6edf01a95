import type { Length, Patch } from "@heddle/kernels/scene";
import type { DrawnItem } from "../document/drawing";
import type { Item } from "../document/refs";
import { frameOf, type Frame, type Handle } from "./handles";
import { roundMm, turn, type Xy } from "./points";

/** The least side that pulling leaves, in mm: a shape never turns inside out or to nothing. */
const LEAST_MM = 1e-3;

interface Span {
  from: number;
  to: number;
}

function pull(span: Span, side: -1 | 0 | 1, to: number, symmetric: boolean): Span {
  const middle = (span.from + span.to) / 2;
  if (side === 0) return span;
  if (side === 1) {
    const far = Math.max(to, (symmetric ? middle : span.from) + LEAST_MM);
    return { from: symmetric ? 2 * middle - far : span.from, to: far };
  }
  const near = Math.min(to, (symmetric ? middle : span.to) - LEAST_MM);
  return { from: near, to: symmetric ? 2 * middle - near : span.to };
}

/** The frame after its handle was pulled to `to`: the opposite side stays where it is on the sheet. */
function pullFrame(frame: Frame, handle: Handle & { kind: "side" }, to: Xy, options: PullOptions): Frame {
  const local = turn(to, frame.centre, -frame.angle);
  let x = pull({ from: frame.box.left, to: frame.box.right }, handle.sx, local[0], options.symmetric);
  let y = pull({ from: frame.box.bottom, to: frame.box.top }, handle.sy, local[1], options.symmetric);
  if (options.proportional && handle.sx !== 0 && handle.sy !== 0) {
    const [width, height] = [frame.box.right - frame.box.left, frame.box.top - frame.box.bottom];
    const factor = Math.max((x.to - x.from) / width, (y.to - y.from) / height);
    x = stretch(x, handle.sx, width * factor, options.symmetric);
    y = stretch(y, handle.sy, height * factor, options.symmetric);
  }
  const centre = turn([(x.from + x.to) / 2, (y.from + y.to) / 2], frame.centre, frame.angle);
  const [halfWidth, halfHeight] = [(x.to - x.from) / 2, (y.to - y.from) / 2];
  return {
    box: {
      left: centre[0] - halfWidth,
      right: centre[0] + halfWidth,
      bottom: centre[1] - halfHeight,
      top: centre[1] + halfHeight,
    },
    centre,
    angle: frame.angle,
  };
}

function stretch(span: Span, side: -1 | 0 | 1, size: number, symmetric: boolean): Span {
  if (symmetric) {
    const middle = (span.from + span.to) / 2;
    return { from: middle - size / 2, to: middle + size / 2 };
  }
  return side === 1 ? { from: span.from, to: span.from + size } : { from: span.to - size, to: span.to };
}

export interface PullOptions {
  /** Keep the proportions (corner handles). */
  proportional: boolean;
  /** Pull both sides about the middle. */
  symmetric: boolean;
}

/** As written where pulling has not changed it, so that an untouched expression survives. */
const keep = (written: Length, before: number, after: number): Length =>
  Math.abs(after - before) < 1e-9 ? written : roundMm(after);

type Point = [Length, Length];

function scaleInto(
  points: readonly Point[],
  drawn: readonly Xy[],
  from: Frame,
  to: Frame,
  pad: number,
): Point[] {
  const map = (value: number, a: Span, b: Span): number =>
    a.to - a.from < 1e-12
      ? (b.from + b.to) / 2
      : b.from + ((value - a.from) * (b.to - b.from)) / (a.to - a.from);
  const inner = (low: number, high: number): Span => ({
    from: low + pad,
    to: Math.max(low + pad, high - pad),
  });
  return points.map((point, i): Point => {
    const at = drawn[i];
    const x = map(at[0], inner(from.box.left, from.box.right), inner(to.box.left, to.box.right));
    const y = map(at[1], inner(from.box.bottom, from.box.top), inner(to.box.bottom, to.box.top));
    return [keep(point[0], at[0], x), keep(point[1], at[1], y)];
  });
}

function withVertex(item: Item, index: number, to: Xy): Item {
  const point: Point = [roundMm(to[0]), roundMm(to[1])];
  if ("from" in item) {
    const ended = item;
    return index === 0 ? { ...ended, from: point } : { ...ended, to: point };
  }
  if (!("points" in item)) return item;
  const replace = (points: readonly Point[], offset: number): Point[] =>
    points.map((old, i) => (i + offset === index ? point : old));
  if (item.kind !== "polygon") return { ...item, points: replace(item.points, 0) };
  let offset = item.points.length;
  const holes = item.holes.map((hole) => {
    const moved = replace(hole, offset);
    offset += hole.length;
    return moved;
  });
  return { ...item, points: replace(item.points, 0), holes };
}

/** The item after one of its handles was pulled to `to`. `item` is as written, `drawn` the same in mm. */
export function pullHandle(item: Item, drawn: DrawnItem, handle: Handle, to: Xy, options: PullOptions): Item {
  if (handle.kind === "vertex") return withVertex(item, handle.index, to);
  const frame = frameOf(drawn);
  if (frame === null) return item;
  const next = pullFrame(frame, handle, to, options);
  const { left, bottom, right, top } = next.box;
  if ("width" in item && "width" in drawn)
    return {
      ...item,
      x: keep(item.x, drawn.x, left),
      y: keep(item.y, drawn.y, bottom),
      width: keep(item.width, drawn.width, right - left),
      height: keep(item.height, drawn.height, top - bottom),
    };
  if ("rx" in item && "rx" in drawn)
    return {
      ...item,
      x: keep(item.x, drawn.x, next.centre[0]),
      y: keep(item.y, drawn.y, next.centre[1]),
      rx: keep(item.rx, drawn.rx, (right - left) / 2),
      ry: keep(item.ry, drawn.ry, (top - bottom) / 2),
    };
  const stroke = item as Patch;
  if (stroke.kind === "stroke" && "points" in drawn && "widthMm" in drawn)
    return { ...stroke, points: scaleInto(stroke.points, drawn.points, frame, next, drawn.widthMm / 2) };
  return item;
}
