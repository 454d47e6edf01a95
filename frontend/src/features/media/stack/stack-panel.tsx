import TextField from "@mui/material/TextField";
import type { Medium } from "@heddle/kernels/scene";
import { useMemo, useState } from "react";
import { FigureField } from "../figure-field";
import { StackChart } from "./stack-chart";
import type { StackDraft } from "./stack-draft";
import { FIRST_DRAFT, layerMedia, readDraft } from "./stack-draft";
import { StackLayers } from "./stack-layers";
import "./stack.css";

/** A plane wave on layers of the library's media: what comes back, what passes, what stays. */
export function StackPanel({ media }: { media: readonly Medium[] }) {
  const [draft, setDraft] = useState<StackDraft>(FIRST_DRAFT);
  const change = (changes: Partial<StackDraft>): void => setDraft((old) => ({ ...old, ...changes }));
  const fills = useMemo(() => layerMedia(media), [media]);
  const { plan, faults } = useMemo(() => readDraft(draft, fills), [draft, fills]);
  const field = (key: "angleDeg" | "fromGHz" | "toGHz", label: string, unit: string) => (
    <FigureField
      label={label}
      unit={unit}
      value={draft[key]}
      fault={faults[key]}
      onChange={(value) => change({ [key]: value })}
    />
  );
  return (
    <section className="stack-panel" aria-labelledby="stack-heading">
      <header>
        <h2 id="stack-heading">Layers in a plane wave</h2>
        <p>
          In closed form, from air onto the first layer: the check on what a run says of a slab, and the
          quickest way to a lining’s thickness.
        </p>
      </header>
      <StackLayers draft={draft} faults={faults} media={fills} onChange={change} />
      <div className="stack-answer">
        <div className="stack-wave">
          <TextField
            select
            label="Polarization"
            value={draft.polarization}
            slotProps={{ select: { native: true } }}
            onChange={(event) => change({ polarization: event.target.value === "TEz" ? "TEz" : "TMz" })}
          >
            <option value="TMz">TMz, E across the plane of incidence</option>
            <option value="TEz">TEz, E in the plane of incidence</option>
          </TextField>
          {field("angleDeg", "From the normal", "°")}
          {field("fromGHz", "From", "GHz")}
          {field("toGHz", "To", "GHz")}
        </div>
        {plan === null ? (
          <p className="stack-words" role="status">
            Drawn when every figure is valid.
          </p>
        ) : (
          <StackChart plan={plan} />
        )}
      </div>
    </section>
  );
}
