import type { ItemRef } from "../../document/refs";
import { itemsWithin } from "../../geometry/hit";
import { boxBetween, type Xy } from "../../geometry/points";
import { type SheetPointer, type ToolMachine, type ToolPicture, ToolState } from "../tool";
import { hasWandered } from "./pressing";

/** Pressed on bare sheet: a drag selects what lies wholly in the box, a click selects nothing. Shift adds. */
export class Marquee extends ToolState {
  override cursor = "crosshair";
  readonly #start: SheetPointer;
  readonly #before: ItemRef[];
  #to: Xy | null = null;

  constructor(machine: ToolMachine, start: SheetPointer) {
    super(machine);
    this.#start = start;
    this.#before = [...this.store.state.selection];
  }

  override pointerMove(pointer: SheetPointer): void {
    if (this.#to === null && !hasWandered(this.#start, pointer)) return;
    this.#to = pointer.at;
    const inside = itemsWithin(this.store.drawing, boxBetween(this.#start.at, pointer.at));
    this.store.select(this.#start.shift ? [...this.#before, ...inside] : inside);
    this.store.touchToolPicture();
  }

  override pointerUp(): void {
    if (this.#to === null && !this.#start.shift) this.store.select([]);
    this.machine.rest();
  }

  override cancel(): void {
    this.store.select(this.#before);
    this.machine.rest();
  }

  override picture(): ToolPicture | null {
    return this.#to === null ? null : { marquee: boxBetween(this.#start.at, this.#to) };
  }
}
