import {
  MAXIMA,
  type FieldComponent,
  type Length,
  type Polarization,
  type Probe,
} from "@heddle/kernels/scene";
import type { SheetEditor } from "../document/editor";
import type { ItemRef } from "../document/refs";
import { useSheet } from "../surface/use-sheet";
import { aboveZero, ChoiceField, FieldGrid, LengthField, TextEntry } from "./fields";
import { InspectorHead, putItem, SelectionActions, without } from "./inspect-common";

/** The components that a section of this polarization has. */
const COMPONENTS: Readonly<Record<Polarization, readonly FieldComponent[]>> = {
  TMz: ["Ez", "Hx", "Hy"],
  TEz: ["Hz", "Ex", "Ey"],
};

const TITLES = { point: "Point probe", line: "Line probe", area: "Area probe" } as const;

/** Name, place and quantity of one probe. */
export function ProbeInspector(props: { editor: SheetEditor; probe: Probe; itemRef: ItemRef }) {
  const { editor, probe, itemRef } = props;
  const readOnly = useSheet(editor, (state) => state.readOnly);
  const polarization = useSheet(editor, (state) => state.document.polarization);
  const parameters = useSheet(editor, (state) => state.drawing.parameters);
  const put = (label: string, next: Probe): void => {
    putItem(editor, itemRef, label, next);
  };
  const length = (label: string, value: Length, next: (length: Length) => Probe, size = false) => (
    <LengthField
      label={label}
      value={value}
      parameters={parameters}
      disabled={readOnly}
      {...(size ? { check: aboveZero } : {})}
      onCommit={(typed) => {
        put(size ? "Resize the probe" : "Move the probe", next(typed));
      }}
    />
  );
  return (
    <>
      <InspectorHead title={TITLES[probe.kind]} aside={probe.id} />
      <FieldGrid>
        <TextEntry<string>
          wide
          label="Name"
          shown={probe.name ?? ""}
          disabled={readOnly}
          read={(text) => ({ ok: true, value: text.trim().slice(0, MAXIMA.nameLength) })}
          onCommit={(name) => {
            put("Name the probe", name === "" ? without(probe, "name") : { ...probe, name });
          }}
        />
        {probe.kind === "line" ? (
          <>
            {length("From x", probe.from[0], (x) => ({ ...probe, from: [x, probe.from[1]] }))}
            {length("From y", probe.from[1], (y) => ({ ...probe, from: [probe.from[0], y] }))}
            {length("To x", probe.to[0], (x) => ({ ...probe, to: [x, probe.to[1]] }))}
            {length("To y", probe.to[1], (y) => ({ ...probe, to: [probe.to[0], y] }))}
          </>
        ) : (
          <>
            {length("x", probe.x, (x) => ({ ...probe, x }))}
            {length("y", probe.y, (y) => ({ ...probe, y }))}
          </>
        )}
        {probe.kind === "area" ? (
          <>
            {length("Width", probe.width, (width) => ({ ...probe, width }), true)}
            {length("Height", probe.height, (height) => ({ ...probe, height }), true)}
          </>
        ) : null}
        {probe.kind === "point" ? (
          <ChoiceField<FieldComponent>
            wide
            label="Component"
            value={probe.field}
            disabled={readOnly}
            choices={componentChoices(polarization, probe.field)}
            onCommit={(field) => {
              put("Change the component", { ...probe, field });
            }}
          />
        ) : null}
        {probe.kind === "line" ? (
          <ChoiceField<"power" | "voltage">
            wide
            label="Quantity"
            value={probe.quantity}
            disabled={readOnly}
            choices={[
              ["power", "power through the line"],
              ["voltage", "voltage along the line"],
            ]}
            onCommit={(quantity) => {
              put("Change the quantity", { ...probe, quantity });
            }}
          />
        ) : null}
        {probe.kind === "area" ? (
          <ChoiceField<"absorbed" | "energy">
            wide
            label="Quantity"
            value={probe.quantity}
            disabled={readOnly}
            choices={[
              ["absorbed", "absorbed power"],
              ["energy", "stored energy"],
            ]}
            onCommit={(quantity) => {
              put("Change the quantity", { ...probe, quantity });
            }}
          />
        ) : null}
      </FieldGrid>
      {readOnly ? null : <SelectionActions editor={editor} />}
    </>
  );
}

function componentChoices(polarization: Polarization, present: FieldComponent): [FieldComponent, string][] {
  const own = COMPONENTS[polarization];
  const choices = own.map((field): [FieldComponent, string] => [field, field]);
  return own.includes(present)
    ? choices
    : [...choices, [present, `${present}, not in a ${polarization} section`]];
}
