import { drawnItem } from "../../document/drawing";
import { onlyRef } from "../../document/refs";
import { distance } from "../../geometry/points";
import { type Handle, handlesOf } from "../../geometry/handles";
import { itemAt } from "../../geometry/hit";
import { type SheetPointer, ToolState } from "../tool";
import { Marquee } from "./marquee";
import { Pressing } from "./pressing";
import { Resizing } from "./resizing";

const TURNS = ["ew-resize", "nesw-resize", "ns-resize", "nwse-resize"] as const;

/** The resize cursor that points along the handle's direction on the sheet. */
function cursorOf(handle: Handle): string {
  if (handle.kind === "vertex") return "crosshair";
  const degrees = (Math.atan2(handle.sy, handle.sx) * 180) / Math.PI + handle.angle;
  const eighth = ((Math.round(degrees / 45) % 4) + 4) % 4;
  return TURNS[eighth] ?? "move";
}

/** Nothing is pressed: hover shows what a press would do. */
export class SelectIdle extends ToolState {
  override pointerMove(pointer: SheetPointer): void {
    const handle = this.#handleAt(pointer);
    const item = itemAt(this.store.drawing, pointer.at, this.machine.reachMm);
    const cursor =
      handle !== null
        ? cursorOf(handle)
        : item === null
          ? "default"
          : this.store.state.readOnly
            ? "pointer"
            : "move";
    if (cursor === this.cursor) return;
    this.cursor = cursor;
    this.store.touchToolPicture();
  }

  override pointerDown(pointer: SheetPointer): void {
    const handle = this.#handleAt(pointer);
    const only = onlyRef(this.store.state.selection);
    if (handle !== null && only !== undefined) {
      this.machine.go(new Resizing(this.machine, only, handle));
      return;
    }
    const item = itemAt(this.store.drawing, pointer.at, this.machine.reachMm);
    this.machine.go(
      item === null ? new Marquee(this.machine, pointer) : new Pressing(this.machine, pointer, item),
    );
  }

  override escape(): void {
    this.store.select([]);
  }

  #handleAt(pointer: SheetPointer): Handle | null {
    const { selection, readOnly, drawing } = this.store.state;
    const only = onlyRef(selection);
    if (readOnly || only === undefined) return null;
    const item = drawnItem(drawing, only);
    if (item === null) return null;
    let nearest: Handle | null = null;
    let reach = this.machine.reachMm;
    for (const handle of handlesOf(item)) {
      const off = distance(pointer.at, handle.at);
      if (off <= reach) {
        reach = off;
        nearest = handle;
      }
    }
    return nearest;
  }
}
