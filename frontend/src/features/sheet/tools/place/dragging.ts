import { changeItems } from "../../document/edits";
import type { ItemRef } from "../../document/refs";
import { roundMm, type Xy } from "../../geometry/points";
import { type SheetPointer, type ToolMachine, ToolState } from "../tool";
import type { MarkKind } from "./place-tools";

/** A mark is held: it follows the pointer until it is let go. `taken` is null where it is a new one. */
export class PlaceDragging extends ToolState {
  override cursor = "move";
  readonly #kind: MarkKind;
  readonly #at: Xy;
  #ref: ItemRef | null;

  constructor(machine: ToolMachine, kind: MarkKind, at: Xy, taken: ItemRef | null) {
    super(machine);
    this.#kind = kind;
    this.#at = at;
    this.#ref = taken;
  }

  override enter(): void {
    this.store.begin(this.#ref === null ? this.#kind.label : this.#kind.moveLabel);
    if (this.#ref === null) {
      const added = this.#kind.add(this.store.document, this.#at);
      this.store.update(() => added.scene);
      this.#ref = added.ref;
    }
    this.store.select([this.#ref]);
  }

  override pointerMove(pointer: SheetPointer): void {
    const [x, y] = pointer.snapped;
    if (this.#ref === null) return;
    this.store.update((scene) =>
      changeItems(scene, this.#ref === null ? [] : [this.#ref], (item) =>
        "x" in item ? { ...item, x: roundMm(x), y: roundMm(y) } : item,
      ),
    );
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
