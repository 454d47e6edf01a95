import type { Length } from "@heddle/kernels/scene";
import { addPatch, changeItems, freeId } from "../../document/edits";
import { makeRef } from "../../document/refs";
import { distance, roundToPixel, type Xy } from "../../geometry/points";
import { simplifyPolyline } from "../../geometry/simplify";
import { type SheetPointer, type ToolMachine, type ToolPicture, ToolState } from "../tool";

/** A finished stroke stays within this share of its width, and within this many pixels, of the hand's path. */
const FIDELITY = { ofWidth: 0.02, px: 0.75 } as const;

/**
 * The brush is down. The stroke grows in the document as it is painted, so that a live run can follow it; when it
 * ends it is simplified and stays geometry. With Shift it runs straight from where it began.
 */
export class Painting extends ToolState {
  override cursor = "none";
  readonly #id: string;
  readonly #rest: (at: Xy) => ToolState;
  #points: Xy[];

  constructor(machine: ToolMachine, start: SheetPointer, rest: (at: Xy) => ToolState) {
    super(machine);
    this.#id = freeId(this.store.document.paint, "stroke");
    this.#points = [start.at];
    this.#rest = rest;
  }

  override enter(): void {
    const { medium, brushWidthMm } = this.store.state;
    this.store.begin("Paint a stroke");
    this.store.update((scene) =>
      addPatch(scene, {
        kind: "stroke",
        id: this.#id,
        medium,
        widthMm: brushWidthMm,
        points: this.#asWritten(),
      }),
    );
  }

  override pointerMove(pointer: SheetPointer): void {
    const first = this.#points[0];
    const last = this.#points[this.#points.length - 1];
    if (pointer.shift) this.#points = [first, pointer.snapped];
    else if (distance(last, pointer.at) * this.store.view.pxPerMm < 1) return;
    else this.#points.push(pointer.at);
    this.#write();
  }

  override pointerUp(): void {
    const { brushWidthMm, view } = this.store.state;
    const tolerance = Math.min(brushWidthMm * FIDELITY.ofWidth, FIDELITY.px / view.pxPerMm);
    this.#points = simplifyPolyline(this.#points, tolerance);
    this.#write();
    this.store.finish();
    this.machine.go(this.#rest(this.#points.at(-1) ?? [0, 0]));
  }

  override cancel(): void {
    this.store.cancel();
    this.machine.rest();
  }

  override picture(): ToolPicture | null {
    const at = this.#points.at(-1);
    return at === undefined ? null : { brush: { at, widthMm: this.store.state.brushWidthMm } };
  }

  #write(): void {
    const points = this.#asWritten();
    this.store.update((scene) =>
      changeItems(scene, [makeRef("paint", this.#id)], (item) =>
        "points" in item && item.kind === "stroke" ? { ...item, points } : item,
      ),
    );
  }

  #asWritten(): [Length, Length][] {
    const { pxPerMm } = this.store.view;
    return this.#points.map(([x, y]) => [roundToPixel(x, pxPerMm), roundToPixel(y, pxPerMm)]);
  }
}
