import { toMm, toPx } from "../../../hooks/viewport";
import { figure, lengthInWords } from "../camera/lengths-in-words";
import { isMultiple, multiplesWithin, scaleBarMm, tickSteps } from "../camera/ticks";
import type { Drawing } from "../document/drawing";
import type { Pen } from "./draw-paint";
import { drawText } from "./draw-text";

/** Width of the ruler bands along the top and the left, inside the frame. */
export const RULER_PX = 22;
const TICK_PX = { labelled: 9, middle: 6, minor: 3.5 } as const;
const LABEL_PX = 10.5;

interface Band {
  /** Pixel of a millimetre along the band. */
  place: (mm: number) => number;
  fromMm: number;
  toMm: number;
  /** End of the section along the band, in mm; it begins at 0. */
  lengthMm: number;
  cursorPx: number | null;
  vertical: boolean;
}

function drawBand(pen: Pen, band: Band): void {
  const { context, palette, view } = pen;
  const { labelledMm, minorMm, middleMm } = tickSteps(view.pxPerMm);
  const draw = (along: number, from: number, to: number): void => {
    if (band.vertical) {
      context.moveTo(from, along);
      context.lineTo(to, along);
    } else {
      context.moveTo(along, from);
      context.lineTo(along, to);
    }
  };
  const crisp = (px: number): number => Math.round(px) + 0.5;
  context.beginPath();
  for (const mm of multiplesWithin(band.fromMm, band.toMm, minorMm)) {
    const length = isMultiple(mm, labelledMm)
      ? TICK_PX.labelled
      : middleMm !== null && isMultiple(mm, middleMm)
        ? TICK_PX.middle
        : TICK_PX.minor;
    draw(crisp(band.place(mm)), RULER_PX, RULER_PX - length);
  }
  context.strokeStyle = palette.soft;
  context.lineWidth = 0.8;
  context.stroke();
  for (const mm of multiplesWithin(band.fromMm, band.toMm, labelledMm)) {
    const px = band.place(mm);
    const inside = mm >= 0 && mm <= band.lengthMm * (1 + 1e-9);
    const options = {
      sizePx: LABEL_PX,
      halo: false,
      baseline: "middle" as const,
      align: "left" as const,
      colour: inside ? palette.ink : palette.soft,
    };
    if (band.vertical) drawText(pen, figure(mm, 4), 7.5, px - 3, { ...options, turned: -Math.PI / 2 });
    else drawText(pen, figure(mm, 4), px + 3, 7.5, options);
  }
  drawExtent(pen, band);
}

/** The section's own extent as a heavy stroke along the ruler, and the pointer's place as a small wedge. */
function drawExtent(pen: Pen, band: Band): void {
  const { context, palette } = pen;
  const [a, b] = [band.place(0), band.place(band.lengthMm)];
  context.fillStyle = palette.ink;
  const [low, high] = [Math.max(RULER_PX, Math.min(a, b)), Math.max(a, b)];
  if (band.vertical) context.fillRect(RULER_PX - 1, low, 2, Math.max(0, high - low));
  else context.fillRect(low, RULER_PX - 1, Math.max(0, high - low), 2);
  if (band.cursorPx === null || band.cursorPx < RULER_PX) return;
  const c = band.cursorPx;
  context.beginPath();
  const point = (along: number, across: number): void => {
    if (band.vertical) context.lineTo(across, along);
    else context.lineTo(along, across);
  };
  point(c, RULER_PX + 1);
  point(c - 4.5, RULER_PX - 8);
  point(c + 4.5, RULER_PX - 8);
  context.closePath();
  context.fillStyle = palette.accent;
  context.fill();
}

/** The sheet's frame with millimetre rulers along its top and left, and the pointer's place on both. In pixels. */
export function drawRulers(pen: Pen, drawing: Drawing, cursor: { xPx: number; yPx: number } | null): void {
  const { context, palette, view } = pen;
  const { widthPx, heightPx } = view;
  context.fillStyle = palette.sheet;
  context.fillRect(0, 0, widthPx, RULER_PX);
  context.fillRect(0, 0, RULER_PX, heightPx);
  const low = toMm(view, { xPx: RULER_PX, yPx: heightPx });
  const high = toMm(view, { xPx: widthPx, yPx: RULER_PX });
  context.strokeStyle = palette.hairline;
  context.lineWidth = 1;
  context.beginPath();
  context.moveTo(RULER_PX, RULER_PX + 0.5 - 1);
  context.lineTo(widthPx, RULER_PX - 0.5);
  context.moveTo(RULER_PX - 0.5, RULER_PX);
  context.lineTo(RULER_PX - 0.5, heightPx);
  context.stroke();
  context.save();
  context.beginPath();
  context.rect(RULER_PX, 0, widthPx, heightPx);
  context.clip();
  drawBand(pen, {
    place: (mm) => toPx(view, { xMm: mm, yMm: 0 }).xPx,
    fromMm: low.xMm,
    toMm: high.xMm,
    lengthMm: drawing.widthMm,
    cursorPx: cursor?.xPx ?? null,
    vertical: false,
  });
  context.restore();
  context.save();
  context.beginPath();
  context.rect(0, RULER_PX, widthPx, heightPx);
  context.clip();
  drawBand(pen, {
    place: (mm) => toPx(view, { xMm: 0, yMm: mm }).yPx,
    fromMm: low.yMm,
    toMm: high.yMm,
    lengthMm: drawing.heightMm,
    cursorPx: cursor?.yPx ?? null,
    vertical: true,
  });
  context.restore();
  drawText(pen, "mm", RULER_PX / 2, RULER_PX / 2, {
    sizePx: 9.5,
    align: "center",
    halo: false,
    colour: palette.soft,
  });
}

/** Half-filled bar with its length, in the lower left of the sheet. */
export function drawScaleBar(pen: Pen): void {
  const { context, palette, view } = pen;
  const mm = scaleBarMm(view.pxPerMm);
  const width = mm * view.pxPerMm;
  const [x, y] = [RULER_PX + 16, view.heightPx - 20];
  context.beginPath();
  context.rect(x, y - 2.5, width, 5);
  context.fillStyle = palette.sheet;
  context.fill();
  strokeOutline(context, palette.ink);
  context.fillStyle = palette.ink;
  context.fillRect(x, y - 2.5, width / 2, 5);
  drawText(pen, lengthInWords(mm), x + width + 8, y, { sizePx: 12, colour: palette.ink });
}

function strokeOutline(context: CanvasRenderingContext2D, colour: string): void {
  context.strokeStyle = colour;
  context.lineWidth = 1;
  context.stroke();
}
