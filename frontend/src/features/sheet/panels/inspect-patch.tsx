import { type Length, MAXIMA, type Patch } from "@heddle/kernels/scene";
import type { SheetEditor } from "../document/editor";
import type { ItemRef } from "../document/refs";
import { useSheet } from "../surface/use-sheet";
import { kindInWords } from "../surface/in-words";
import { aboveZero, ChoiceField, FieldGrid, LengthField, NumberField } from "./fields";
import { InspectorHead, putItem, SelectionActions } from "./inspect-common";
import { PointsEntry } from "./points-entry";

interface PatchProps {
  editor: SheetEditor;
  patch: Patch;
  itemRef: ItemRef;
}

/** Every number of one patch. */
export function PatchInspector({ editor, patch, itemRef }: PatchProps) {
  const readOnly = useSheet(editor, (state) => state.readOnly);
  const drawing = useSheet(editor, (state) => state.drawing);
  const put = (label: string, next: Patch): void => {
    putItem(editor, itemRef, label, next);
  };
  const media = [...drawing.mediaById.values()].map(({ id, name }) => [id, name] as const);
  return (
    <>
      <InspectorHead title={kindInWords(patch.kind)} aside={patch.id} />
      <FieldGrid>
        <Places {...{ editor, patch, itemRef }} />
        {"angle" in patch ? (
          <NumberField
            label="Angle"
            unit="°"
            value={patch.angle}
            disabled={readOnly}
            check={(angle) => (Math.abs(angle) <= 360 ? null : "Give an angle from −360° to 360°.")}
            onCommit={(angle) => {
              put("Turn", { ...patch, angle });
            }}
          />
        ) : null}
        {patch.kind === "stroke" ? (
          <LengthField
            label="Width"
            value={patch.widthMm}
            parameters={drawing.parameters}
            check={aboveZero}
            disabled={readOnly}
            onCommit={(widthMm) => {
              put("Change the width", { ...patch, widthMm });
            }}
          />
        ) : null}
        {patch.kind === "film" ? (
          <NumberField
            label="Sheet"
            unit="Ω/sq"
            value={patch.ohmsPerSquare}
            disabled={readOnly}
            check={(ohms) => (ohms > 0 && ohms <= 1e9 ? null : "Give a resistance above 0 Ω per square.")}
            onCommit={(ohmsPerSquare) => {
              put("Change the film", { ...patch, ohmsPerSquare });
            }}
          />
        ) : null}
        {"medium" in patch ? (
          <ChoiceField
            wide
            label="Medium"
            value={patch.medium}
            choices={media}
            disabled={readOnly}
            onCommit={(medium) => {
              put("Change the medium", { ...patch, medium });
            }}
          />
        ) : null}
      </FieldGrid>
      {"points" in patch && patch.kind !== "stroke" ? (
        <PointsEntry
          points={patch.points}
          parameters={drawing.parameters}
          fewest={patch.kind === "polygon" ? 3 : 2}
          disabled={readOnly}
          onCommit={(points) => {
            put("Move a point", { ...patch, points });
          }}
        />
      ) : null}
      {readOnly ? null : <SelectionActions editor={editor} />}
    </>
  );
}

function Places({ editor, patch, itemRef }: PatchProps) {
  const readOnly = useSheet(editor, (state) => state.readOnly);
  const parameters = useSheet(editor, (state) => state.drawing.parameters);
  const field = (label: string, value: Length, put: (length: Length) => Patch, size = false) => (
    <LengthField
      label={label}
      value={value}
      parameters={parameters}
      disabled={readOnly}
      check={size ? aboveZero : (mm) => (Math.abs(mm) <= MAXIMA.lengthMm ? null : "That is too far away.")}
      onCommit={(length) => {
        putItem(editor, itemRef, size ? "Resize" : "Move", put(length));
      }}
    />
  );
  if (patch.kind === "rectangle")
    return (
      <>
        {field("x", patch.x, (x) => ({ ...patch, x }))}
        {field("y", patch.y, (y) => ({ ...patch, y }))}
        {field("Width", patch.width, (width) => ({ ...patch, width }), true)}
        {field("Height", patch.height, (height) => ({ ...patch, height }), true)}
      </>
    );
  if (patch.kind === "ellipse")
    return (
      <>
        {field("Centre x", patch.x, (x) => ({ ...patch, x }))}
        {field("Centre y", patch.y, (y) => ({ ...patch, y }))}
        {field("Radius x", patch.rx, (rx) => ({ ...patch, rx }), true)}
        {field("Radius y", patch.ry, (ry) => ({ ...patch, ry }), true)}
      </>
    );
  return null;
}
