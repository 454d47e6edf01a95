import { addPatch, changeItems, freeId } from "../../document/edits";
import { type ItemRef, makeRef } from "../../document/refs";
import { type BoxMm, boxBetween, type Xy } from "../../geometry/points";
import { type SheetPointer, snapPicture, type ToolMachine, type ToolPicture, ToolState } from "../tool";
import type { BoxKind } from "./box-tools";

/** From the first corner to the pointer. Shift makes it square, Ctrl draws it about its middle. */
export class BoxDragging extends ToolState {
  override cursor = "crosshair";
  readonly #kind: BoxKind;
  readonly #from: Xy;
  readonly #id: string;
  readonly #ref: ItemRef;
  #box: BoxMm | null = null;
  #pointer: SheetPointer | null = null;

  constructor(machine: ToolMachine, kind: BoxKind, from: Xy) {
    super(machine);
    this.#kind = kind;
    this.#from = from;
    this.#id = freeId(this.store.document.paint, kind.base);
    this.#ref = makeRef("paint", this.#id);
  }

  override enter(): void {
    this.store.begin(this.#kind.label);
  }

  override pointerMove(pointer: SheetPointer): void {
    this.#pointer = pointer;
    const box = this.#boxTo(pointer);
    if (box.right - box.left <= 0 || box.top - box.bottom <= 0) return;
    const patch = this.#kind.make(this.#id, this.store.state.medium, box);
    if (this.#box === null) {
      this.store.update((scene) => addPatch(scene, patch));
      this.store.select([this.#ref]);
    } else this.store.update((scene) => changeItems(scene, [this.#ref], () => patch));
    this.#box = box;
  }

  override pointerUp(): void {
    this.store.finish();
    this.machine.rest();
  }

  override cancel(): void {
    this.store.cancel();
    this.machine.rest();
  }

  override picture(): ToolPicture | null {
    return snapPicture(this.#pointer);
  }

  #boxTo(pointer: SheetPointer): BoxMm {
    let dx = pointer.snapped[0] - this.#from[0];
    let dy = pointer.snapped[1] - this.#from[1];
    if (pointer.shift) {
      const side = Math.max(Math.abs(dx), Math.abs(dy));
      dx = dx < 0 ? -side : side;
      dy = dy < 0 ? -side : side;
    }
    const from: Xy = pointer.ctrl ? [this.#from[0] - dx, this.#from[1] - dy] : this.#from;
    return boxBetween(from, [this.#from[0] + dx, this.#from[1] + dy]);
  }
}
