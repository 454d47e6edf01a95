import type { RunDto, SceneDto } from "@heddle/backend/contract";
import { isOver } from "@heddle/backend/contract";
import type { FieldQuantity } from "@heddle/kernels/frames";
import type { Scene } from "@heddle/kernels/scene";
import { readScene } from "@heddle/kernels/scene";
import { useCallback, useEffect, useMemo, useState } from "react";
import { PageHeader } from "../../components/page-header";
import type { Scale } from "../../features/field";
import { createFieldSlot, FieldKey, FieldLayer, quantitiesOf } from "../../features/field";
import { useMedia } from "../../features/media";
import type { RunSinks } from "../../features/runs";
import { EditedMark, RunPanel, useResult, useRun } from "../../features/runs";
import {
  Inspector,
  makeRef,
  MediaShelf,
  SheetSurface,
  ToolRail,
  useSheet,
  useSheetEditor,
} from "../../features/sheet";
import { createTraceStore, SpectrumPanel, TracePanel } from "../../features/traces";
import { useMay, useSession } from "../../hooks/session";
import { whenInWords } from "../../lib/moments";
import { whyNot } from "../../lib/why-not";
import { DraftBanner, SaveBanner } from "./banners";
import { cautionOf, DESIGN_CAUTION } from "./cautions";
import { Conflict } from "./conflict";
import { createHoverStore } from "./hover-store";
import { Readout } from "./readout";
import { SaveNote } from "./save-note";
import "./scene-page.css";
import { LimitsPanel } from "./limits-panel";
import { RingPanel } from "./ring-panel";
import { ShieldingPanel } from "./shielding-panel";
import { TrustPanel } from "./trust-panel";
import { useAutosave } from "./use-autosave";
import { useEstimate } from "./use-estimate";
import { useFrameView } from "./use-frame-view";
import { usePageKeys } from "./use-page-keys";

/** Room that a fitted section leaves for the colour key. */
const CLEARANCE = { right: 96 };

/** What lives as long as the page shows the scene, outside React state. */
function makeStores() {
  const slot = createFieldSlot();
  const traces = createTraceStore();
  let shownRun: string | null = null;
  const sinks: RunSinks = {
    onFrame: (frame, settle) => {
      slot.put(frame, settle);
    },
    onTracesFromStart: (runId, chunks) => {
      // Another run's field does not stand for this one's.
      if (runId !== shownRun) slot.clear();
      shownRun = runId;
      traces.reset(runId, chunks);
    },
    onTraces: (runId, chunks) => traces.append(runId, chunks),
  };
  return { slot, traces, sinks, hover: createHoverStore() };
}

/** The latest finished run before this one that is evidence: not edited while it ran. */
const cleanBefore = (runs: readonly RunDto[], run: RunDto | null): RunDto | null =>
  runs.find((candidate) => candidate.id !== run?.id && candidate.state === "done" && !candidate.edited) ??
  null;

