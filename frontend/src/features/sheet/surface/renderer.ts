import type { PointPx } from "../../../hooks/viewport";
import type { SheetEditor } from "../document/editor";
import type { SheetState } from "../document/store";
import { drawMarks } from "../linework/draw-marks";
import { drawPaint, inPixels, type Pen } from "../linework/draw-paint";
import { drawRulers, drawScaleBar } from "../linework/draw-rulers";
import { drawSection } from "../linework/draw-section";
import { drawSelection, drawToolPicture } from "../linework/draw-selection";
import { HatchPatterns } from "../linework/hatch-pattern";
import { type Palette, readPalette, watchScheme } from "../linework/palette";

/**
 * Draws the editor's state on two canvases, at most once a frame: paint below, which changes with the document and
 * the view, and marks, selection and rulers above, which change with every move of the pointer.
 */
export class SheetRenderer {
  readonly #editor: SheetEditor;
  readonly #paint: HTMLCanvasElement;
  readonly #marks: HTMLCanvasElement;
  readonly #patterns = new HatchPatterns();
  readonly #removals: (() => void)[] = [];
  #palette: Palette;
  #cursor: PointPx | null = null;
  #drawn: SheetState | null = null;
  #frame: number | null = null;
  #pixelRatio = 0;

  constructor(editor: SheetEditor, paint: HTMLCanvasElement, marks: HTMLCanvasElement) {
    this.#editor = editor;
    this.#paint = paint;
    this.#marks = marks;
    this.#palette = readPalette(marks);
    const request = (): void => {
      this.request();
    };
    this.#removals.push(
      editor.subscribe(request),
      watchScheme(() => {
        this.#palette = readPalette(marks);
        this.#patterns.clear();
        this.#drawn = null;
        request();
      }),
    );
    const redraw = (): void => {
      this.#drawn = null;
      request();
    };
    // Labels drawn before the fonts were there are drawn again in the right ones.
    void document.fonts.ready.then(redraw);
    window.addEventListener("resize", redraw);
    this.#removals.push(() => {
      window.removeEventListener("resize", redraw);
    });
    request();
  }

  /** The pointer's place, marked on the rulers; null where it is elsewhere. */
  setCursor(cursor: PointPx | null): void {
    this.#cursor = cursor;
    this.request();
  }

  request(): void {
    this.#frame ??= requestAnimationFrame(() => {
      this.#frame = null;
      this.#draw();
    });
  }

  dispose(): void {
    if (this.#frame !== null) cancelAnimationFrame(this.#frame);
    for (const remove of this.#removals) remove();
  }

  #draw(): void {
    const { state } = this.#editor;
    const { view } = state;
    if (view.widthPx === 0 || view.heightPx === 0) return;
    const ratio = window.devicePixelRatio;
    const resized = this.#fitCanvases(view.widthPx, view.heightPx, ratio);
    const before = this.#drawn;
    const stale =
      resized ||
      before === null ||
      before.view !== view ||
      before.drawing.paint !== state.drawing.paint ||
      before.drawing.mediaById !== state.drawing.mediaById ||
      before.document.band !== state.document.band ||
      before.document.background !== state.document.background ||
      before.document.section !== state.document.section;
    if (stale) this.#drawPaintLayer(state);
    this.#drawMarksLayer(state);
    this.#drawn = state;
  }

  #drawPaintLayer(state: SheetState): void {
    const pen = this.#penFor(this.#paint, state);
    if (pen !== null) drawPaint(pen, state.drawing);
  }

  #drawMarksLayer(state: SheetState): void {
    const pen = this.#penFor(this.#marks, state);
    if (pen === null) return;
    inPixels(pen);
    drawSection(pen, state.drawing);
    drawMarks(pen, state.drawing, state.selection);
    drawSelection(pen, state);
    const picture = this.#editor.tools.picture();
    if (picture !== null) drawToolPicture(pen, picture, state);
    drawScaleBar(pen);
    drawRulers(pen, state.drawing, this.#cursor);
  }

  /** A pen on the cleared canvas. */
  #penFor(canvas: HTMLCanvasElement, state: SheetState): Pen | null {
    const context = canvas.getContext("2d");
    if (context === null) return null;
    context.setTransform(1, 0, 0, 1, 0, 0);
    context.globalAlpha = 1;
    context.globalCompositeOperation = "source-over";
    context.clearRect(0, 0, canvas.width, canvas.height);
    return {
      context,
      palette: this.#palette,
      patterns: this.#patterns,
      pixelRatio: this.#pixelRatio,
      view: state.view,
    };
  }

  #fitCanvases(widthPx: number, heightPx: number, ratio: number): boolean {
    const [width, height] = [Math.round(widthPx * ratio), Math.round(heightPx * ratio)];
    const same = this.#paint.width === width && this.#paint.height === height && this.#pixelRatio === ratio;
    if (same) return false;
    for (const canvas of [this.#paint, this.#marks]) {
      canvas.width = width;
      canvas.height = height;
    }
    this.#pixelRatio = ratio;
    return true;
  }
}
