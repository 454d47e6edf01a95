import { mediumAt } from "@heddle/kernels/scene";
import { useCallback, useSyncExternalStore } from "react";
import type { FieldSlot } from "../../features/field";
import { FieldReadout } from "../../features/field";
import type { SheetEditor } from "../../features/sheet";
import { useSheet } from "../../features/sheet";
import type { PointMm } from "../../hooks/viewport";
import type { HoverStore } from "./hover-store";

export interface ReadoutProps {
  editor: SheetEditor;
  hover: HoverStore;
  slot: FieldSlot;
  grid: { nx: number; ny: number } | null;
}

/** The read-out under the pointer; the only part of the page that renders as the pointer moves. */
export function Readout({ editor, hover, slot, grid }: ReadoutProps) {
  const at = useSyncExternalStore(hover.subscribe, hover.get);
  const drawing = useSheet(editor, (state) => state.drawing);
  const nameAt = useCallback(
    ({ xMm, yMm }: PointMm) => {
      const { paint, mediaById, scene } = drawing;
      return mediumAt({ paint, mediaById, background: scene.background }, xMm, yMm)?.name ?? null;
    },
    [drawing],
  );
  return (
    <div className="sheet-readout">
      <FieldReadout
        slot={slot}
        section={{ widthMm: drawing.widthMm, heightMm: drawing.heightMm }}
        at={at}
        grid={grid}
        mediumAt={nameAt}
      />
    </div>
  );
}
