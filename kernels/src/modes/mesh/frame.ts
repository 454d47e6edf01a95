/** The lines that elements must follow: surfaces of conductors, borders of media, thin lines and the section's edges. */
import type { Raster } from "../../geometry/index.js";
import type { Segment } from "./arrangement.js";
import { arrange, OUTLINE } from "./arrangement.js";
import type { Drawing } from "./drawing.js";
import { SIDES } from "./drawing.js";
import { MediumLocator } from "./medium-locator.js";

/** Beside the section's edges there is no medium. */
export const OUTSIDE = -1;

export interface FrameEdge {
  from: number;
  to: number;
  /** Media left and right of from→to. */
  left: number;
  right: number;
  /** Index of a side of the section, or −1. */
  side: number;
  /** Index of a perfectly conducting thin line, or −1. */
  wall: number;
  /** Index of a film, or −1. */
  film: number;
}

export interface Frame {
  /** x, y of vertex n at 2n, 2n + 1 (mm). */
  vertices: number[];
  edges: FrameEdge[];
  locator: MediumLocator;
}

/** Vertices closer than this share of a leg are one. */
const MERGE = 1e-5;
/** Sides of an edge are looked at this share of its length (or of a leg) away from its middle. */
const BESIDE = 1e-3;

export const isFill = (drawing: Drawing, medium: number): boolean =>
  medium !== OUTSIDE && drawing.media[medium].kind === "fill";

function segmentsOf(drawing: Drawing): Segment[] {
  const { widthMm: w, heightMm: h } = drawing;
  const segments: Segment[] = [];
  // The section's edges come first: their corners are exact.
  const corners: Record<(typeof SIDES)[number], [number, number, number, number]> = {
    left: [0, 0, 0, h],
    right: [w, 0, w, h],
    bottom: [0, 0, w, 0],
    top: [0, h, w, h],
  };
  SIDES.forEach((side, index) => {
    const [ax, ay, bx, by] = corners[side];
    segments.push({ ax, ay, bx, by, tag: index });
  });
  for (const { shape } of drawing.areas) {
    if (shape.kind !== "polygon") continue;
    for (const ring of [shape.points, ...shape.holes]) {
      let [ax, ay] = ring[ring.length - 1];
      for (const [bx, by] of ring) {
        segments.push({ ax, ay, bx, by, tag: OUTLINE });
        ax = bx;
        ay = by;
      }
    }
  }
  drawing.lines.forEach((line, index) => {
    for (let n = 1; n < line.points.length; n += 1) {
      const [ax, ay] = line.points[n - 1];
      const [bx, by] = line.points[n];
      segments.push({ ax, ay, bx, by, tag: SIDES.length + index });
    }
  });
  return segments;
}

/** Builds the frame for elements with legs of `legMm`. */
export function buildFrame(drawing: Drawing, legMm: number, raster: Raster): Frame {
  const { widthMm, heightMm } = drawing;
  const { vertices, edges } = arrange(segmentsOf(drawing), widthMm, heightMm, 2 * legMm, MERGE * legMm);
  const locator = new MediumLocator(drawing.areas, drawing.background, raster);
  const xs: number[] = [];
  const ys: number[] = [];
  for (const { from, to } of edges) {
    const dx = vertices[2 * to] - vertices[2 * from];
    const dy = vertices[2 * to + 1] - vertices[2 * from + 1];
    const length = Math.hypot(dx, dy);
    const step = (BESIDE * Math.min(length, legMm)) / length;
    for (const way of [1, -1]) {
      xs.push((vertices[2 * from] + vertices[2 * to]) / 2 - way * dy * step);
      ys.push((vertices[2 * from + 1] + vertices[2 * to + 1]) / 2 + way * dx * step);
    }
  }
  const media = locator.locate(xs, ys);
  const besides = (n: number): number =>
    xs[n] < 0 || xs[n] > widthMm || ys[n] < 0 || ys[n] > heightMm ? OUTSIDE : media[n];
  const kept: FrameEdge[] = [];
  edges.forEach(({ from, to, tags }, index) => {
    const left = besides(2 * index);
    const right = besides(2 * index + 1);
    const lines = tags.filter((tag) => tag >= SIDES.length).map((tag) => tag - SIDES.length);
    const edge: FrameEdge = {
      from,
      to,
      left,
      right,
      side: tags.find((tag) => tag >= 0 && tag < SIDES.length) ?? -1,
      wall: lines.find((line) => drawing.lines[line].ohmsPerSquare === null) ?? -1,
      film: lines.find((line) => drawing.lines[line].ohmsPerSquare !== null) ?? -1,
    };
    const open = isFill(drawing, left) || isFill(drawing, right);
    if (edge.side >= 0 || (open && (left !== right || lines.length > 0))) kept.push(edge);
  });
  return { vertices, edges: kept, locator };
}
