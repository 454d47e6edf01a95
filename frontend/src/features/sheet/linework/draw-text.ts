import type { Pen } from "./draw-paint";

export interface TextOptions {
  sizePx?: number;
  weight?: 400 | 500 | 600;
  colour?: string;
  align?: CanvasTextAlign;
  baseline?: CanvasTextBaseline;
  /** Radians, clockwise on the screen. */
  turned?: number;
  halo?: boolean;
}

/** Text in CSS pixels, on a halo of the sheet's colour so that it reads over any field. */
export function drawText(pen: Pen, text: string, xPx: number, yPx: number, options: TextOptions = {}): void {
  const { context, palette } = pen;
  const { sizePx = 12, weight = 400, align = "left", baseline = "middle", turned = 0, halo = true } = options;
  context.save();
  context.translate(xPx, yPx);
  if (turned !== 0) context.rotate(turned);
  context.font = `${String(weight)} ${String(sizePx)}px ${palette.sans}`;
  context.textAlign = align;
  context.textBaseline = baseline;
  if (halo) {
    context.strokeStyle = palette.sheet;
    context.lineWidth = 3.5;
    context.lineJoin = "round";
    context.strokeText(text, 0, 0);
  }
  context.fillStyle = options.colour ?? palette.ink;
  context.fillText(text, 0, 0);
  context.restore();
}

export function textWidth({ context, palette }: Pen, text: string, sizePx = 12): number {
  context.save();
  context.font = `400 ${String(sizePx)}px ${palette.sans}`;
  const { width } = context.measureText(text);
  context.restore();
  return width;
}

/** A stroke in ink on a wider one in the sheet's colour. Takes the current path. */
export function strokeOnHalo(pen: Pen, widthPx: number, colour?: string): void {
  const { context, palette } = pen;
  context.lineWidth = widthPx + 2;
  context.strokeStyle = palette.sheet;
  context.globalAlpha = 0.8;
  context.stroke();
  context.globalAlpha = 1;
  context.lineWidth = widthPx;
  context.strokeStyle = colour ?? palette.ink;
  context.stroke();
}
