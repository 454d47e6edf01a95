import type { Source, Waveform } from "@heddle/kernels/scene";
import type { SheetEditor } from "../document/editor";
import type { ItemRef } from "../document/refs";
import { useSheet } from "../surface/use-sheet";
import { ChoiceField, FieldGrid, LengthField, NumberField } from "./fields";
import { InspectorHead, putItem, SelectionActions, without } from "./inspect-common";

type Kind = Waveform["kind"] | "default";

const frequency = (GHz: number): string | null => (GHz > 0 ? null : "Give a frequency above 0 GHz.");

/** Place, amplitude and waveform of one source. */
export function SourceInspector(props: { editor: SheetEditor; source: Source; itemRef: ItemRef }) {
  const { editor, source, itemRef } = props;
  const readOnly = useSheet(editor, (state) => state.readOnly);
  const scene = useSheet(editor, (state) => state.document);
  const parameters = useSheet(editor, (state) => state.drawing.parameters);
  const put = (label: string, next: Source): void => {
    putItem(editor, itemRef, label, next);
  };
  const unit = source.kind === "plane-wave" ? "V/m" : scene.polarization === "TMz" ? "A" : "V";
  const { fromGHz, toGHz } = scene.band;
  const middle = Number(((fromGHz + toGHz) / 2).toPrecision(6));
  const choose = (kind: Kind): void => {
    if (kind === "default") put("Use the default pulse", without(source, "waveform"));
    else if (kind === "tone")
      put("Drive with a tone", { ...source, waveform: { kind, GHz: middle, rampCycles: 5 } });
    else if (kind === "pulse")
      put("Drive with a pulse", {
        ...source,
        waveform: { kind, centerGHz: middle, widthGHz: Number((toGHz - fromGHz).toPrecision(6)) },
      });
  };
  const choices: [Kind, string][] = [
    ["default", "pulse over the band"],
    ["pulse", "pulse"],
    ["tone", "tone"],
  ];
  if (source.waveform?.kind === "samples") choices.push(["samples", "samples"]);
  return (
    <>
      <InspectorHead title={source.kind === "line" ? "Line source" : "Plane wave"} aside={source.id} />
      <FieldGrid>
        {source.kind === "line" ? (
          <>
            <LengthField
              label="x"
              value={source.x}
              parameters={parameters}
              disabled={readOnly}
              onCommit={(x) => {
                put("Move the source", { ...source, x });
              }}
            />
            <LengthField
              label="y"
              value={source.y}
              parameters={parameters}
              disabled={readOnly}
              onCommit={(y) => {
                put("Move the source", { ...source, y });
              }}
            />
          </>
        ) : (
          <NumberField
            label="Direction"
            unit="°"
            value={source.angle}
            disabled={readOnly}
            check={(angle) => (Math.abs(angle) <= 360 ? null : "Give an angle from −360° to 360°.")}
            onCommit={(angle) => {
              put("Turn the wave", { ...source, angle });
            }}
          />
        )}
        <NumberField
          label="Amplitude"
          unit={unit}
          value={source.amplitude}
          disabled={readOnly}
          check={(value) => (Math.abs(value) <= 1e12 ? null : "Give an amplitude up to 10¹².")}
          onCommit={(amplitude) => {
            put("Change the amplitude", { ...source, amplitude });
          }}
        />
        <ChoiceField<Kind>
          wide
          label="Waveform"
          value={source.waveform?.kind ?? "default"}
          choices={choices}
          disabled={readOnly}
          onCommit={choose}
        />
        <WaveformFields
          waveform={source.waveform}
          disabled={readOnly}
          onCommit={(waveform) => {
            put("Change the waveform", { ...source, waveform });
          }}
        />
      </FieldGrid>
      {readOnly ? null : <SelectionActions editor={editor} />}
    </>
  );
}

function WaveformFields(props: {
  waveform: Waveform | undefined;
  disabled: boolean;
  onCommit: (waveform: Waveform) => void;
}) {
  const { waveform, disabled, onCommit } = props;
  if (waveform?.kind === "tone")
    return (
      <>
        <NumberField
          label="Frequency"
          unit="GHz"
          value={waveform.GHz}
          check={frequency}
          disabled={disabled}
          onCommit={(GHz) => {
            onCommit({ ...waveform, GHz });
          }}
        />
        <NumberField
          label="Rise"
          unit="periods"
          value={waveform.rampCycles}
          check={(cycles) => (cycles >= 0 && cycles <= 1e6 ? null : "Give 0 or more periods.")}
          disabled={disabled}
          onCommit={(rampCycles) => {
            onCommit({ ...waveform, rampCycles });
          }}
        />
      </>
    );
  if (waveform?.kind === "pulse")
    return (
      <>
        <NumberField
          label="Centre"
          unit="GHz"
          value={waveform.centerGHz}
          check={frequency}
          disabled={disabled}
          onCommit={(centerGHz) => {
            onCommit({ ...waveform, centerGHz });
          }}
        />
        <NumberField
          label="Width"
          unit="GHz"
          value={waveform.widthGHz}
          check={frequency}
          disabled={disabled}
          onCommit={(widthGHz) => {
            onCommit({ ...waveform, widthGHz });
          }}
        />
      </>
    );
  if (waveform?.kind === "samples")
    return (
      <p className="panel-note">
        {String(waveform.values.length)} samples, {String(waveform.stepNs)} ns apart
      </p>
    );
  return null;
}
