import { toMm } from "../../../hooks/viewport";
import { gridStepMm } from "../camera/ticks";
import type { SheetStore, ToolId } from "../document/store";
import { snapPoint, type Snapped } from "../geometry/snap";
import { roundToPixel, type Xy } from "../geometry/points";
import { brushTool } from "./brush/brush-tool";
import { ellipseTool, rectangleTool } from "./box/box-tools";
import { measureTool } from "./measure/measure-tool";
import { probeTool, sourceTool } from "./place/place-tools";
import { polygonTool, wallTool } from "./polyline/polyline-tools";
import { selectTool } from "./select/select-tool";
import type { SheetKey, SheetPointer, Tool, ToolMachine, ToolPicture, ToolState } from "./tool";

const TOOLS: Readonly<Record<ToolId, Tool>> = {
  select: selectTool,
  brush: brushTool,
  rectangle: rectangleTool,
  ellipse: ellipseTool,
  polygon: polygonTool,
  wall: wallTool,
  source: sourceTool,
  probe: probeTool,
  measure: measureTool,
};

/** Pixels within which a hit or a snap counts. */
const REACH_PX = 7;

/** A pointer event before it is turned into millimetres and snapped. */
export type RawPointer = Omit<SheetPointer, "at" | "snapped" | "snapReason">;

/** Runs the present tool: one state at a time; panning goes beside it and leaves the state alone. */
export class Toolbox implements ToolMachine {
  readonly store: SheetStore;
  #state: ToolState;
  #tool: ToolId;
  #panning: { xPx: number; yPx: number } | null = null;
  #spaceHeld = false;
  readonly #unsubscribe: () => void;

  constructor(store: SheetStore) {
    this.store = store;
    this.#tool = store.state.tool;
    this.#state = TOOLS[this.#tool].rest(this);
    this.#state.enter();
    this.#unsubscribe = store.subscribe(() => {
      this.#followTool();
    });
  }

  get reachMm(): number {
    return REACH_PX / this.store.view.pxPerMm;
  }
  get gridMm(): number {
    return gridStepMm(this.store.view.pxPerMm);
  }
  get cursor(): string {
    if (this.#panning !== null) return "grabbing";
    return this.#spaceHeld ? "grab" : this.#state.cursor;
  }
  get state(): ToolState {
    return this.#state;
  }

  go(next: ToolState): void {
    this.#state.exit();
    this.#state = next;
    next.enter();
    this.store.touchToolPicture();
  }
  rest(): void {
    this.go(TOOLS[this.#tool].rest(this));
  }

  picture(): ToolPicture | null {
    return this.#state.picture();
  }

  snap(at: Xy, pointer: SheetPointer): Xy {
    return this.#snapped(at, pointer.alt).at;
  }

  pointerDown(raw: RawPointer): void {
    if (raw.button === 1 || (raw.button === 0 && this.#spaceHeld)) {
      this.#panning = raw.px;
      this.store.touchToolPicture();
      return;
    }
    if (raw.button === 0) this.#state.pointerDown?.(this.#pointer(raw));
  }
  pointerMove(raw: RawPointer): void {
    if (this.#panning !== null) {
      this.store.pan(raw.px.xPx - this.#panning.xPx, raw.px.yPx - this.#panning.yPx);
      this.#panning = raw.px;
      return;
    }
    this.#state.pointerMove?.(this.#pointer(raw));
  }
  pointerUp(raw: RawPointer): void {
    if (this.#panning !== null) {
      this.#panning = null;
      this.store.touchToolPicture();
      return;
    }
    this.#state.pointerUp?.(this.#pointer(raw));
  }
  doubleClick(raw: RawPointer): void {
    this.#state.doubleClick?.(this.#pointer(raw));
  }
  /** The pointer was taken away mid-gesture. */
  pointerCancel(): void {
    this.#panning = null;
    this.#state.cancel();
  }

  /** The present state's own keys. True where the key was used up. */
  keyDown(key: SheetKey): boolean {
    if (key.key === " " && !key.ctrl) {
      if (!this.#spaceHeld) {
        this.#spaceHeld = true;
        this.store.touchToolPicture();
      }
      return true;
    }
    return this.#state.keyDown?.(key) ?? false;
  }
  keyUp(key: SheetKey): void {
    if (key.key === " ") this.releaseSpace();
  }
  /** Space let go, or the window left while it was held. */
  releaseSpace(): void {
    if (!this.#spaceHeld) return;
    this.#spaceHeld = false;
    this.store.touchToolPicture();
  }
  escape(): void {
    this.#state.escape();
  }

  dispose(): void {
    this.#unsubscribe();
  }

  #followTool(): void {
    const { tool } = this.store.state;
    if (tool === this.#tool) return;
    this.#tool = tool;
    this.#state.cancel();
    this.#state.exit();
    this.#state = TOOLS[tool].rest(this);
    this.#state.enter();
    this.store.touchToolPicture();
  }

  #pointer(raw: RawPointer): SheetPointer {
    const { xMm, yMm } = toMm(this.store.view, raw.px);
    const at: Xy = [xMm, yMm];
    const { at: snapped, reason } = this.#snapped(at, raw.alt);
    return { ...raw, at, snapped, snapReason: reason };
  }

  #snapped(at: Xy, off: boolean): Snapped {
    const { snapping, drawing, selection } = this.store.state;
    if (off || !snapping) {
      const { pxPerMm } = this.store.view;
      return { at: [roundToPixel(at[0], pxPerMm), roundToPixel(at[1], pxPerMm)], reason: null };
    }
    return snapPoint(drawing, at, {
      gridMm: this.gridMm,
      reachMm: this.reachMm,
      // What a gesture moves or draws is selected, and must not attract itself.
      ...(this.store.inGesture ? { ignore: selection } : {}),
    });
  }
}
