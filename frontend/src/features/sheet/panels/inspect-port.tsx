import type { Length, Port } from "@heddle/kernels/scene";
import type { SheetEditor } from "../document/editor";
import type { ItemRef } from "../document/refs";
import { useSheet } from "../surface/use-sheet";
import { ChoiceField, FieldGrid, LengthField, NumberField } from "./fields";
import { InspectorHead, putItem, SelectionActions } from "./inspect-common";

const INWARD: [Port["inward"], string][] = [
  ["+x", "right"],
  ["-x", "left"],
  ["+y", "up"],
  ["-y", "down"],
];

/** Ends, direction, mode and drive of one port. */
export function PortInspector(props: { editor: SheetEditor; port: Port; itemRef: ItemRef }) {
  const { editor, port, itemRef } = props;
  const readOnly = useSheet(editor, (state) => state.readOnly);
  const parameters = useSheet(editor, (state) => state.drawing.parameters);
  const put = (label: string, next: Port): void => {
    putItem(editor, itemRef, label, next);
  };
  const length = (label: string, value: Length, next: (length: Length) => Port) => (
    <LengthField
      label={label}
      value={value}
      parameters={parameters}
      disabled={readOnly}
      onCommit={(typed) => {
        put("Move the port", next(typed));
      }}
    />
  );
  return (
    <>
      <InspectorHead title="Port" aside={port.id} />
      <FieldGrid>
        {length("From x", port.from[0], (x) => ({ ...port, from: [x, port.from[1]] }))}
        {length("From y", port.from[1], (y) => ({ ...port, from: [port.from[0], y] }))}
        {length("To x", port.to[0], (x) => ({ ...port, to: [x, port.to[1]] }))}
        {length("To y", port.to[1], (y) => ({ ...port, to: [port.to[0], y] }))}
        <ChoiceField<Port["inward"]>
          label="Inward"
          value={port.inward}
          choices={INWARD}
          disabled={readOnly}
          onCommit={(inward) => {
            put("Turn the port", { ...port, inward });
          }}
        />
        <NumberField
          label="Mode"
          value={port.mode}
          disabled={readOnly}
          check={(mode) =>
            Number.isInteger(mode) && mode >= 0 && mode <= 1000 ? null : "Give a whole number from 0."
          }
          onCommit={(mode) => {
            put("Change the mode", { ...port, mode });
          }}
        />
        {length("Plane shift", port.shiftMm, (shiftMm) => ({ ...port, shiftMm }))}
        <ChoiceField<"yes" | "no">
          label="Driven"
          value={port.drive ? "yes" : "no"}
          choices={[
            ["no", "no"],
            ["yes", "yes"],
          ]}
          disabled={readOnly}
          onCommit={(drive) => {
            put("Change the drive", { ...port, drive: drive === "yes" });
          }}
        />
      </FieldGrid>
      {readOnly ? null : <SelectionActions editor={editor} />}
    </>
  );
}
