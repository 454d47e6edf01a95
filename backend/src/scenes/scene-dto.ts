import { evaluateExpression, sceneDocumentSchema } from "@heddle/kernels/scene";
import type { SceneDto, SceneSummaryDto } from "../contract/scenes.js";
import type { LastRun, SceneRecord } from "./scenes.repository.js";

export const toSceneDto = ({ savedAt, savedBy, ...rest }: SceneRecord): SceneDto => ({
  ...rest,
  updatedAt: savedAt.toISOString(),
  updatedBy: savedBy,
});

/** mm; 0 where a drawing in progress has an expression without a value. */
function lengthMm(written: number | string, parameters: ReadonlyMap<string, number>): number {
  if (typeof written === "number") return written;
  const result = evaluateExpression(written, parameters);
  return result.ok ? result.value : 0;
}

/** The few figures of a scene that a list shows. */
export function summaryOf(record: SceneRecord, lastRun: LastRun | null): SceneSummaryDto {
  const scene = sceneDocumentSchema.parse(record.document);
  const parameters = new Map<string, number>();
  for (const { name, value } of scene.parameters) parameters.set(name, lengthMm(value, parameters));
  return {
    id: record.id,
    projectId: record.projectId,
    name: record.name,
    revision: record.revision,
    polarization: scene.polarization,
    widthMm: lengthMm(scene.section.widthMm, parameters),
    heightMm: lengthMm(scene.section.heightMm, parameters),
    document: record.document,
    updatedAt: record.savedAt.toISOString(),
    updatedBy: record.savedBy,
    lastRun:
      lastRun === null
        ? null
        : { id: lastRun.id, state: lastRun.state, revision: lastRun.revision, at: lastRun.at.toISOString() },
  };
}
