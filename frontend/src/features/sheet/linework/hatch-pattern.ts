import type { Strokes } from "./hatch";

/** Side of a seamless tile of 45° strokes, in device pixels: whole, so that strokes stay crisp at any pixel ratio. */
export const tileSide = (spacingPx: number, pixelRatio: number): number =>
  Math.max(3, Math.round(spacingPx * Math.SQRT2 * pixelRatio));

const PAIR_GAP_PX = 1.8;

function drawTile(
  side: number,
  strokes: Strokes,
  pixelRatio: number,
  ink: string,
  halo: string | null,
): HTMLCanvasElement {
  const canvas = document.createElement("canvas");
  canvas.width = side;
  canvas.height = side;
  const context = canvas.getContext("2d");
  if (context === null) return canvas;
  const shifts = strokes.paired ? [-PAIR_GAP_PX / 2, PAIR_GAP_PX / 2] : [0];
  const trace = (): void => {
    context.beginPath();
    for (const shift of shifts)
      for (const wrap of [-side, 0, side]) {
        const along = wrap + shift * Math.SQRT2 * pixelRatio;
        if (strokes.direction === "rising") {
          context.moveTo(-side + along, 2 * side);
          context.lineTo(2 * side + along, -side);
        } else {
          context.moveTo(-side + along, -side);
          context.lineTo(2 * side + along, 2 * side);
        }
      }
    context.stroke();
  };
  if (halo !== null) {
    context.strokeStyle = halo;
    context.lineWidth = 2.4 * pixelRatio;
    context.globalAlpha = 0.55;
    trace();
    context.globalAlpha = 1;
  }
  context.strokeStyle = ink;
  context.lineWidth = 0.9 * pixelRatio;
  trace();
  return canvas;
}

/** Keeps hatch patterns by what they look like; a few dozen at most exist at a time. */
export class HatchPatterns {
  readonly #kept = new Map<string, { pattern: CanvasPattern; side: number } | null>();

  /** The pattern, laid in device pixels and moved with the sheet; null where the browser gives none. */
  get(
    context: CanvasRenderingContext2D,
    strokes: Strokes,
    pixelRatio: number,
    colours: { ink: string; halo: string | null },
    origin: { xPx: number; yPx: number },
  ): CanvasPattern | null {
    const side = tileSide(strokes.spacingPx, pixelRatio);
    const key = [side, strokes.direction, strokes.paired, pixelRatio, colours.ink, colours.halo].join(" ");
    let entry = this.#kept.get(key);
    if (entry === undefined) {
      const pattern = context.createPattern(
        drawTile(side, strokes, pixelRatio, colours.ink, colours.halo),
        "repeat",
      );
      entry = pattern === null ? null : { pattern, side };
      this.#kept.set(key, entry);
    }
    if (entry === null) return null;
    // The path is filled under the view's transform; the pattern undoes it and moves by whole device pixels.
    const shift = (px: number): number => Math.round(px * pixelRatio) % side;
    const inverse = context.getTransform().invertSelf();
    entry.pattern.setTransform(
      inverse.multiplySelf(new DOMMatrix([1, 0, 0, 1, shift(origin.xPx), shift(origin.yPx)])),
    );
    return entry.pattern;
  }

  clear(): void {
    this.#kept.clear();
  }
}