/** The sheet page: drawing, field, run, traces and spectra of one scene. */
export function SceneSheet({ scene, document }: { scene: SceneDto; document: Scene }) {
  const session = useSession();
  const mayEdit = useMay("scene.edit");
  const runRefusal = whyNot(session.role, "run.control");
  const editor = useSheetEditor(document, { readOnly: !mayEdit });
  const [{ slot, traces, sinks, hover }] = useState(makeStores);
  const [quantity, setQuantity] = useState<FieldQuantity | null>(null);
  const [range, setRange] = useState<number | null>(null);
  const [scale, setScale] = useState<Scale>({ kind: "linear" });
  const [plainCanvas, setPlainCanvas] = useState<string | null>(null);
  const library = useMedia();

  const saving = useAutosave({ editor, scene, document, personId: session.person.id, readOnly: !mayEdit });
  const { autosave, state: saveState, standing, draft } = saving;
  const drawn = useSheet(editor, (state) => state.document);
  const drawing = useSheet(editor, (state) => state.drawing);
  const selection = useSheet(editor, (state) => state.selection);

  const quantities = quantitiesOf(drawn.polarization);
  const shownQuantity =
    quantity !== null && quantities.includes(quantity) ? quantity : (quantities[0] ?? "Ez");
  const view = useFrameView(editor, shownQuantity, range);
  const save = useCallback(() => autosave.flush(), [autosave]);
  const handle = useRun({ sceneId: scene.id, sinks, view, save });
  const { run, edit } = handle;
  const live = run !== null && !isOver(run.state);

  useEffect(() => {
    if (!live || runRefusal !== null) return;
    const offChange = editor.onChange(edit);
    const offGesture = editor.onGesture(edit);
    return () => {
      offChange();
      offGesture();
    };
  }, [editor, edit, live, runRefusal]);

  const result = useResult(run);
  const before = cleanBefore(handle.runs, run);
  const beforeResult = useResult(result.data === undefined ? null : before);
  const estimate = useEstimate(drawn);
  usePageKeys({
    onSave: () => void autosave.flush(),
    onRun: () => {
      if (runRefusal !== null || handle.busy) return;
      if (!live) handle.start();
      else if (run.state !== "queued") handle.command({ kind: run.state === "paused" ? "resume" : "pause" });
    },
  });

  const nameOf = useCallback(
    (id: string) => drawn.probes.find((probe) => probe.id === id)?.name ?? id,
    [drawn.probes],
  );
  const selectedProbe = useMemo(
    () => drawn.probes.find((probe) => selection.has(makeRef("probes", probe.id)))?.id ?? null,
    [drawn.probes, selection],
  );
  const momentNs = useCallback(() => slot.latest()?.timeNs ?? null, [slot]);
  const section = { widthMm: drawing.widthMm, heightMm: drawing.heightMm };
  /** Starts the scene's run together with those that it is to be compared with; null while that cannot be. */
  const compare = (options: { twoMesh: boolean; shielding: boolean }) =>
    runRefusal !== null || live || handle.busy
      ? null
      : () => {
          handle.start(options);
        };
  const limitAtGHz = (to: string, from: string): number | null => {
    const limit = drawn.limits.find(({ of }) => "s" in of && of.s[0] === to && of.s[1] === from);
    return result.data?.limits?.find(({ id }) => id === limit?.id)?.atGHz ?? null;
  };
  const dirty = saveState.kind !== "saved";
  const outdated = run !== null && (dirty || run.revision !== autosave.revision);

  const restoreDraft = (): void => {
    if (draft === null) return;
    const read = readScene(draft.document);
    saving.dropDraft();
    if (!read.ok) return;
    autosave.rebase(draft.baseRevision);
    editor.edit("Bring the kept changes back", () => read.scene);
  };

  return (
    <div className="scene-page">
      <PageHeader
        crumbs={[{ label: scene.projectName, to: `/projects/${scene.projectId}` }, { label: drawn.name }]}
        note={<SaveNote revision={autosave.revision} state={saveState} readOnly={!mayEdit} />}
      />
      <div className="scene-rail">
        <ToolRail editor={editor} />
      </div>
      <div className="scene-sheet">
        {draft !== null && <DraftBanner draft={draft} onRestore={restoreDraft} onDrop={saving.dropDraft} />}
        <SaveBanner state={saveState} onRetry={() => void autosave.flush()} />
        <div className="sheet-place">
          <SheetSurface
            editor={editor}
            clearance={CLEARANCE}
            onHover={hover.set}
            fieldLayer={
              <FieldLayer slot={slot} section={section} scale={scale} onPlainCanvas={setPlainCanvas} />
            }
            overlays={
              <>
                <div className="sheet-key">
                  <FieldKey
                    slot={slot}
                    quantity={shownQuantity}
                    quantities={quantities}
                    onQuantity={(next) => {
                      setQuantity(next);
                      // A range belongs to the quantity that it was locked for.
                      setRange(null);
                    }}
                    range={range}
                    onRange={setRange}
                    scale={scale}
                    onScale={setScale}
                  />
                </div>
                <Readout
                  editor={editor}
                  hover={hover}
                  slot={slot}
                  grid={run?.grid ?? estimate?.grid ?? null}
                />
                <div className="sheet-edited">
                  <EditedMark handle={handle} mayRun={runRefusal === null} />
                </div>
                {handle.fieldGone && (
                  <p className="sheet-said">
                    The field of this ended run is no longer kept. Run again to see it.
                  </p>
                )}
                {plainCanvas !== null && <p className="sheet-said">{plainCanvas}</p>}
              </>
            }
            titleBlock={{
              revision: `rev ${autosave.revision.toString()}${dirty ? ", edited" : ""}`,
              who: standing.updatedBy.name,
              when: whenInWords(standing.updatedAt),
              ...(estimate === null
                ? {}
                : {
                    cellMm: Math.max(estimate.grid.dxMm, estimate.grid.dyMm),
                    stepPs: (outdated ? null : run?.grid?.stepPs) ?? estimate.grid.stepPs,
                  }),
            }}
          />
        </div>
      </div>
      <aside className="scene-side" aria-label="Media, dimensions and trust">
        <MediaShelf editor={editor} library={library.data ?? []} />
        <LimitsPanel limits={drawn.limits} result={result.data ?? null} outdated={outdated} />
        <RingPanel result={result.data ?? null} outdated={outdated} nameOf={nameOf} />
        <ShieldingPanel
          marked={drawn.paint.some(({ shield }) => shield === true)}
          result={result.data ?? null}
          outdated={outdated}
          underWay={live && run.shielding}
          onRun={compare({ shielding: true, twoMesh: result.data?.extrapolation !== undefined })}
          refusal={runRefusal}
          nameOf={nameOf}
        />
        <TrustPanel
          result={result.data ?? null}
          mediaById={drawing.mediaById}
          outdated={outdated}
          caution={`${cautionOf(drawn.outOfPlane)} ${DESIGN_CAUTION}`}
          check={{
            underWay: live && run.twoMesh,
            onCheck: compare({ twoMesh: true, shielding: result.data?.shielding !== undefined }),
            refusal: runRefusal,
            limitAtGHz,
            nameOf,
          }}
        />
        <Inspector editor={editor} />
      </aside>
      <div className={drawn.probes.length === 0 ? "scene-strip traceless" : "scene-strip"}>
        <RunPanel handle={handle} refusal={runRefusal} cost={estimate?.cost ?? null} />
        <TracePanel
          store={traces}
          nameOf={nameOf}
          selected={selectedProbe}
          momentNs={momentNs}
          empty={tracesEmpty(drawn, run, handle.loading)}
        />
        <SpectrumPanel
          result={result.data ?? null}
          previous={
            beforeResult.data === undefined || before === null
              ? null
              : { result: beforeResult.data, revision: before.revision }
          }
          band={drawn.band}
          limits={drawn.limits}
          nameOf={nameOf}
          selected={selectedProbe}
          empty={spectrumEmpty(run, result.isFetching)}
        />
      </div>
      {saveState.kind === "stale" && (
        <Conflict
          stale={saveState.stale}
          editor={editor}
          autosave={autosave}
          onStanding={saving.setStanding}
        />
      )}
    </div>
  );
}

function tracesEmpty(drawn: Scene, run: RunDto | null, loading: boolean): string {
  if (drawn.probes.length === 0) return "No probe yet: place one to see the field at a point over time.";
  if (run === null)
    return loading ? "Looking for the last run…" : "Run the scene to see each probe's trace grow.";
  if (run.state === "queued") return "The run waits for its turn.";
  return isOver(run.state)
    ? "Fetching the traces of the last run…"
    : "Traces come with the run's first steps.";
}

function spectrumEmpty(run: RunDto | null, fetching: boolean): string {
  if (fetching) return "Fetching the result…";
  if (run === null) return "Spectra come with the end of a run.";
  if (run.edited) return "An edited run gives no spectrum. Run the edited scene cleanly.";
  return isOver(run.state) ? "This run ended without a result." : "Spectra come with the end of the run.";
}
