import type { Drawing } from "../document/drawing";
import { type ItemRef, makeRef } from "../document/refs";
import { keyPointsOf } from "./key-points";
import { distance, roundMm, type Xy } from "./points";

/** What the pointer came to rest on; null where it rests on nothing. */
export type SnapReason = "corner" | "end" | "centre" | "quadrant" | "section" | "source" | "probe" | "grid";

export interface Snapped {
  at: Xy;
  reason: SnapReason | null;
}

export interface SnapOptions {
  gridMm: number;
  /** Reach of points and section edges. */
  reachMm: number;
  /** Items that are moving and must not attract themselves. */
  ignore?: ReadonlySet<ItemRef>;
}

function nearestPoint(drawing: Drawing, at: Xy, options: SnapOptions): Snapped | null {
  let best: Snapped | null = null;
  let reach = options.reachMm;
  const offer = (point: Xy, reason: SnapReason): void => {
    const off = distance(at, point);
    // A later equal wins nothing: corners are offered before centres.
    if (off < reach) {
      reach = off;
      best = { at: point, reason };
    }
  };
  for (const x of [0, drawing.widthMm]) for (const y of [0, drawing.heightMm]) offer([x, y], "section");
  for (const patch of drawing.paint) {
    if (options.ignore?.has(makeRef("paint", patch.id)) === true) continue;
    for (const { at: point, kind } of keyPointsOf(patch)) offer(point, kind);
  }
  for (const source of drawing.sources)
    if (source.kind === "line" && options.ignore?.has(makeRef("sources", source.id)) !== true)
      offer([source.x, source.y], "source");
  for (const probe of drawing.probes)
    if (probe.kind === "point" && options.ignore?.has(makeRef("probes", probe.id)) !== true)
      offer([probe.x, probe.y], "probe");
  return best;
}

/** The nearest key point within reach; else the grid, with the section's edges winning over it. */
export function snapPoint(drawing: Drawing, at: Xy, options: SnapOptions): Snapped {
  const point = nearestPoint(drawing, at, options);
  if (point !== null) return point;
  const along = (value: number, edge: number): { value: number; edge: boolean } => {
    for (const side of [0, edge])
      if (Math.abs(value - side) < options.reachMm) return { value: side, edge: true };
    return { value: roundMm(Math.round(value / options.gridMm) * options.gridMm), edge: false };
  };
  const x = along(at[0], drawing.widthMm);
  const y = along(at[1], drawing.heightMm);
  return { at: [x.value, y.value], reason: x.edge || y.edge ? "section" : "grid" };
}
