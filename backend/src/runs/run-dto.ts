import type { RunDto } from "../contract/runs.js";
import type { RunRecord } from "./runs.repository.js";

/** @param queuePlace 1 for the run that is next; null for one that does not wait */
export const toRunDto = (run: RunRecord, queuePlace: number | null): RunDto => ({
  id: run.id,
  sceneId: run.sceneId,
  revision: run.revision,
  sha256: run.sha256,
  state: run.state,
  queuePlace,
  by: run.by,
  queuedAt: run.queuedAt.toISOString(),
  startedAt: run.startedAt?.toISOString() ?? null,
  endedAt: run.endedAt?.toISOString() ?? null,
  grid: run.grid,
  step: run.step,
  timeNs: run.timeNs,
  decayDb: run.decayDb,
  cellStepsPerSecond: run.cellStepsPerSecond,
  pacePsPerSecond: run.pacePsPerSecond,
  edited: run.edits.length > 0,
  edits: run.edits.map(({ step, at, by }) => ({ step, at, by })),
  message: run.message,
  stopReason: run.stopReason,
  twoMesh: run.twoMesh,
  shielding: run.shielding,
});
