import { isPerfect, MAXIMA, type Medium, type Scene } from "@heddle/kernels/scene";
import { useState } from "react";
import { idFromName } from "../document/edits";
import { matchingMagneticLoss } from "./matching";
import { ChoiceField, FieldGrid, NumberField, TextEntry } from "./fields";

type Kind = "fill" | "electric" | "magnetic";

interface Draft {
  name: string;
  kind: Kind;
  relativePermittivity: number;
  relativePermeability: number;
  conductivity: number;
  magneticLoss: number;
}

const draftOf = (medium: Medium | null): Draft => ({
  name: medium?.name ?? "",
  kind: medium !== null && isPerfect(medium) ? medium.perfect : "fill",
  relativePermittivity: 1,
  relativePermeability: 1,
  conductivity: 0,
  magneticLoss: 0,
  ...(medium !== null && !isPerfect(medium)
    ? {
        relativePermittivity: medium.relativePermittivity,
        relativePermeability: medium.relativePermeability,
        conductivity: medium.conductivity,
        magneticLoss: medium.magneticLoss,
      }
    : {}),
});

const atLeastOne = (value: number): string | null =>
  value >= 1 && value <= 1e6 ? null : "Give a number from 1 to 1 000 000.";
const notNegative = (value: number): string | null =>
  value >= 0 && value <= 1e12 ? null : "Give 0 or more.";

/** A quick editor for one medium: name, εr, μr, σ, σ*. Poles that the medium has are kept. */
export function MediumForm(props: {
  scene: Scene;
  /** null: a new one. */
  medium: Medium | null;
  /** Patches made of it. */
  used: number;
  onSave: (medium: Medium) => void;
  onRemove: (id: string) => void;
  onClose: () => void;
}) {
  const { scene, medium, used, onSave, onRemove, onClose } = props;
  const [draft, setDraft] = useState<Draft>(() => draftOf(medium));
  const [said, setSaid] = useState<string | null>(null);
  const set = (part: Partial<Draft>): void => {
    setSaid(null);
    setDraft((before) => ({ ...before, ...part }));
  };
  const isBackground = medium !== null && scene.background === medium.id;
  const save = (): void => {
    const name = draft.name.trim();
    const id = medium?.id ?? idFromName([...scene.media, { id: "air" }, { id: "pec" }], name);
    const poles =
      medium !== null && !isPerfect(medium)
        ? { electricPoles: medium.electricPoles, magneticPoles: medium.magneticPoles }
        : { electricPoles: [], magneticPoles: [] };
    const { kind, relativePermittivity, relativePermeability, conductivity, magneticLoss } = draft;
    onSave(
      kind === "fill"
        ? { id, name, relativePermittivity, relativePermeability, conductivity, magneticLoss, ...poles }
        : { id, name, perfect: kind },
    );
  };
  return (
    <form
      className="medium-form"
      aria-label={medium === null ? "New medium" : `Edit ${medium.name}`}
      onSubmit={(event) => {
        event.preventDefault();
        if (draft.name.trim() === "") setSaid("Give the medium a name.");
        else save();
      }}
    >
      <FieldGrid>
        <TextEntry<string>
          wide
          label="Name"
          shown={draft.name}
          read={(text) =>
            text.trim() === ""
              ? { ok: false, sentence: "Give the medium a name." }
              : { ok: true, value: text.trim().slice(0, MAXIMA.nameLength) }
          }
          onCommit={(name) => {
            set({ name });
          }}
        />
        <ChoiceField<Kind>
          wide
          label="Kind"
          value={draft.kind}
          choices={[
            ["fill", "material: ε, μ, losses"],
            ["electric", "perfect electric conductor"],
            ["magnetic", "perfect magnetic conductor"],
          ]}
          onCommit={(kind) => {
            set({ kind });
          }}
        />
        {draft.kind !== "fill" ? null : (
          <>
            <NumberField
              label="εr"
              value={draft.relativePermittivity}
              check={atLeastOne}
              onCommit={(relativePermittivity) => {
                set({ relativePermittivity });
              }}
            />
            <NumberField
              label="μr"
              value={draft.relativePermeability}
              check={atLeastOne}
              onCommit={(relativePermeability) => {
                set({ relativePermeability });
              }}
            />
            <NumberField
              label="σ"
              unit="S/m"
              value={draft.conductivity}
              check={notNegative}
              onCommit={(conductivity) => {
                set({ conductivity });
              }}
            />
            <NumberField
              label="σ*"
              unit="Ω/m"
              value={draft.magneticLoss}
              check={notNegative}
              onCommit={(magneticLoss) => {
                set({ magneticLoss });
              }}
            />
          </>
        )}
      </FieldGrid>
      {said === null ? null : (
        <p className="field-said" role="alert">
          {said}
        </p>
      )}
      <div className="form-actions">
        {draft.kind === "fill" && draft.conductivity > 0 ? (
          <button
            type="button"
            className="quiet-button"
            title="Sets σ* so that σ/ε = σ*/μ: an ideal absorber that does not reflect"
            onClick={() => {
              set({ magneticLoss: Number(matchingMagneticLoss(draft).toPrecision(6)) });
            }}
          >
            Match σ*
          </button>
        ) : null}
        {medium === null ? null : (
          <button
            type="button"
            className="quiet-button"
            disabled={used > 0 || isBackground}
            title={
              used > 0
                ? `${String(used)} patches are made of it`
                : isBackground
                  ? "it fills the section"
                  : undefined
            }
            onClick={() => {
              onRemove(medium.id);
            }}
          >
            Remove
          </button>
        )}
        <span className="form-gap" />
        <button type="button" className="quiet-button" onClick={onClose}>
          Cancel
        </button>
        <button type="submit" className="strong-button">
          {medium === null ? "Add" : "Change"}
        </button>
      </div>
    </form>
  );
}
