import { z } from "zod";
import { PersonDto } from "./people.js";
import { RunState } from "./runs.js";

/** A scene document travels as JSON; `readScene` of the kernels is its only judge, at the server's door too. */
const Document = z.record(z.string(), z.unknown());

/** GET /api/projects/:projectId/scenes -> SceneSummaryDto[] */
export const SceneSummaryDto = z
  .object({
    id: z.string(),
    projectId: z.string(),
    name: z.string(),
    revision: z.int(),
    polarization: z.enum(["TMz", "TEz"]),
    widthMm: z.number(),
    heightMm: z.number(),
    /** The latest revision, whole: the page draws its small picture from it. */
    document: Document,
    updatedAt: z.iso.datetime(),
    updatedBy: PersonDto,
    lastRun: z
      .object({ id: z.string(), state: RunState, revision: z.int(), at: z.iso.datetime() })
      .nullable(),
  })
  .meta({ id: "SceneSummary" });
export type SceneSummaryDto = z.infer<typeof SceneSummaryDto>;

/** GET /api/scenes/:sceneId */
export const SceneDto = z
  .object({
    id: z.string(),
    projectId: z.string(),
    projectName: z.string(),
    name: z.string(),
    revision: z.int(),
    document: Document,
    sha256: z.string(),
    updatedAt: z.iso.datetime(),
    updatedBy: PersonDto,
  })
  .meta({ id: "Scene" });
export type SceneDto = z.infer<typeof SceneDto>;

/** POST /api/projects/:projectId/scenes -> 201 SceneDto. One of `document` (import) and `example`; neither: an empty sheet. */
export const CreateSceneBody = z
  .strictObject({
    name: z.string().trim().min(1).max(200).optional(),
    document: Document.optional(),
    example: z.string().max(100).optional(),
  })
  .meta({ id: "CreateSceneBody" });

/** PUT /api/scenes/:sceneId -> SceneDto, or 409 StaleRevisionDto where `baseRevision` is not the latest. */
export const SaveSceneBody = z
  .strictObject({ baseRevision: z.int().min(1), document: Document })
  .meta({ id: "SaveSceneBody" });

export const StaleRevisionDto = z
  .object({
    code: z.literal("stale-revision"),
    message: z.string(),
    /** The revision that stands now, whole, so that nothing need be fetched to decide. */
    current: SceneDto,
    /** What differs between the revision the caller started from and the one that stands. */
    changes: z.array(z.object({ path: z.string(), sentence: z.string() })),
  })
  .meta({ id: "StaleRevision" });
export type StaleRevisionDto = z.infer<typeof StaleRevisionDto>;

/** POST /api/scenes/:sceneId/copies -> 201 SceneDto: keeps the caller's version beside the one that stands. */
export const CopySceneBody = z
  .strictObject({ name: z.string().trim().min(1).max(200), document: Document })
  .meta({ id: "CopySceneBody" });

/** GET /api/scenes/:sceneId/revisions, newest first; /revisions/:revision gives SceneDto */
export const RevisionDto = z
  .object({ revision: z.int(), at: z.iso.datetime(), by: PersonDto, sha256: z.string() })
  .meta({ id: "Revision" });
export type RevisionDto = z.infer<typeof RevisionDto>;

/** GET /api/examples -> ExampleDto[]; /api/examples/:name/thumbnail.png */
export const ExampleDto = z
  .object({ name: z.string(), title: z.string(), paragraph: z.string(), document: Document })
  .meta({ id: "Example" });
export type ExampleDto = z.infer<typeof ExampleDto>;
