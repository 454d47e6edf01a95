import { BUILT_IN_MEDIA, type Medium, mediumSchema } from "@heddle/kernels/scene";
import { useMemo, useState } from "react";
import { mediumUsage, putMedium, removeMedium } from "../document/edits";
import type { SheetEditor } from "../document/editor";
import { bandMiddleGHz } from "../linework/hatch";
import { useSheet } from "../surface/use-sheet";
import { BrushWidth } from "./brush-width";
import { MediumForm } from "./medium-form";
import { mediumFigures } from "./medium-in-words";
import { MediumSwatch } from "./medium-swatch";
import "./panels.css";

/** A medium of the workspace's library. */
export interface LibraryMedium {
  /** As it travels; the scene's own schema judges it. */
  medium: unknown;
  /** Where its figures come from. */
  source: string;
}

/** The library's media that the scene can take and does not have yet. */
function offered(
  library: readonly LibraryMedium[],
  inScene: readonly Medium[],
): { key: string; medium: Medium }[] {
  return library.flatMap(({ medium }, at) => {
    const read = mediumSchema.safeParse(medium);
    return read.success && !inScene.some((own) => own.id === read.data.id)
      ? [{ key: String(at), medium: read.data }]
      : [];
  });
}

type Form = { kind: "closed" } | { kind: "new" } | { kind: "edit"; medium: Medium };

/** The document's media with their hatches and uses, which of them is on the brush, and the library to take more from. */
export function MediaShelf({ editor, library }: { editor: SheetEditor; library: readonly LibraryMedium[] }) {
  const scene = useSheet(editor, (state) => state.document);
  const onBrush = useSheet(editor, (state) => state.medium);
  const readOnly = useSheet(editor, (state) => state.readOnly);
  const [form, setForm] = useState<Form>({ kind: "closed" });
  const usage = useMemo(() => mediumUsage(scene), [scene]);
  const GHz = bandMiddleGHz(scene.band);
  const inScene = [
    ...scene.media,
    ...BUILT_IN_MEDIA.filter(({ id }) => !scene.media.some((own) => own.id === id)),
  ];
  const more = offered(library, inScene);
  const isOwn = (medium: Medium): boolean => scene.media.some(({ id }) => id === medium.id);

  return (
    <section className="shelf" aria-label="Media">
      <header className="shelf-head">
        <h2 className="label">Media</h2>
        {readOnly ? null : <span className="label">On the brush</span>}
      </header>
      <ul className="shelf-list">
        {inScene.map((medium) => (
          <li key={medium.id} className="shelf-row" data-active={onBrush === medium.id && !readOnly}>
            <button
              type="button"
              className="shelf-pick"
              aria-pressed={readOnly ? undefined : onBrush === medium.id}
              disabled={readOnly}
              onClick={(event) => {
                editor.setMedium(medium.id);
                handBack(event.detail);
              }}
            >
              <MediumSwatch medium={medium} GHz={GHz} />
              <span className="shelf-words">
                <span className="shelf-name">{medium.name}</span>
                <span className="shelf-figures">{mediumFigures(medium)}</span>
              </span>
            </button>
            <span className="shelf-count" title={`used by ${String(usage.get(medium.id) ?? 0)} patches`}>
              {String(usage.get(medium.id) ?? 0)}×
            </span>
            {readOnly || !isOwn(medium) ? null : (
              <button
                type="button"
                className="shelf-edit"
                aria-label={`Edit ${medium.name}`}
                onClick={() => {
                  setForm({ kind: "edit", medium });
                }}
              >
                Edit
              </button>
            )}
          </li>
        ))}
      </ul>
      {readOnly ? null : (
        <>
          <BrushWidth editor={editor} />
          <div className="shelf-actions">
            <button
              type="button"
              className="quiet-button"
              aria-expanded={form.kind === "new"}
              onClick={() => {
                setForm(form.kind === "new" ? { kind: "closed" } : { kind: "new" });
              }}
            >
              New medium
            </button>
            {more.length === 0 ? null : (
              <select
                className="shelf-library"
                aria-label="Add a medium from the library"
                value=""
                onChange={(event) => {
                  const taken = more.find(({ key }) => key === event.target.value);
                  if (taken === undefined) return;
                  editor.edit(`Add ${taken.medium.name}`, (before) => putMedium(before, taken.medium));
                  editor.setMedium(taken.medium.id);
                }}
              >
                <option value="">From the library…</option>
                {more.map(({ key, medium }) => (
                  <option key={key} value={key}>
                    {medium.name} · {mediumFigures(medium)}
                  </option>
                ))}
              </select>
            )}
          </div>
          {form.kind === "closed" ? null : (
            <MediumForm
              key={form.kind === "edit" ? form.medium.id : "new"}
              scene={scene}
              medium={form.kind === "edit" ? form.medium : null}
              used={form.kind === "edit" ? (usage.get(form.medium.id) ?? 0) : 0}
              onSave={(medium) => {
                const label = form.kind === "edit" ? `Change ${medium.name}` : `Add ${medium.name}`;
                editor.edit(label, (before) => putMedium(before, medium));
                editor.setMedium(medium.id);
                setForm({ kind: "closed" });
              }}
              onRemove={(id) => {
                editor.edit("Remove a medium", (before) => removeMedium(before, id));
                setForm({ kind: "closed" });
              }}
              onClose={() => {
                setForm({ kind: "closed" });
              }}
            />
          )}
        </>
      )}
    </section>
  );
}

/** After a click with the pointer the keyboard belongs to the sheet again; after a key it stays here. */
export function handBack(clicks: number): void {
  if (clicks > 0 && document.activeElement instanceof HTMLElement) document.activeElement.blur();
}
