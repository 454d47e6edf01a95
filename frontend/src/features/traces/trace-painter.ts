/** Draws the traces of a run on a canvas, one row a probe, on one time axis. */
import type { TokenColours } from "../../hooks/token-colours";
import { formatSi } from "../../lib/figures";
import { decimate, ticks } from "./decimate";
import type { Trace } from "./trace-store";

export const TRACE_LAYOUT = { left: 8, right: 12, top: 4, axisHeight: 20, labelHeight: 14 } as const;

export interface TracePicture {
  traces: readonly Trace[];
  nameOf: (probe: string) => string;
  widthPx: number;
  heightPx: number;
  endNs: number;
  /** The moment on the sheet, ns; null before there is one. */
  momentNs: number | null;
  hoverNs: number | null;
  /** The probe that is picked out. */
  selected: string | null;
  tokens: TokenColours;
}

export const timeToX = (timeNs: number, endNs: number, widthPx: number): number =>
  TRACE_LAYOUT.left + (timeNs / endNs) * (widthPx - TRACE_LAYOUT.left - TRACE_LAYOUT.right);
export const xToTime = (x: number, endNs: number, widthPx: number): number =>
  ((x - TRACE_LAYOUT.left) / (widthPx - TRACE_LAYOUT.left - TRACE_LAYOUT.right)) * endNs;

let lows = new Float64Array(0);
let highs = new Float64Array(0);

function paintRow(
  context: CanvasRenderingContext2D,
  trace: Trace,
  picture: TracePicture,
  top: number,
  height: number,
): void {
  const { tokens, widthPx, endNs } = picture;
  const columns = Math.max(1, Math.floor(widthPx - TRACE_LAYOUT.left - TRACE_LAYOUT.right));
  if (lows.length !== columns) {
    lows = new Float64Array(columns);
    highs = new Float64Array(columns);
  }
  const chosen = picture.selected === trace.probe;
  const labelled = height >= 40;
  const bodyTop = top + (labelled ? TRACE_LAYOUT.labelHeight : 0);
  const half = (top + height - bodyTop) / 2 - 2;
  const middle = bodyTop + half + 1;
  context.strokeStyle = tokens.rule;
  context.lineWidth = 0.8;
  context.beginPath();
  context.moveTo(TRACE_LAYOUT.left, Math.round(middle) + 0.5);
  context.lineTo(widthPx - TRACE_LAYOUT.right, Math.round(middle) + 0.5);
  context.stroke();

  decimate(trace, 0, endNs, lows, highs);
  const scale = trace.peak > 0 ? half / trace.peak : 0;
  context.strokeStyle = chosen ? tokens.accent : tokens.ink;
  context.lineWidth = 1.2;
  context.lineJoin = "round";
  context.beginPath();
  let drawing = false;
  for (let column = 0; column < columns; column += 1) {
    const high = highs[column] ?? Number.NaN;
    if (Number.isNaN(high)) {
      drawing = false;
      continue;
    }
    const x = TRACE_LAYOUT.left + column + 0.5;
    const yHigh = middle - high * scale;
    const yLow = middle - (lows[column] ?? high) * scale;
    if (drawing) context.lineTo(x, yHigh);
    else context.moveTo(x, yHigh);
    if (yLow - yHigh > 0.5) context.lineTo(x, yLow);
    drawing = true;
  }
  context.stroke();

  context.fillStyle = chosen ? tokens.accent : tokens.soft;
  context.textBaseline = "top";
  context.textAlign = "left";
  context.font = '500 12px "Fira Sans", sans-serif';
  context.lineWidth = 3;
  context.strokeStyle = tokens.page;
  const name = picture.nameOf(trace.probe);
  context.strokeText(name, TRACE_LAYOUT.left, top);
  context.fillText(name, TRACE_LAYOUT.left, top);
  context.font = '400 11px "Fira Mono", monospace';
  context.textAlign = "right";
  const peak = trace.peak > 0 ? `± ${formatSi(trace.peak, trace.unit)}` : "0";
  context.strokeText(peak, widthPx - TRACE_LAYOUT.right, top);
  context.fillStyle = tokens.soft;
  context.fillText(peak, widthPx - TRACE_LAYOUT.right, top);
}

function paintAxis(context: CanvasRenderingContext2D, picture: TracePicture): void {
  const { tokens, widthPx, heightPx, endNs } = picture;
  const base = heightPx - TRACE_LAYOUT.axisHeight;
  context.strokeStyle = tokens.hairline;
  context.lineWidth = 0.8;
  context.fillStyle = tokens.soft;
  context.font = '400 11px "Fira Sans", sans-serif';
  context.textBaseline = "top";
  const places = ticks(0, endNs, Math.max(2, Math.floor(widthPx / 110)));
  const last = places[places.length - 1];
  context.beginPath();
  for (const place of places) {
    const x = Math.round(timeToX(place, endNs, widthPx)) + 0.5;
    context.moveTo(x, base);
    context.lineTo(x, base + 4);
    context.textAlign = place === 0 ? "left" : x > widthPx - 40 ? "right" : "center";
    context.fillText(place === last ? `${place.toString()}\u2009ns` : place.toString(), x, base + 6);
  }
  context.moveTo(TRACE_LAYOUT.left, base + 0.5);
  context.lineTo(widthPx - TRACE_LAYOUT.right, base + 0.5);
  context.stroke();
}

function paintCursor(
  context: CanvasRenderingContext2D,
  picture: TracePicture,
  timeNs: number,
  colour: string,
  width: number,
): void {
  const x = Math.round(timeToX(timeNs, picture.endNs, picture.widthPx)) + 0.5;
  context.strokeStyle = colour;
  context.lineWidth = width;
  context.beginPath();
  context.moveTo(x, TRACE_LAYOUT.top);
  context.lineTo(x, picture.heightPx - TRACE_LAYOUT.axisHeight);
  context.stroke();
}

export function paintTraces(context: CanvasRenderingContext2D, picture: TracePicture): void {
  const { traces, widthPx, heightPx, momentNs, hoverNs, tokens } = picture;
  context.clearRect(0, 0, widthPx, heightPx);
  paintAxis(context, picture);
  // Under the rows, whose labels carry a halo.
  if (momentNs !== null) paintCursor(context, picture, momentNs, tokens.accent, 1.5);
  if (hoverNs !== null) paintCursor(context, picture, hoverNs, tokens.soft, 0.8);
  const rowHeight = (heightPx - TRACE_LAYOUT.axisHeight - TRACE_LAYOUT.top) / Math.max(1, traces.length);
  traces.forEach((trace, index) => {
    paintRow(context, trace, picture, TRACE_LAYOUT.top + index * rowHeight, rowHeight);
  });
}
