import type { Xy } from "../../geometry/points";
import { type SheetPointer, snapPicture, type ToolMachine, type ToolPicture, ToolState } from "../tool";
import { Measuring } from "./measuring";

export interface Measured {
  from: Xy;
  to: Xy;
}

/** Shows the last measure until the next one or Escape. It is no part of the scene. */
export class MeasureIdle extends ToolState {
  override cursor = "crosshair";
  #measured: Measured | null;
  #hover: SheetPointer | null = null;

  constructor(machine: ToolMachine, measured: Measured | null) {
    super(machine);
    this.#measured = measured;
  }

  override pointerMove(pointer: SheetPointer): void {
    this.#hover = pointer;
    this.store.touchToolPicture();
  }

  override pointerDown(pointer: SheetPointer): void {
    this.machine.go(
      new Measuring(this.machine, pointer.snapped, (measured) => new MeasureIdle(this.machine, measured)),
    );
  }

  override escape(): void {
    if (this.#measured === null) this.store.setTool("select");
    else {
      this.#measured = null;
      this.store.touchToolPicture();
    }
  }

  override picture(): ToolPicture {
    const picture = snapPicture(this.#hover) ?? {};
    return this.#measured === null ? picture : { ...picture, measure: this.#measured };
  }
}
