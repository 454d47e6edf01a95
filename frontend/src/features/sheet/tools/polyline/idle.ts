import { addPatch, freeId } from "../../document/edits";
import { makeRef } from "../../document/refs";
import type { Xy } from "../../geometry/points";
import { defaultBox } from "../default-place";
import {
  type SheetKey,
  type SheetPointer,
  snapPicture,
  type ToolMachine,
  type ToolPicture,
  ToolState,
} from "../tool";
import { PolylinePlacing } from "./placing";
import type { PolylineKind } from "./polyline-tools";

/** Waits for the first point. Enter drops a plain shape in the middle of the view, for the keyboard. */
export class PolylineIdle extends ToolState {
  override cursor = "crosshair";
  readonly #kind: PolylineKind;
  #hover: SheetPointer | null = null;

  constructor(machine: ToolMachine, kind: PolylineKind) {
    super(machine);
    this.#kind = kind;
  }

  override pointerMove(pointer: SheetPointer): void {
    this.#hover = pointer;
    this.store.touchToolPicture();
  }

  override pointerDown(pointer: SheetPointer): void {
    this.machine.go(new PolylinePlacing(this.machine, this.#kind, pointer));
  }

  override keyDown(key: SheetKey): boolean {
    if (key.key !== "Enter") return false;
    const { document, drawing, view, medium } = this.store.state;
    const { left, bottom, right, top } = defaultBox(drawing, view);
    const points: Xy[] = this.#kind.closed
      ? [
          [left, bottom],
          [right, bottom],
          [(left + right) / 2, top],
        ]
      : [
          [left, bottom],
          [right, bottom],
        ];
    const id = freeId(document.paint, this.#kind.base);
    this.store.edit(this.#kind.label, (scene) => addPatch(scene, this.#kind.make(id, medium, points)));
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
