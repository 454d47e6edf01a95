import { changeItems } from "../document/edits";
import type { SheetEditor } from "../document/editor";
import { findPatch, type ItemRef, splitRef } from "../document/refs";
import { useSheet } from "../surface/use-sheet";
import { ChoiceField, FieldGrid } from "./fields";
import { InspectorHead, SelectionActions } from "./inspect-common";

/** What several selected items have in common: their medium. */
export function ManyInspector({ editor }: { editor: SheetEditor }) {
  const readOnly = useSheet(editor, (state) => state.readOnly);
  const selection = useSheet(editor, (state) => state.selection);
  const drawing = useSheet(editor, (state) => state.drawing);
  const areas: ItemRef[] = [];
  const media = new Set<string>();
  for (const ref of selection) {
    if (splitRef(ref).list !== "paint") continue;
    const patch = findPatch(drawing.scene, ref);
    if (patch === undefined || !("medium" in patch)) continue;
    areas.push(ref);
    media.add(patch.medium);
  }
  const first = media.values().next().value;
  const mixed = media.size > 1;
  return (
    <>
      <InspectorHead title={`${String(selection.size)} items`} />
      {first === undefined ? null : (
        <FieldGrid>
          <ChoiceField<string>
            wide
            label="Medium"
            value={mixed ? "" : first}
            choices={[
              ...(mixed ? [["", "several"] as const] : []),
              ...[...drawing.mediaById.values()].map(({ id, name }) => [id, name] as const),
            ]}
            disabled={readOnly}
            onCommit={(medium) => {
              if (medium === "") return;
              editor.edit("Change the medium", (scene) =>
                changeItems(scene, areas, (item) => ("medium" in item ? { ...item, medium } : item)),
              );
            }}
          />
        </FieldGrid>
      )}
      {readOnly ? null : <SelectionActions editor={editor} />}
    </>
  );
}
