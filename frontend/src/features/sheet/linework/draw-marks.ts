import type { ResolvedPort, ResolvedProbe } from "@heddle/kernels/scene";
import { toPx } from "../../../hooks/viewport";
import { figure } from "../camera/lengths-in-words";
import type { Drawing, DrawnSource } from "../document/drawing";
import { type ItemRef, makeRef } from "../document/refs";
import type { Pen } from "./draw-paint";
import { type LabelBoard, labelBoard } from "./draw-labels";
import { strokeOnHalo } from "./draw-text";

const at = (pen: Pen, x: number, y: number): [number, number] => {
  const { xPx, yPx } = toPx(pen.view, { xMm: x, yMm: y });
  return [xPx, yPx];
};

/** "source-1, 2 A": a TMz section is driven by an electric current, a TEz one by a magnetic current in volts. */
export const sourceLabel = (source: DrawnSource, polarization: "TMz" | "TEz"): string => {
  const unit = source.kind === "plane-wave" ? "V/m" : polarization === "TMz" ? "A" : "V";
  return `${source.id}, ${figure(source.amplitude, 6)}\u202f${unit}`;
};

function drawSource(
  pen: Pen,
  source: DrawnSource,
  drawing: Drawing,
  selected: boolean,
  labels: LabelBoard,
): void {
  const { context, palette } = pen;
  const label = sourceLabel(source, drawing.scene.polarization);
  if (source.kind === "plane-wave") {
    drawPlaneWave(pen, source.angle, drawing, label, selected, labels);
    return;
  }
  const [x, y] = at(pen, source.x, source.y);
  context.beginPath();
  context.arc(x, y, 6.5, 0, 2 * Math.PI);
  context.fillStyle = selected ? palette.accent : palette.sheet;
  context.fill();
  strokeOnHalo(pen, 1.3);
  context.beginPath();
  context.arc(x, y, 2, 0, 2 * Math.PI);
  context.fillStyle = selected ? palette.sheet : palette.ink;
  context.fill();
  labels.occupy(x - 7, y - 7, 14, 14);
  labels.add(label, x, y, 12);
}

/** Three fronts and an arrow along the direction of travel, at the side that the wave comes from. */
function drawPlaneWave(
  pen: Pen,
  angle: number,
  drawing: Drawing,
  label: string,
  selected: boolean,
  labels: LabelBoard,
): void {
  const { context, palette, view } = pen;
  const radians = (angle * Math.PI) / 180;
  const [ux, uy] = [Math.cos(radians), -Math.sin(radians)];
  const [cx, cy] = at(pen, drawing.widthMm / 2, drawing.heightMm / 2);
  const back = (Math.min(drawing.widthMm, drawing.heightMm) * view.pxPerMm) / 2 - 24;
  const [x, y] = [cx - ux * back, cy - uy * back];
  context.beginPath();
  for (const along of [0, 5, 10]) {
    context.moveTo(x + ux * along - uy * 16, y + uy * along + ux * 16);
    context.lineTo(x + ux * along + uy * 16, y + uy * along - ux * 16);
  }
  context.moveTo(x + ux * 10, y + uy * 10);
  context.lineTo(x + ux * 34, y + uy * 34);
  strokeOnHalo(pen, 1.2, selected ? palette.accent : palette.ink);
  drawArrowHead(pen, [x + ux * 38, y + uy * 38], [ux, uy], selected ? palette.accent : palette.ink);
  labels.add(label, x, y - 24, 6);
}

/** A slim filled arrowhead with its tip at `tip`, pointing along the unit vector `along`. */
export function drawArrowHead(
  pen: Pen,
  tip: readonly [number, number],
  along: readonly [number, number],
  colour: string,
  lengthPx = 8,
): void {
  const { context } = pen;
  const half = lengthPx * 0.3;
  const [bx, by] = [tip[0] - along[0] * lengthPx, tip[1] - along[1] * lengthPx];
  context.beginPath();
  context.moveTo(tip[0], tip[1]);
  context.lineTo(bx - along[1] * half, by + along[0] * half);
  context.lineTo(bx + along[1] * half, by - along[0] * half);
  context.closePath();
  context.fillStyle = colour;
  context.fill();
}

const INWARD: Record<ResolvedPort["inward"], readonly [number, number]> = {
  "+x": [1, 0],
  "-x": [-1, 0],
  "+y": [0, -1],
  "-y": [0, 1],
};

