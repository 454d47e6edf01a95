import type { SheetEditor } from "../document/editor";
import { useSheet } from "../surface/use-sheet";
import { NumberField } from "./fields";

/** The brush's width in mm. */
export function BrushWidth({ editor }: { editor: SheetEditor }) {
  const widthMm = useSheet(editor, (state) => state.brushWidthMm);
  return (
    <NumberField
      label="Brush width"
      unit="mm"
      value={widthMm}
      check={(value) => (value > 0 ? null : "The brush needs a width above 0 mm.")}
      onCommit={(value) => {
        editor.setBrushWidth(value);
      }}
    />
  );
}
