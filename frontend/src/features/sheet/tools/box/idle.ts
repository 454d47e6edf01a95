import { addPatch, freeId } from "../../document/edits";
import { makeRef } from "../../document/refs";
import { defaultBox } from "../default-place";
import {
  type SheetKey,
  type SheetPointer,
  snapPicture,
  type ToolMachine,
  type ToolPicture,
  ToolState,
} from "../tool";
import type { BoxKind } from "./box-tools";
import { BoxDragging } from "./dragging";

/** Waits for the first corner. Enter drops a box of round size in the middle of the view, for the keyboard. */
export class BoxIdle extends ToolState {
  override cursor = "crosshair";
  readonly #kind: BoxKind;
  #hover: SheetPointer | null = null;

  constructor(machine: ToolMachine, kind: BoxKind) {
    super(machine);
    this.#kind = kind;
  }

  override pointerMove(pointer: SheetPointer): void {
    this.#hover = pointer;
    this.store.touchToolPicture();
  }

  override pointerDown(pointer: SheetPointer): void {
    this.machine.go(new BoxDragging(this.machine, this.#kind, pointer.snapped));
  }

  override keyDown(key: SheetKey): boolean {
    if (key.key !== "Enter") return false;
    const { document, drawing, view, medium } = this.store.state;
    const id = freeId(document.paint, this.#kind.base);
    const box = defaultBox(drawing, view);
    this.store.edit(this.#kind.label, (scene) => addPatch(scene, this.#kind.make(id, medium, box)));
    this.store.select([makeRef("paint", id)]);
    return true;
  }

  override escape(): void {
    this.store.setTool("select");
  }

  override picture(): ToolPicture | null {
    return snapPicture(this.#hover);
  }
}
