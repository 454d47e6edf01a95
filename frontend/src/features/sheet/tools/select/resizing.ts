import { drawnItem } from "../../document/drawing";
import { changeItems } from "../../document/edits";
import { findItem, type ItemRef } from "../../document/refs";
import type { Handle } from "../../geometry/handles";
import { pullHandle } from "../../geometry/resize";
import { type SheetPointer, type ToolMachine, ToolState } from "../tool";

/** Pulls one handle of the only selected item. Shift keeps proportions, Ctrl pulls about the middle. */
export class Resizing extends ToolState {
  override cursor = "crosshair";
  readonly #ref: ItemRef;
  readonly #handle: Handle;
  readonly #item;
  readonly #drawn;

  constructor(machine: ToolMachine, ref: ItemRef, handle: Handle) {
    super(machine);
    this.#ref = ref;
    this.#handle = handle;
    this.#item = findItem(this.store.document, ref);
    this.#drawn = drawnItem(this.store.drawing, ref);
  }

  override enter(): void {
    this.store.begin(this.#handle.kind === "vertex" ? "Move point" : "Resize");
  }

  override pointerMove(pointer: SheetPointer): void {
    const [item, drawn] = [this.#item, this.#drawn];
    if (item === undefined || drawn === null) return;
    const options = { proportional: pointer.shift, symmetric: pointer.ctrl };
    const pulled = pullHandle(item, drawn, this.#handle, pointer.snapped, options);
    this.store.update((scene) => changeItems(scene, [this.#ref], () => pulled));
  }

  override pointerUp(): void {
    this.store.finish();
    this.machine.rest();
  }

  override cancel(): void {
    this.store.cancel();
    this.machine.rest();
  }
}