function drawPort(pen: Pen, port: ResolvedPort, selected: boolean, labels: LabelBoard): void {
  const { context, palette } = pen;
  const [x1, y1] = at(pen, port.from[0], port.from[1]);
  const [x2, y2] = at(pen, port.to[0], port.to[1]);
  const [ux, uy] = INWARD[port.inward];
  const colour = selected ? palette.accent : palette.ink;
  context.beginPath();
  context.moveTo(x1, y1);
  context.lineTo(x2, y2);
  context.lineCap = "butt";
  strokeOnHalo(pen, 3, colour);
  const [mx, my] = [(x1 + x2) / 2, (y1 + y2) / 2];
  context.beginPath();
  context.moveTo(mx, my);
  context.lineTo(mx + ux * 16, my + uy * 16);
  strokeOnHalo(pen, 1.2, colour);
  drawArrowHead(pen, [mx + ux * 22, my + uy * 22], [ux, uy], colour);
  labels.add(port.drive ? `${port.id}, driven` : port.id, mx + ux * 26, my + uy * 26 - 10, 4);
}

/** A probe's flag with its label. */
function drawFlag(
  pen: Pen,
  x: number,
  y: number,
  selected: boolean,
  label: string,
  labels: LabelBoard,
): void {
  const { context, palette } = pen;
  context.beginPath();
  context.moveTo(x, y);
  context.lineTo(x, y - 20);
  strokeOnHalo(pen, 1.2);
  context.beginPath();
  context.moveTo(x, y - 20);
  context.lineTo(x + 14, y - 14.5);
  context.lineTo(x, y - 9);
  context.closePath();
  context.fillStyle = selected ? palette.accent : palette.sheet;
  context.fill();
  strokeOnHalo(pen, 1.1);
  context.beginPath();
  context.arc(x, y, 2.2, 0, 2 * Math.PI);
  context.fillStyle = selected ? palette.accent : palette.ink;
  context.fill();
  labels.occupy(x - 3, y - 21, 18, 24);
  labels.add(label, x, y - 15, 18);
}

function drawProbe(pen: Pen, probe: ResolvedProbe, selected: boolean, labels: LabelBoard): void {
  const { context, palette } = pen;
  const colour = selected ? palette.accent : palette.ink;
  const label = probe.name ?? probe.id;
  if (probe.kind === "point") {
    const [x, y] = at(pen, probe.x, probe.y);
    drawFlag(pen, x, y, selected, label, labels);
    return;
  }
  context.beginPath();
  context.setLineDash([6, 3]);
  if (probe.kind === "area") {
    const [x, y] = at(pen, probe.x, probe.y + probe.height);
    context.rect(x, y, probe.width * pen.view.pxPerMm, probe.height * pen.view.pxPerMm);
    strokeOnHalo(pen, 1, colour);
    context.setLineDash([]);
    drawFlag(pen, x, y, selected, label, labels);
    return;
  }
  const [x1, y1] = at(pen, probe.from[0], probe.from[1]);
  const [x2, y2] = at(pen, probe.to[0], probe.to[1]);
  context.moveTo(x1, y1);
  context.lineTo(x2, y2);
  strokeOnHalo(pen, 1, colour);
  context.setLineDash([]);
  drawFlag(pen, x1, y1, selected, label, labels);
  const length = Math.hypot(x2 - x1, y2 - y1);
  if (length > 1 && probe.quantity === "voltage")
    drawArrowHead(pen, [x2, y2], [(x2 - x1) / length, (y2 - y1) / length], colour);
  if (length > 1 && probe.quantity === "power") {
    // Power counts toward the left of from→to: an arrow in the middle says so.
    const normal = [(y2 - y1) / length, -(x2 - x1) / length] as const;
    const [mx, my] = [(x1 + x2) / 2, (y1 + y2) / 2];
    drawArrowHead(pen, [mx + normal[0] * 12, my + normal[1] * 12], normal, colour);
  }
}

/** Sources, ports and probes; the selected ones filled with the accent. In pixels. Labels come last, where there is room. */
export function drawMarks(pen: Pen, drawing: Drawing, selection: ReadonlySet<ItemRef>): void {
  const labels = labelBoard(pen);
  for (const port of drawing.ports) drawPort(pen, port, selection.has(makeRef("ports", port.id)), labels);
  for (const source of drawing.sources)
    drawSource(pen, source, drawing, selection.has(makeRef("sources", source.id)), labels);
  for (const probe of drawing.probes)
    drawProbe(pen, probe, selection.has(makeRef("probes", probe.id)), labels);
  labels.draw();
}
