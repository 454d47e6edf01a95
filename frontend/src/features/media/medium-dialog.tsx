import Button from "@mui/material/Button";
import Dialog from "@mui/material/Dialog";
import DialogActions from "@mui/material/DialogActions";
import DialogContent from "@mui/material/DialogContent";
import DialogTitle from "@mui/material/DialogTitle";
import TextField from "@mui/material/TextField";
import { isPerfect } from "@heddle/kernels/scene";
import { mediumFigures } from "@heddle/kernels/media";
import { useState } from "react";
import { Refusal } from "../../components/refusal";
import { useSession } from "../../hooks/session";
import { whyNot } from "../../lib/why-not";
import type { LibraryMedium, Swatch } from "./api";
import { useCreateMedium, useUpdateMedium } from "./api";
import { FigureField } from "./figure-field";
import { FigureList } from "./figure-list";
import "./medium-dialog.css";
import type { DraftKind, MediumDraft } from "./medium-draft";
import { draftOf, emptyPole, mediumId, mediumOf } from "./medium-draft";
import { PoleFields } from "./pole-fields";

interface MediumDialogProps {
  /** Null for a new medium. */
  entry: LibraryMedium | null;
  takenIds: ReadonlySet<string>;
  gigahertz: number;
  swatch: Swatch;
  onClose: () => void;
}

const isKind = (value: string): value is DraftKind => ["fill", "electric", "magnetic"].includes(value);

/** A medium's figures, with what they mean beside them while they are typed. */
export function MediumDialog({ entry, takenIds, gigahertz, swatch, onClose }: MediumDialogProps) {
  const refused = whyNot(useSession().role, "scene.edit");
  const readOnly = refused !== null;
  const create = useCreateMedium();
  const update = useUpdateMedium();
  const error: unknown = create.error ?? update.error;
  const [draft, setDraft] = useState(() => draftOf(entry));
  const [tried, setTried] = useState(false);
  const change = (part: Partial<MediumDraft>): void => setDraft({ ...draft, ...part });
  const { medium, faults } = mediumOf(draft, entry?.medium.id ?? mediumId(draft.name, takenIds));
  // An empty form should not be met with complaints; what is typed wrong is told at once.
  const shown = tried ? faults : { ...faults, name: undefined, source: undefined };
  const match = (): void => {
    if (medium === null || isPerfect(medium)) return;
    const { matchedMagneticLoss } = mediumFigures({ ...medium, magneticPoles: [] }, gigahertz);
    change({ magneticLoss: String(Number(matchedMagneticLoss.toPrecision(6))) });
  };
  const figureField = (
    field: "relativePermittivity" | "relativePermeability" | "conductivity" | "magneticLoss",
    label: string,
    unit: string,
  ) => (
    <FigureField
      label={label}
      unit={unit}
      value={draft[field]}
      fault={shown[field]}
      readOnly={readOnly}
      onChange={(value) => change({ [field]: value })}
    />
  );
  return (
    <Dialog open onClose={onClose} maxWidth="md" fullWidth aria-labelledby="medium-title">
      <form
        noValidate
        style={{ display: "contents" }}
        onSubmit={(event) => {
          event.preventDefault();
          setTried(true);
          if (medium === null || Object.keys(faults).length > 0 || readOnly) return;
          const body = { medium, source: draft.source.trim() };
          if (entry === null) create.mutate({ body }, { onSuccess: onClose });
          else update.mutate({ params: { path: { mediumId: entry.id } }, body }, { onSuccess: onClose });
        }}
      >
        <DialogTitle id="medium-title" sx={{ display: "flex", alignItems: "center", gap: "12px" }}>
          {medium === null ? null : swatch(medium, gigahertz)}
          {entry === null ? "New medium" : entry.medium.name}
        </DialogTitle>
        <DialogContent className="medium-dialog">
          <div className="medium-fields">
            <div className="medium-row">
              <TextField
                label="Name"
                value={draft.name}
                autoFocus={!readOnly}
                error={shown.name !== undefined}
                helperText={shown.name}
                slotProps={{ input: { readOnly }, htmlInput: { maxLength: 200, required: true } }}
                onChange={(event) => change({ name: event.target.value })}
              />
              <TextField
                select
                label="Kind"
                value={draft.kind}
                disabled={readOnly}
                slotProps={{ select: { native: true } }}
                onChange={(event) =>
                  isKind(event.target.value) ? change({ kind: event.target.value }) : undefined
                }
              >
                <option value="fill">Filling medium</option>
                <option value="electric">Perfect electric conductor</option>
                <option value="magnetic">Perfect magnetic conductor</option>
              </TextField>
            </div>
            {draft.kind === "fill" ? (
              <>
                <div className="medium-row">
                  {figureField("relativePermittivity", "εr", "")}
                  {figureField("relativePermeability", "μr", "")}
                </div>
                <div className="medium-row">
                  {figureField("conductivity", "σ", "S/m")}
                  {figureField("magneticLoss", "σ*", "Ω/m")}
                </div>
                {readOnly ? null : (
                  <div className="medium-row medium-buttons">
                    <Button disabled={medium === null} onClick={match}>
                      Match σ* to the electric loss
                    </Button>
                    <Button
                      onClick={() =>
                        change({
                          poles: [
                            ...draft.poles,
                            emptyPole(Math.max(-1, ...draft.poles.map(({ key }) => key)) + 1),
                          ],
                        })
                      }
                    >
                      Add a pole
                    </Button>
                  </div>
                )}
                {draft.poles.map((pole) => (
                  <PoleFields
                    key={pole.key}
                    pole={pole}
                    faults={tried ? shown : {}}
                    readOnly={readOnly}
                    onChange={(next) =>
                      change({ poles: draft.poles.map((other) => (other.key === next.key ? next : other)) })
                    }
                    onRemove={() => change({ poles: draft.poles.filter((other) => other.key !== pole.key) })}
                  />
                ))}
              </>
            ) : null}
            <TextField
              label="Source of the figures"
              value={draft.source}
              multiline
              maxRows={4}
              error={shown.source !== undefined}
              helperText={shown.source ?? "A data sheet, a handbook, a measurement."}
              slotProps={{ input: { readOnly }, htmlInput: { maxLength: 2000, required: true } }}
              onChange={(event) => change({ source: event.target.value })}
            />
            {refused === null ? null : <p className="medium-refused">{refused}</p>}
            {error === null ? null : <Refusal error={error} />}
          </div>
          <FigureList medium={medium} gigahertz={gigahertz} />
        </DialogContent>
        <DialogActions>
          <Button variant="text" onClick={onClose}>
            {readOnly ? "Close" : "Cancel"}
          </Button>
          {readOnly ? null : (
            <Button
              type="submit"
              variant="contained"
              color="primary"
              disabled={create.isPending || update.isPending}
            >
              {entry === null ? "Add to the library" : "Save"}
            </Button>
          )}
        </DialogActions>
      </form>
    </Dialog>
  );
}
