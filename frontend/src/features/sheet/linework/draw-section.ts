import type { Edge, EdgeName } from "@heddle/kernels/scene";
import { toPx } from "../../../hooks/viewport";
import type { Drawing } from "../document/drawing";
import type { Pen } from "./draw-paint";

/** Chain line: long dash, gap, dot, gap. */
const CHAIN = [14, 4, 2, 4];
const DOUBLE_GAP_PX = 3;

interface Side {
  from: readonly [number, number];
  to: readonly [number, number];
  /** Unit vector out of the section, in pixels. */
  outward: readonly [number, number];
}

function drawEdge(pen: Pen, side: Side, edge: Edge): void {
  const { context, palette } = pen;
  const line = (offset: number): void => {
    const [dx, dy] = [side.outward[0] * offset, side.outward[1] * offset];
    context.beginPath();
    context.moveTo(side.from[0] + dx, side.from[1] + dy);
    context.lineTo(side.to[0] + dx, side.to[1] + dy);
    context.stroke();
  };
  context.strokeStyle = palette.ink;
  context.lineCap = "butt";
  context.setLineDash(edge === "absorbing" ? CHAIN : []);
  context.lineWidth = edge === "absorbing" ? 1 : 1.3;
  line(edge === "absorbing" ? 0 : 0.5);
  if (edge === "magnetic") line(0.5 + DOUBLE_GAP_PX);
  context.setLineDash([]);
}

/** The section's outline, each edge by what it is: chain absorbing, solid electric, double magnetic. In pixels. */
export function drawSection(pen: Pen, drawing: Drawing): void {
  const snap = (px: number): number => Math.round(px * pen.pixelRatio) / pen.pixelRatio;
  const low = toPx(pen.view, { xMm: 0, yMm: 0 });
  const high = toPx(pen.view, { xMm: drawing.widthMm, yMm: drawing.heightMm });
  const [left, right] = [snap(low.xPx), snap(high.xPx)];
  const [top, bottom] = [snap(high.yPx), snap(low.yPx)];
  const sides: Record<EdgeName, Side> = {
    left: { from: [left, bottom], to: [left, top], outward: [-1, 0] },
    right: { from: [right, bottom], to: [right, top], outward: [1, 0] },
    bottom: { from: [left, bottom], to: [right, bottom], outward: [0, 1] },
    top: { from: [left, top], to: [right, top], outward: [0, -1] },
  };
  for (const name of ["left", "right", "bottom", "top"] as const)
    drawEdge(pen, sides[name], drawing.scene.edges[name]);
}
