import type { Xy } from "../../geometry/points";
import { type SheetKey, type SheetPointer, type ToolMachine, type ToolPicture, ToolState } from "../tool";
import { dropStroke } from "./drop";
import { Painting } from "./painting";

/** The brush is up: its round tip follows the pointer. [ and ] change its width. */
export class BrushIdle extends ToolState {
  override cursor = "none";
  #at: Xy | null;

  constructor(machine: ToolMachine, at: Xy | null = null) {
    super(machine);
    this.#at = at;
  }

  override pointerMove(pointer: SheetPointer): void {
    this.#at = pointer.at;
    this.store.touchToolPicture();
  }

  override pointerDown(pointer: SheetPointer): void {
    this.machine.go(new Painting(this.machine, pointer, (at) => new BrushIdle(this.machine, at)));
  }

  override keyDown(key: SheetKey): boolean {
    const { brushWidthMm } = this.store.state;
    if (key.key === "[" || key.key === "]") {
      const factor = key.key === "]" ? 1.25 : 0.8;
      this.store.setBrushWidth(Number((brushWidthMm * factor).toPrecision(2)));
      return true;
    }
    if (key.key !== "Enter") return false;
    dropStroke(this.store);
    return true;
  }

  override escape(): void {
    this.store.setTool("select");
  }

  override picture(): ToolPicture | null {
    return this.#at === null ? null : { brush: { at: this.#at, widthMm: this.store.state.brushWidthMm } };
  }
}
