import { addPatch, freeId } from "../../document/edits";
import { makeRef } from "../../document/refs";
import { distance, type Xy } from "../../geometry/points";
import { type SheetKey, type SheetPointer, type ToolMachine, type ToolPicture, ToolState } from "../tool";
import type { PolylineKind } from "./polyline-tools";

/**
 * Points are being set, one per press. Enter, a double click or, for a closed shape, a press on the first point
 * ends it; Backspace takes the last point back; Escape gives the shape up. Shift keeps to multiples of 45°.
 */
export class PolylinePlacing extends ToolState {
  override cursor = "crosshair";
  readonly #kind: PolylineKind;
  #points: Xy[];
  #next: Xy;
  #pointer: SheetPointer;

  constructor(machine: ToolMachine, kind: PolylineKind, first: SheetPointer) {
    super(machine);
    this.#kind = kind;
    this.#points = [first.snapped];
    this.#next = first.snapped;
    this.#pointer = first;
  }

  override pointerMove(pointer: SheetPointer): void {
    this.#pointer = pointer;
    this.#next = this.#aim(pointer);
    this.store.touchToolPicture();
  }

  override pointerDown(pointer: SheetPointer): void {
    const first = this.#points[0];
    const last = this.#points[this.#points.length - 1];
    const closes =
      this.#kind.closed &&
      this.#points.length >= this.#kind.leastPoints &&
      distance(first, pointer.at) <= this.machine.reachMm;
    if (closes) {
      this.#complete();
      return;
    }
    const next = this.#aim(pointer);
    // The second press of a double click lands where the first one did.
    if (distance(last, next) > 1e-9) this.#points.push(next);
    this.#next = next;
    this.store.touchToolPicture();
  }

  override doubleClick(): void {
    this.#complete();
  }

  override keyDown(key: SheetKey): boolean {
    if (key.key === "Enter") {
      this.#complete();
      return true;
    }
    if (key.key !== "Backspace" && key.key !== "Delete") return false;
    this.#points.pop();
    if (this.#points.length === 0) this.machine.rest();
    else this.store.touchToolPicture();
    return true;
  }

  override cancel(): void {
    this.machine.rest();
  }

  override picture(): ToolPicture {
    const { medium } = this.store.state;
    const points = [...this.#points, this.#next];
    const picture: ToolPicture = { lines: [{ points, closed: this.#kind.closed && points.length > 2 }] };
    const { snapReason, snapped, shift } = this.#pointer;
    if (snapReason !== null && !shift) picture.snap = { at: snapped, reason: snapReason };
    if (this.#kind.closed && points.length > 2)
      picture.ghost = {
        patch: { kind: "polygon", id: "ghost", medium, points: points.map(([x, y]) => [x, y]), holes: [] },
        medium,
      };
    return picture;
  }

  #aim(pointer: SheetPointer): Xy {
    const last = this.#points.at(-1);
    if (!pointer.shift || last === undefined) return pointer.snapped;
    const [dx, dy] = [pointer.at[0] - last[0], pointer.at[1] - last[1]];
    const eighth = Math.round(Math.atan2(dy, dx) / (Math.PI / 4));
    const direction: Xy = [Math.cos((eighth * Math.PI) / 4), Math.sin((eighth * Math.PI) / 4)];
    const along = dx * direction[0] + dy * direction[1];
    const aimed: Xy = [last[0] + along * direction[0], last[1] + along * direction[1]];
    // On an axis the free coordinate still comes to rest; on a diagonal the direction is all that counts.
    if (eighth % 2 !== 0) return aimed;
    const rest = this.machine.snap(aimed, pointer);
    return eighth % 4 === 0 ? [rest[0], last[1]] : [last[0], rest[1]];
  }

  #complete(): void {
    if (this.#points.length < this.#kind.leastPoints) {
      this.store.say(`${this.#kind.label}: set at least ${String(this.#kind.leastPoints)} points.`);
      return;
    }
    const id = freeId(this.store.document.paint, this.#kind.base);
    const patch = this.#kind.make(id, this.store.state.medium, this.#points);
    this.store.edit(this.#kind.label, (scene) => addPatch(scene, patch));
    this.store.select([makeRef("paint", id)]);
    this.machine.rest();
  }
}
