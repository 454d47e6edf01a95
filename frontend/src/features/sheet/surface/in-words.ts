import type { Patch } from "@heddle/kernels/scene";
import { figure } from "../camera/lengths-in-words";
import type { Drawing } from "../document/drawing";
import { byId, findItem, onlyRef, type ItemRef, splitRef } from "../document/refs";
import type { SheetState } from "../document/store";
import { sourceLabel } from "../linework/draw-marks";

const KINDS: Record<Patch["kind"], string> = {
  rectangle: "Rectangle",
  ellipse: "Ellipse",
  polygon: "Polygon",
  stroke: "Stroke",
  wall: "Wall",
  film: "Film",
};

export const kindInWords = (kind: Patch["kind"]): string => KINDS[kind];

const sizeInWords = (patch: Drawing["paint"][number]): string => {
  switch (patch.kind) {
    case "rectangle":
      return `${figure(patch.width)} × ${figure(patch.height)}`;
    case "ellipse":
      return patch.rx === patch.ry
        ? `⌀ ${figure(2 * patch.rx)}`
        : `${figure(2 * patch.rx)} × ${figure(2 * patch.ry)}`;
    case "stroke":
      return `${figure(patch.widthMm)} wide`;
    default:
      return `${String(patch.points.length)} points`;
  }
};

/** What a patch is, how large and of what: "Rectangle, 200 × 12, Rubber sheet". */
export function patchInWords(patch: Patch, drawing: Drawing): { kind: string; size: string; medium: string } {
  const drawn = byId(drawing.paint).get(patch.id);
  const medium =
    "medium" in patch
      ? (drawing.mediaById.get(patch.medium)?.name ?? `unknown medium "${patch.medium}"`)
      : patch.kind === "wall"
        ? "perfect conductor"
        : `${figure(patch.ohmsPerSquare, 4)} Ω per square`;
  return {
    kind: kindInWords(patch.kind),
    size: drawn === undefined ? "cannot be drawn" : sizeInWords(drawn),
    medium,
  };
}

/** One item as a list would read it out. */
export function itemInWords(ref: ItemRef, drawing: Drawing): string {
  const item = findItem(drawing.scene, ref);
  if (item === undefined) return "";
  const { list, id } = splitRef(ref);
  if (list === "paint") {
    const { kind, size, medium } = patchInWords(item as Patch, drawing);
    return `${kind} ${id}, ${size}, ${medium}`;
  }
  if (list === "sources") {
    const source = byId(drawing.sources).get(id);
    return source === undefined
      ? `Source ${id}`
      : `Source ${sourceLabel(source, drawing.scene.polarization)}`;
  }
  if (list === "ports") return `Port ${id}`;
  return `Probe ${"name" in item ? (item.name ?? id) : id}`;
}

/** The whole sheet in one sentence, for screen readers. */
export function sheetInWords({ document, drawing, selection }: SheetState): string {
  const section = `${figure(drawing.widthMm)} by ${figure(drawing.heightMm)} millimetres`;
  const only = onlyRef(selection);
  const chosen =
    selection.size === 0
      ? "nothing selected"
      : only !== undefined
        ? `selected: ${itemInWords(only, drawing)}`
        : `${String(selection.size)} items selected`;
  return `Drawing sheet: ${document.name}, section ${section}, ${String(document.paint.length)} patches, ${chosen}`;
}
