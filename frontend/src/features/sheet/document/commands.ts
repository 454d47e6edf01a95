import { gridStepMm } from "../camera/ticks";
import { duplicateItems, removeItems, shiftItems } from "./edits";
import { allRefs, type ItemRef } from "./refs";
import type { SheetStore, ToolId } from "./store";

/** What the keyboard, menus and buttons ask of the sheet. Each does nothing where it does not apply. */

const counted = (verb: string, count: number): string =>
  count === 1 ? verb : `${verb} ${String(count)} items`;

export function deleteSelection(store: SheetStore): void {
  const { selection, readOnly } = store.state;
  if (readOnly || selection.size === 0) return;
  store.edit(counted("Delete", selection.size), (scene) => removeItems(scene, selection));
}

/** Copies lie one snap step, at least 10 pixels, to the right and below, and are selected. */
export function duplicateSelection(store: SheetStore): void {
  const { selection, readOnly, view } = store.state;
  if (readOnly || selection.size === 0) return;
  const step = gridStepMm(view.pxPerMm, 10);
  let copies: ItemRef[] = [];
  store.edit(counted("Duplicate", selection.size), (scene) => {
    const duplicated = duplicateItems(scene, selection, step, -step);
    copies = duplicated.copies;
    return duplicated.scene;
  });
  store.select(copies);
}

/** Moves the selection by whole snap steps, ten of them with `far`. */
export function nudgeSelection(store: SheetStore, across: number, up: number, far: boolean): void {
  const { selection, readOnly, view } = store.state;
  if (readOnly || selection.size === 0) return;
  const step = gridStepMm(view.pxPerMm) * (far ? 10 : 1);
  store.edit(counted("Nudge", selection.size), (scene) =>
    shiftItems(scene, selection, across * step, up * step),
  );
}

export const selectAll = (store: SheetStore): void => {
  store.select(allRefs(store.document));
};

export const ZOOM_STEP = 1.25;

/** Keys of the tools, as the rail shows them. */
export const TOOL_KEYS: Readonly<Record<ToolId, string>> = {
  select: "V",
  brush: "B",
  rectangle: "R",
  ellipse: "E",
  polygon: "P",
  wall: "W",
  source: "S",
  probe: "T",
  measure: "M",
};
