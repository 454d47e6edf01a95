import type { Viewport } from "../../../hooks/viewport";
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

interface Kept {
  pattern: CanvasPattern;
  side: number;
  /** The view that the pattern's transform was last set for. */
  view: Viewport | null;
}

/** Keeps hatch patterns by what they look like; a few dozen at most exist at a time. */
export class HatchPatterns {
  readonly #kept = new Map<string, Kept | null>();

  /**
   * The pattern for paths that are filled in millimetres under `view`: it undoes the view's transform, so that its
   * tiles lie on whole device pixels, and moves with the sheet. Null where the browser gives none.
   */
  get(
    context: CanvasRenderingContext2D,
    strokes: Strokes,
    pixelRatio: number,
    colours: { ink: string; halo: string | null },
    view: Viewport,
  ): CanvasPattern | null {
    const side = tileSide(strokes.spacingPx, pixelRatio);
    const key = [side, strokes.direction, strokes.paired, pixelRatio, colours.ink, colours.halo].join(" ");
    let kept = this.#kept.get(key);
    if (kept === undefined) {
      const tile = drawTile(side, strokes, pixelRatio, colours.ink, colours.halo);
      const pattern = context.createPattern(tile, "repeat");
      kept = pattern === null ? null : { pattern, side, view: null };
      this.#kept.set(key, kept);
    }
    if (kept === null) return null;
    if (kept.view !== view) {
      const scale = view.pxPerMm * pixelRatio;
      const [x, y] = [view.originXPx * pixelRatio, view.originYPx * pixelRatio];
      const [left, top] = [Math.round(x) % side, Math.round(y) % side];
      kept.pattern.setTransform(
        new DOMMatrix([1 / scale, 0, 0, -1 / scale, (left - x) / scale, (y - top) / scale]),
      );
      kept.view = view;
    }
    return kept.pattern;
  }

  clear(): void {
    this.#kept.clear();
  }
}
