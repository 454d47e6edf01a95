import { isSigned } from "@heddle/kernels/frames";
import { createCanvasRenderer } from "./canvas-renderer";
import type { FieldRenderer, Placement } from "./field-renderer";
import type { FieldSlot } from "./field-slot";
import { createWebglRenderer } from "./webgl-renderer";

/** Colours by level, for signed quantities and for others. */
export interface ColourTables {
  signed: Uint8Array;
  unsigned: Uint8Array;
}

/**
 * Draws the slot's latest frame on a canvas: on the next animation frame after one came, at once when the sheet
 * moved. Holds what the drawing reads, so that a frame renders no component.
 */
export class FieldPainter {
  readonly #slot: FieldSlot;
  #renderer: FieldRenderer | null = null;
  #placement: Placement | null = null;
  #tables: ColourTables | null = null;
  #shownTable: Uint8Array | null = null;
  #shownFrame: object | null = null;
  #animation = 0;
  #leave: (() => void) | null = null;

  constructor(slot: FieldSlot) {
    this.#slot = slot;
  }

  /** @param onNoWebgl called soon after, where the canvas gives no WebGL; nothing is mounted then */
  mount(canvas: HTMLCanvasElement, plain: boolean, onNoWebgl: () => void): void {
    const markDirty = (): void => {
      if (this.#animation === 0) {
        this.#animation = requestAnimationFrame(() => {
          this.#animation = 0;
          this.#draw();
        });
      }
    };
    try {
      this.#renderer = plain
        ? createCanvasRenderer(canvas)
        : createWebglRenderer({ canvas, onRestored: markDirty });
    } catch {
      queueMicrotask(onNoWebgl);
      return;
    }
    this.#leave = this.#slot.subscribe(markDirty);
    markDirty();
  }

  unmount(): void {
    this.#leave?.();
    this.#leave = null;
    cancelAnimationFrame(this.#animation);
    this.#animation = 0;
    this.#renderer?.destroy();
    this.#renderer = null;
    this.#shownTable = null;
    this.#shownFrame = null;
  }

  /** Where the section now lies and in which colours; drawn at once. */
  show(placement: Placement, tables: ColourTables): void {
    this.#placement = placement;
    this.#tables = tables;
    this.#draw();
  }

  #draw(): void {
    const renderer = this.#renderer;
    const placement = this.#placement;
    const tables = this.#tables;
    if (renderer === null || placement === null || tables === null) return;
    if (placement.surfaceWidthPx < 1 || placement.surfaceHeightPx < 1) return;
    const ratio = Math.min(2, globalThis.devicePixelRatio);
    renderer.resize(
      Math.max(1, Math.round(placement.surfaceWidthPx * ratio)),
      Math.max(1, Math.round(placement.surfaceHeightPx * ratio)),
    );
    const frame = this.#slot.latest();
    const table = frame === null || isSigned(frame.quantity) ? tables.signed : tables.unsigned;
    if (this.#shownTable !== table) {
      renderer.setColours(table);
      this.#shownTable = table;
    }
    if (this.#shownFrame !== frame) {
      renderer.setFrame(frame);
      this.#shownFrame = frame;
    }
    renderer.draw(placement);
    this.#slot.drawn();
  }
}
