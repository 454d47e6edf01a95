import { MAXIMA, type Scene } from "@heddle/kernels/scene";
import type { Viewport } from "../../../hooks/viewport";
import { fitClearOf, type Insets, panBy, resizeView, zoomAt } from "../camera/camera";
import { History } from "../history/history";
import { type Drawing, drawingOf } from "./drawing";
import { findItem, type ItemRef } from "./refs";
import { diffScenes, isEmptyDiff } from "./scene-diff";
import { Throttle } from "./throttle";

export type ToolId =
  | "select"
  | "brush"
  | "rectangle"
  | "ellipse"
  | "polygon"
  | "wall"
  | "source"
  | "probe"
  | "measure";

/** Tools that a reader of the sheet may use too. */
const READING_TOOLS: readonly ToolId[] = ["select", "measure"];

export interface SheetState {
  /** The raw scene document: lengths as written. */
  document: Scene;
  /** The document with its lengths in mm. */
  drawing: Drawing;
  selection: ReadonlySet<ItemRef>;
  tool: ToolId;
  /** Id of the medium on the brush. */
  medium: string;
  brushWidthMm: number;
  snapping: boolean;
  readOnly: boolean;
  view: Viewport;
  /** What undo and redo would take back or do again; null where there is nothing. */
  undoLabel: string | null;
  redoLabel: string | null;
  /** A sentence on what was just done or refused, for the status line and screen readers. */
  notice: string;
  /** Grows whenever a tool's own picture (rubber band, marquee) changes. */
  toolPicture: number;
}

export interface SheetStoreOptions {
  readOnly?: boolean;
  medium?: string;
  brushWidthMm?: number;
}

/** ms between two reports of a gesture under way. */
const GESTURE_REPORT_MS = 60;

const DEFAULT_INSETS: Insets = { left: 24, top: 24, right: 24, bottom: 24 };

const firstFit = (scene: Scene): string =>
  scene.media.find((medium) => "perfect" in medium)?.id ?? scene.media.at(0)?.id ?? "pec";

/**
 * The editor's document store, apart from React. A change goes `begin`, any number of `update`, then `finish` or
 * `cancel`; a finished gesture is one step of history and one `onChange`. `edit` does all three at once.
 */
