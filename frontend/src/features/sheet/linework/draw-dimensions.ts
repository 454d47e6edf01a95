import { toPx } from "../../../hooks/viewport";
import type { Dimension } from "./dimensions";
import { drawArrowHead } from "./draw-marks";
import type { Pen } from "./draw-paint";
import { drawText, strokeOnHalo, textWidth } from "./draw-text";

const OFFSET_PX = 22;
const GAP_PX = 4;
const OVERSHOOT_PX = 5;
const ARROW_PX = 9;
const TEXT_PX = 12;
/** A shorter dimension is left out: its arrows would cover what they measure. */
const LEAST_PX = 9;

type Px = [number, number];

/** Extension lines, a dimension line with arrows, and the figure on the line, turned to be read from below or right. */
export function drawDimension(pen: Pen, dimension: Dimension, offsetPx = OFFSET_PX): void {
  const { context, palette, view } = pen;
  const from = toPx(view, { xMm: dimension.from[0], yMm: dimension.from[1] });
  const to = toPx(view, { xMm: dimension.to[0], yMm: dimension.to[1] });
  const [dx, dy] = [to.xPx - from.xPx, to.yPx - from.yPx];
  const length = Math.hypot(dx, dy);
  if (length < LEAST_PX || dimension.text === "") return;
  const along: Px = [dx / length, dy / length];
  const away: Px = [dimension.away[0], -dimension.away[1]];
  const at = (base: { xPx: number; yPx: number }, off: number): Px => [
    base.xPx + away[0] * off,
    base.yPx + away[1] * off,
  ];
  const colour = palette.ink;
  context.lineCap = "butt";
  if (offsetPx > 0) {
    context.beginPath();
    for (const end of [from, to]) {
      context.moveTo(...at(end, GAP_PX));
      context.lineTo(...at(end, offsetPx + OVERSHOOT_PX));
    }
    strokeOnHalo(pen, 0.8, colour);
  }
  const [start, end] = [at(from, offsetPx), at(to, offsetPx)];
  const width = textWidth(pen, dimension.text, TEXT_PX);
  const inside = length >= 2 * ARROW_PX + 6;
  const fits = length >= width + 2 * ARROW_PX + 14;
  context.beginPath();
  if (inside) {
    context.moveTo(...start);
    context.lineTo(...end);
  } else {
    // Too tight for arrows within: they point inward from outside, as on any drawing.
    context.moveTo(start[0] - along[0] * 18, start[1] - along[1] * 18);
    context.lineTo(...start);
    context.moveTo(...end);
    context.lineTo(end[0] + along[0] * 18, end[1] + along[1] * 18);
  }
  strokeOnHalo(pen, 0.8, colour);
  const inward = inside ? 1 : -1;
  drawArrowHead(pen, start, [-along[0] * inward, -along[1] * inward], colour, ARROW_PX);
  drawArrowHead(pen, end, [along[0] * inward, along[1] * inward], colour, ARROW_PX);
  drawFigure(pen, dimension.text, { start, end, along, away, fits, width });
}

function drawFigure(
  pen: Pen,
  text: string,
  line: { start: Px; end: Px; along: Px; away: Px; fits: boolean; width: number },
): void {
  const { context, palette } = pen;
  const { start, end, along, away, fits, width } = line;
  let turned = Math.atan2(along[1], along[0]);
  // Never upside down.
  if (turned > Math.PI / 2 + 1e-6 || turned <= -Math.PI / 2 - 1e-6) turned += Math.PI;
  if (Math.abs(turned - Math.PI / 2) < 1e-6) turned = -Math.PI / 2;
  const off = fits ? 0 : 12;
  const middle: Px = [(start[0] + end[0]) / 2 + away[0] * off, (start[1] + end[1]) / 2 + away[1] * off];
  if (fits) {
    // The figure stands on the line, which is broken for it.
    context.save();
    context.translate(...middle);
    context.rotate(turned);
    context.fillStyle = palette.sheet;
    context.fillRect(-width / 2 - 5, -TEXT_PX / 2 - 2, width + 10, TEXT_PX + 4);
    context.restore();
  }
  drawText(pen, text, middle[0], middle[1], { align: "center", sizePx: TEXT_PX, turned });
}
