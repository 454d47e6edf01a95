import { addPatch, freeId } from "../../document/edits";
import { makeRef } from "../../document/refs";
import type { SheetStore } from "../../document/store";
import { defaultBox } from "../default-place";

/** For the keyboard: a straight stroke in the middle of the view, selected for numeric entry. */
export function dropStroke(store: SheetStore): void {
  const { medium, brushWidthMm, document, drawing, view } = store.state;
  const box = defaultBox(drawing, view);
  const id = freeId(document.paint, "stroke");
  const y = (box.bottom + box.top) / 2;
  store.edit("Paint a stroke", (scene) =>
    addPatch(scene, {
      kind: "stroke",
      id,
      medium,
      widthMm: brushWidthMm,
      points: [
        [box.left, y],
        [box.right, y],
      ],
    }),
  );
  store.select([makeRef("paint", id)]);
}
