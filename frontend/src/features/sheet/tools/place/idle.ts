import { type ItemRef, splitRef } from "../../document/refs";
import { distance, type Xy } from "../../geometry/points";
import { defaultPoint } from "../default-place";
import {
  type SheetKey,
  type SheetPointer,
  snapPicture,
  type ToolMachine,
  type ToolPicture,
  ToolState,
} from "../tool";
import { PlaceDragging } from "./dragging";
import type { MarkKind } from "./place-tools";

/** A press on an existing mark takes it up, a press elsewhere sets a new one. Enter sets one in the middle. */
export class PlaceIdle extends ToolState {
  override cursor = "crosshair";
  readonly #kind: MarkKind;
  #hover: SheetPointer | null = null;

  constructor(machine: ToolMachine, kind: MarkKind) {
    super(machine);
    this.#kind = kind;
  }

  override pointerMove(pointer: SheetPointer): void {
    this.#hover = pointer;
    this.cursor = this.#markAt(pointer.at) === null ? "crosshair" : "move";
    this.store.touchToolPicture();
  }

  override pointerDown(pointer: SheetPointer): void {
    const taken = this.#markAt(pointer.at);
    if (taken === null && this.#refused()) return;
    this.machine.go(new PlaceDragging(this.machine, this.#kind, pointer.snapped, taken));
  }

  override keyDown(key: SheetKey): boolean {
    if (key.key !== "Enter" || this.#refused()) return false;
    const at = defaultPoint(this.store.drawing, this.store.view);
    const { ref } = this.#kind.add(this.store.document, at);
    this.store.edit(this.#kind.label, (scene) => this.#kind.add(scene, at).scene);
    this.store.select([ref]);
    return true;
  }

  override escape(): void {
    this.store.setTool("select");
  }

  override picture(): ToolPicture | null {
    return this.cursor === "move" ? null : snapPicture(this.#hover);
  }

  #refused(): boolean {
    const refusal = this.#kind.refusal(this.store.document);
    if (refusal !== null) this.store.say(refusal);
    return refusal !== null;
  }

  #markAt(at: Xy): ItemRef | null {
    const marks = this.store.drawing[this.#kind.list];
    const reach = this.machine.reachMm * 1.6;
    const mark = marks.findLast(
      (candidate) => "x" in candidate && distance(at, [candidate.x, candidate.y]) <= reach,
    );
    const ref: ItemRef | null = mark === undefined ? null : `${this.#kind.list}:${mark.id}`;
    return ref !== null && splitRef(ref).list === this.#kind.list ? ref : null;
  }
}
