import { toPx } from "../../../hooks/viewport";
import { drawnItem } from "../document/drawing";
import { findItem, onlyRef } from "../document/refs";
import type { SheetState } from "../document/store";
import { handlesOf } from "../geometry/handles";
import { measureParts } from "../tools/measure/measuring";
import type { ToolPicture } from "../tools/tool";
import { dimensionsOf } from "./dimensions";
import { drawDimension } from "./draw-dimensions";
import { drawGhost, inMillimetres, inPixels, type Pen } from "./draw-paint";
import { drawText, strokeOnHalo } from "./draw-text";
import { bandMiddleGHz } from "./hatch";
import { pathOf } from "./paths";

const HANDLE_PX = 7;

function outlineSelected(pen: Pen, state: SheetState): void {
  const { context, palette, view } = pen;
  inMillimetres(pen);
  for (const patch of state.drawing.paint) {
    if (!state.selection.has(`paint:${patch.id}`)) continue;
    const path = pathOf(patch);
    context.lineJoin = "round";
    context.lineCap = "round";
    if (patch.kind === "stroke") {
      // The rim of the stroke: a wide line with its body taken out again, so only drawn as two thin haloed lines.
      context.globalAlpha = 0.35;
      context.strokeStyle = palette.accent;
      context.lineWidth = patch.widthMm;
      context.stroke(path);
      context.globalAlpha = 1;
    }
    context.strokeStyle = palette.sheet;
    context.lineWidth = 4 / view.pxPerMm;
    context.stroke(path);
    context.strokeStyle = palette.accent;
    context.lineWidth = 1.6 / view.pxPerMm;
    context.stroke(path);
  }
  inPixels(pen);
}

function drawHandles(pen: Pen, state: SheetState): void {
  const { context, palette, view } = pen;
  const only = onlyRef(state.selection);
  if (state.readOnly || only === undefined) return;
  const item = drawnItem(state.drawing, only);
  if (item === null) return;
  for (const handle of handlesOf(item)) {
    const { xPx, yPx } = toPx(view, { xMm: handle.at[0], yMm: handle.at[1] });
    context.beginPath();
    if (handle.kind === "vertex") context.arc(xPx, yPx, HANDLE_PX / 2, 0, 2 * Math.PI);
    else context.rect(xPx - HANDLE_PX / 2, yPx - HANDLE_PX / 2, HANDLE_PX, HANDLE_PX);
    context.fillStyle = palette.sheet;
    context.fill();
    context.strokeStyle = palette.accent;
    context.lineWidth = 1.4;
    context.stroke();
  }
}

function drawSelectedDimensions(pen: Pen, state: SheetState): void {
  const only = onlyRef(state.selection);
  if (only === undefined) return;
  const [item, drawn] = [findItem(state.document, only), drawnItem(state.drawing, only)];
  if (item === undefined || drawn === null) return;
  for (const dimension of dimensionsOf(item, drawn)) drawDimension(pen, dimension);
}

/** Selected items: outline, handles, dimensions. Leaves the pen in pixels. */
export function drawSelection(pen: Pen, state: SheetState): void {
  if (state.selection.size === 0) return;
  outlineSelected(pen, state);
  drawSelectedDimensions(pen, state);
  drawHandles(pen, state);
}

/** What the tool at work shows: marquee, rubber lines, ghost, measure, snap mark, brush tip. */
export function drawToolPicture(pen: Pen, picture: ToolPicture, state: SheetState): void {
  const { context, palette, view } = pen;
  const px = ([x, y]: readonly [number, number]): [number, number] => {
    const at = toPx(view, { xMm: x, yMm: y });
    return [at.xPx, at.yPx];
  };
  if (picture.ghost !== undefined) {
    const { patch, medium } = picture.ghost;
    const GHz = bandMiddleGHz(state.document.band);
    drawGhost(pen, patch, medium === null ? undefined : state.drawing.mediaById.get(medium), GHz);
  }
  if (picture.marquee !== undefined) {
    const [left, top] = px([picture.marquee.left, picture.marquee.top]);
    const [right, bottom] = px([picture.marquee.right, picture.marquee.bottom]);
    context.globalAlpha = 0.08;
    context.fillStyle = palette.accent;
    context.fillRect(left, top, right - left, bottom - top);
    context.globalAlpha = 1;
    context.beginPath();
    context.rect(left, top, right - left, bottom - top);
    context.setLineDash([4, 3]);
    strokeOnHalo(pen, 1, palette.accent);
    context.setLineDash([]);
  }
  for (const { points, closed } of picture.lines ?? []) {
    context.beginPath();
    points.forEach((point, i) => {
      if (i === 0) context.moveTo(...px(point));
      else context.lineTo(...px(point));
    });
    if (closed) context.closePath();
    strokeOnHalo(pen, 1.3, palette.accent);
    const [a, b] = [points.at(-2), points.at(-1)];
    if (a !== undefined && b !== undefined)
      drawDimension(pen, { from: a, to: b, away: [0, 0], text: measureParts({ from: a, to: b }).length }, 0);
  }
  if (picture.measure !== undefined) {
    const { from, to } = picture.measure;
    const { length, parts } = measureParts(picture.measure);
    drawDimension(pen, { from, to, away: [0, 1], text: length }, 0);
    const [x, y] = px(to);
    drawText(pen, parts, x + 12, y + 16, { sizePx: 11 });
  }
  if (picture.snap !== undefined && picture.snap.reason !== "grid")
    drawSnap(pen, px(picture.snap.at), picture.snap.reason);
  else if (picture.snap !== undefined) drawCross(pen, px(picture.snap.at));
  if (picture.brush !== undefined) {
    const [x, y] = px(picture.brush.at);
    context.beginPath();
    context.arc(x, y, Math.max(1.5, (picture.brush.widthMm * view.pxPerMm) / 2), 0, 2 * Math.PI);
    strokeOnHalo(pen, 1.2, palette.accent);
  }
}

function drawCross(pen: Pen, [x, y]: [number, number]): void {
  const { context, palette } = pen;
  context.beginPath();
  context.moveTo(x - 4, y);
  context.lineTo(x + 4, y);
  context.moveTo(x, y - 4);
  context.lineTo(x, y + 4);
  strokeOnHalo(pen, 1, palette.accent);
}

const REASONS = {
  corner: "corner",
  end: "end",
  centre: "centre",
  quadrant: "quadrant",
  section: "section edge",
  source: "source",
  probe: "probe",
  grid: "",
} as const;

function drawSnap(pen: Pen, [x, y]: [number, number], reason: keyof typeof REASONS): void {
  const { context, palette } = pen;
  context.beginPath();
  context.rect(x - 4.5, y - 4.5, 9, 9);
  strokeOnHalo(pen, 1.3, palette.accent);
  drawText(pen, REASONS[reason], x + 10, y + 14, { sizePx: 11, colour: palette.accent });
}
