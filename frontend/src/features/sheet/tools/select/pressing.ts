import type { ItemRef } from "../../document/refs";
import { type SheetPointer, type ToolMachine, ToolState } from "../tool";
import { Moving } from "./moving";

/** Pixels a press may wander and still be a click. */
export const CLICK_SLACK_PX = 4;

export const hasWandered = (from: SheetPointer, to: SheetPointer): boolean =>
  Math.hypot(to.px.xPx - from.px.xPx, to.px.yPx - from.px.yPx) > CLICK_SLACK_PX;

/** Pressed on an item: a click selects it, a drag moves it with the rest of the selection. */
export class Pressing extends ToolState {
  readonly #start: SheetPointer;
  readonly #item: ItemRef;

  constructor(machine: ToolMachine, start: SheetPointer, item: ItemRef) {
    super(machine);
    this.#start = start;
    this.#item = item;
  }

  override pointerMove(pointer: SheetPointer): void {
    if (!hasWandered(this.#start, pointer) || this.store.state.readOnly) return;
    const { selection } = this.store.state;
    if (!selection.has(this.#item))
      this.store.select(this.#start.shift ? [...selection, this.#item] : [this.#item]);
    const moving = new Moving(this.machine, this.#start);
    this.machine.go(moving);
    moving.pointerMove(pointer);
  }

  override pointerUp(): void {
    const { selection } = this.store.state;
    if (!this.#start.shift) this.store.select([this.#item]);
    else if (selection.has(this.#item)) this.store.select([...selection].filter((ref) => ref !== this.#item));
    else this.store.select([...selection, this.#item]);
    this.machine.rest();
  }

  override cancel(): void {
    this.machine.rest();
  }
}