export class SheetStore {
  #state: SheetState;
  readonly #history = new History();
  readonly #listeners = new Set<() => void>();
  readonly #changeListeners = new Set<(document: Scene) => void>();
  readonly #gestureListeners = new Set<(document: Scene) => void>();
  readonly #gestureReport = new Throttle(GESTURE_REPORT_MS);
  #gesture: { label: string; mark: Scene; selection: ReadonlySet<ItemRef> } | null = null;
  #fit: { insets: Insets; block: { widthPx: number; heightPx: number } | null } = {
    insets: DEFAULT_INSETS,
    block: null,
  };
  /** The view follows the surface's size until the user pans or zooms. */
  #fitted = true;

  constructor(document: Scene, options: SheetStoreOptions = {}) {
    const drawing = drawingOf(document);
    const side = Math.max(drawing.widthMm, drawing.heightMm);
    this.#state = {
      document,
      drawing,
      selection: new Set(),
      tool: "select",
      medium: options.medium ?? firstFit(document),
      brushWidthMm: options.brushWidthMm ?? Number((side / 40).toPrecision(1)),
      snapping: true,
      readOnly: options.readOnly ?? false,
      view: { pxPerMm: 1, originXPx: 0, originYPx: 0, widthPx: 0, heightPx: 0 },
      undoLabel: null,
      redoLabel: null,
      notice: "",
      toolPicture: 0,
    };
  }

  get state(): SheetState {
    return this.#state;
  }
  get document(): Scene {
    return this.#state.document;
  }
  get drawing(): Drawing {
    return this.#state.drawing;
  }
  get view(): Viewport {
    return this.#state.view;
  }
  get inGesture(): boolean {
    return this.#gesture !== null;
  }
  get historyDepth(): number {
    return this.#history.depth;
  }

  readonly getState = (): SheetState => this.#state;

  readonly subscribe = (listener: () => void): (() => void) => {
    this.#listeners.add(listener);
    return () => this.#listeners.delete(listener);
  };

  /** Called with the document after every finished gesture, undo and redo. Gives back its own removal. */
  onChange(listener: (document: Scene) => void): () => void {
    this.#changeListeners.add(listener);
    return () => this.#changeListeners.delete(listener);
  }

  /** Called with the document as it grows during a gesture, at most once in 60 ms. */
  onGesture(listener: (document: Scene) => void): () => void {
    this.#gestureListeners.add(listener);
    return () => this.#gestureListeners.delete(listener);
  }

  begin(label: string): void {
    if (this.#state.readOnly) throw new Error("This sheet is open for reading only.");
    if (this.#gesture !== null) this.finish();
    this.#gesture = { label, mark: this.document, selection: this.#state.selection };
  }

  /** Replaces the document within the gesture that `begin` opened. */
  update(change: (scene: Scene) => Scene): void {
    if (this.#gesture === null) throw new Error("A change needs a gesture: call begin first.");
    const next = change(this.document);
    if (next === this.document) return;
    this.#setDocument(next);
    this.#gestureReport.run(() => {
      for (const listener of this.#gestureListeners) listener(this.document);
    });
  }

  /** Ends the gesture: one step of history, one report. Nothing changed: neither. */
  finish(): void {
    const gesture = this.#gesture;
    if (gesture === null) return;
    this.#gesture = null;
    this.#gestureReport.cancel();
    const diff = diffScenes(gesture.mark, this.document);
    if (isEmptyDiff(diff)) return;
    this.#history.push({ label: gesture.label, diff });
    this.#set({ ...this.#labels(), notice: gesture.label });
    this.#reportChange();
  }

  /** Takes the gesture back: document and selection return to where `begin` found them. */
  cancel(): void {
    const gesture = this.#gesture;
    if (gesture === null) return;
    this.#gesture = null;
    this.#gestureReport.cancel();
    const changed = gesture.mark !== this.document;
    this.#setDocument(gesture.mark, gesture.selection);
    // Whoever followed the gesture must learn that it was taken back.
    if (changed) for (const listener of this.#gestureListeners) listener(this.document);
  }

  edit(label: string, change: (scene: Scene) => Scene): void {
    this.begin(label);
    this.update(change);
    this.finish();
  }

  undo(): void {
    this.#travel("undo");
  }
  redo(): void {
    this.#travel("redo");
  }

  /** Shows another document (an import, another revision); history and selection start anew. */
  load(document: Scene): void {
    this.#gesture = null;
    this.#gestureReport.cancel();
    this.#history.clear();
    this.#setDocument(document, new Set());
    const known = this.drawing.mediaById.has(this.#state.medium);
    this.#set({ ...this.#labels(), notice: "", medium: known ? this.#state.medium : firstFit(document) });
    if (this.#fitted) this.fit();
  }

  select(refs: Iterable<ItemRef>): void {
    const selection = new Set([...refs].filter((ref) => findItem(this.document, ref) !== undefined));
    const same =
      selection.size === this.#state.selection.size &&
      [...selection].every((ref) => this.#state.selection.has(ref));
    if (!same) this.#set({ selection });
  }

  setTool(tool: ToolId): void {
    if (this.#state.readOnly && !READING_TOOLS.includes(tool)) return;
    if (tool !== this.#state.tool) this.#set({ tool });
  }
  setMedium(medium: string): void {
    if (this.drawing.mediaById.has(medium)) this.#set({ medium });
  }
  setBrushWidth(widthMm: number): void {
    if (Number.isFinite(widthMm) && widthMm > 0 && widthMm <= MAXIMA.lengthMm)
      this.#set({ brushWidthMm: widthMm });
  }
  setSnapping(snapping: boolean): void {
    this.#set({ snapping, notice: snapping ? "Snapping on" : "Snapping off" });
  }
  setReadOnly(readOnly: boolean): void {
    if (readOnly === this.#state.readOnly) return;
    if (readOnly) this.cancel();
    const tool = readOnly && !READING_TOOLS.includes(this.#state.tool) ? "select" : this.#state.tool;
    this.#set({ readOnly, tool });
  }
  say(notice: string): void {
    this.#set({ notice });
  }
  /** For tools: their own picture has changed and wants drawing. */
  touchToolPicture(): void {
    this.#set({ toolPicture: this.#state.toolPicture + 1 });
  }

  /** The surface's size in CSS pixels; the view stays fitted, or keeps its scale and middle. */
  resize(widthPx: number, heightPx: number): void {
    const { view } = this.#state;
    if (view.widthPx === widthPx && view.heightPx === heightPx) return;
    const first = view.widthPx === 0;
    this.#set({ view: resizeView(view, widthPx, heightPx) });
    if (first || this.#fitted) this.fit();
  }

  /** What a fitted section keeps clear of: rulers and frame, and a block in the lower right corner. */
  setFitArea(insets: Insets, block: { widthPx: number; heightPx: number } | null): void {
    this.#fit = { insets, block };
    if (this.#fitted) this.fit();
  }

  fit(): void {
    this.#fitted = true;
    const { view, drawing } = this.#state;
    if (view.widthPx === 0 || view.heightPx === 0) return;
    const box = { left: 0, bottom: 0, right: drawing.widthMm, top: drawing.heightMm };
    this.#set({ view: fitClearOf(box, view, this.#fit.insets, this.#fit.block) });
  }
  zoom(factor: number, at?: { xPx: number; yPx: number }): void {
    const { view } = this.#state;
    this.setView(zoomAt(view, at ?? { xPx: view.widthPx / 2, yPx: view.heightPx / 2 }, factor));
  }
  pan(dxPx: number, dyPx: number): void {
    this.setView(panBy(this.#state.view, dxPx, dyPx));
  }
  setView(view: Viewport): void {
    this.#fitted = false;
    this.#set({ view });
  }

  dispose(): void {
    this.#gestureReport.cancel();
    this.#listeners.clear();
    this.#changeListeners.clear();
    this.#gestureListeners.clear();
  }

  #travel(way: "undo" | "redo"): void {
    if (this.#state.readOnly) return;
    if (this.#gesture !== null) {
      this.cancel();
      return;
    }
    const label = way === "undo" ? this.#history.undoLabel : this.#history.redoLabel;
    const scene = way === "undo" ? this.#history.undo(this.document) : this.#history.redo(this.document);
    if (scene === null) return;
    this.#setDocument(scene);
    this.#set({ ...this.#labels(), notice: `${way === "undo" ? "Undone" : "Done again"}: ${label ?? ""}` });
    this.#reportChange();
  }

  #reportChange(): void {
    for (const listener of this.#changeListeners) listener(this.document);
  }

  #labels(): Pick<SheetState, "undoLabel" | "redoLabel"> {
    return { undoLabel: this.#history.undoLabel, redoLabel: this.#history.redoLabel };
  }

  #setDocument(document: Scene, selection = this.#state.selection): void {
    const drawing = drawingOf(document, this.#state.drawing);
    const standing = [...selection].filter((ref) => findItem(document, ref) !== undefined);
    const medium = drawing.mediaById.has(this.#state.medium) ? this.#state.medium : firstFit(document);
    const sectionChanged =
      drawing.widthMm !== this.#state.drawing.widthMm || drawing.heightMm !== this.#state.drawing.heightMm;
    this.#set({
      document,
      drawing,
      medium,
      selection: standing.length === selection.size ? selection : new Set(standing),
    });
    if (sectionChanged && this.#fitted) this.fit();
  }

  #set(part: Partial<SheetState>): void {
    this.#state = { ...this.#state, ...part };
    for (const listener of this.#listeners) listener();
  }
}
