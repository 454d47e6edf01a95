import type { Scene } from "@heddle/kernels/scene";
import { shiftItems } from "../../document/edits";
import type { ItemRef } from "../../document/refs";
import { itemBox } from "../../geometry/hit";
import { joinBoxes, type BoxMm, type Xy } from "../../geometry/points";
import { type SheetPointer, type ToolMachine, ToolState } from "../tool";

/** Drags the selection; its lower left corner comes to rest on the grid or a key point. Shift keeps to one axis. */
export class Moving extends ToolState {
  override cursor = "move";
  readonly #start: Xy;
  readonly #refs: ItemRef[];
  #mark: Scene;
  #corner: Xy;

  constructor(machine: ToolMachine, start: SheetPointer) {
    super(machine);
    this.#start = start.at;
    this.#refs = [...this.store.state.selection];
    this.#mark = this.store.document;
    this.#corner = start.at;
  }

  override enter(): void {
    this.store.begin(this.#refs.length === 1 ? "Move" : `Move ${String(this.#refs.length)} items`);
    this.#mark = this.store.document;
    let box: BoxMm | null = null;
    for (const ref of this.#refs) {
      const next = itemBox(this.store.drawing, ref);
      if (next !== null) box = box === null ? next : joinBoxes(box, next);
    }
    if (box !== null) this.#corner = [box.left, box.bottom];
  }

  override pointerMove(pointer: SheetPointer): void {
    let dx = pointer.at[0] - this.#start[0];
    let dy = pointer.at[1] - this.#start[1];
    if (pointer.shift) {
      if (Math.abs(dx) >= Math.abs(dy)) dy = 0;
      else dx = 0;
    }
    const rest = this.machine.snap([this.#corner[0] + dx, this.#corner[1] + dy], pointer);
    const held: Xy = [
      dx === 0 && pointer.shift ? 0 : rest[0] - this.#corner[0],
      dy === 0 && pointer.shift ? 0 : rest[1] - this.#corner[1],
    ];
    this.store.update(() => shiftItems(this.#mark, this.#refs, held[0], held[1]));
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
