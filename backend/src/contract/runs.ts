import { z } from "zod";
import { PersonDto } from "./people.js";

export const RunState = z
  .enum(["queued", "running", "paused", "done", "stopped", "failed", "interrupted"])
  .meta({ id: "RunState" });
export type RunState = z.infer<typeof RunState>;

export const isOver = (state: RunState): boolean => !["queued", "running", "paused"].includes(state);

const Grid = z.object({
  nx: z.int(),
  ny: z.int(),
  dxMm: z.number(),
  dyMm: z.number(),
  stepPs: z.number(),
  courant: z.number(),
  maxSteps: z.int(),
});

/** GET /api/runs/:runId; POST /api/scenes/:sceneId/runs -> 201 RunDto; GET /api/scenes/:sceneId/runs, newest first */
export const RunDto = z
  .object({
    id: z.string(),
    sceneId: z.string(),
    revision: z.int(),
    sha256: z.string(),
    state: RunState,
    /** Place in the queue, 1 is next; null once it started. */
    queuePlace: z.int().nullable(),
    by: PersonDto,
    queuedAt: z.iso.datetime(),
    startedAt: z.iso.datetime().nullable(),
    endedAt: z.iso.datetime().nullable(),
    /** Known once the run has started. */
    grid: Grid.nullable(),
    step: z.int(),
    timeNs: z.number(),
    decayDb: z.number().nullable(),
    cellStepsPerSecond: z.number().nullable(),
    /** Picoseconds of field time a second; null: as fast as the server goes. */
    pacePsPerSecond: z.number().nullable(),
    /** Was edited while it ran: for the eye, never evidence. */
    edited: z.boolean(),
    /** Steps at which live edits took effect. */
    edits: z.array(z.object({ step: z.int(), at: z.iso.datetime(), by: PersonDto })),
    /** Why it failed or was interrupted, as a sentence. */
    message: z.string().nullable(),
    stopReason: z.enum(["decay", "time", "cancelled"]).nullable(),
    /** Is solved on a finer mesh, too. */
    twoMesh: z.boolean(),
    /** Is solved without its patches marked `shield`, too. */
    shielding: z.boolean(),
  })
  .meta({ id: "Run" });
export type RunDto = z.infer<typeof RunDto>;

/** Starts the scene's given revision. */
export const StartRunBody = z
  .strictObject({
    revision: z.int().min(1),
    paused: z.boolean().default(false),
    pacePsPerSecond: z.number().positive().max(1e9).nullable().default(null),
    /** Solves the scene on a finer mesh, too, and gives figures at zero cell size with their uncertainty. */
    twoMesh: z.boolean().default(false),
    /** Solves the scene without its patches marked `shield`, too, and gives their shielding. */
    shielding: z.boolean().default(false),
  })
  .meta({ id: "StartRunBody" });

/** POST /api/runs/:runId/commands -> RunDto; 409 "wrong-state" where the state does not allow it. */
export const RunCommandBody = z
  .discriminatedUnion("kind", [
    z.strictObject({ kind: z.literal("pause") }),
    z.strictObject({ kind: z.literal("resume") }),
    z.strictObject({ kind: z.literal("step"), steps: z.int().min(1).max(10_000).default(1) }),
    z.strictObject({ kind: z.literal("stop") }),
    z.strictObject({
      kind: z.literal("pace"),
      picosecondsPerSecond: z.number().positive().max(1e9).nullable(),
    }),
  ])
  .meta({ id: "RunCommandBody" });
export type RunCommand = z.infer<typeof RunCommandBody>;

/** POST /api/runs/:runId/edits -> LiveEditDto: the scene as it now stands; only paint, media and sources may differ. */
export const LiveEditBody = z
  .strictObject({ document: z.record(z.string(), z.unknown()) })
  .meta({ id: "LiveEditBody" });
export const LiveEditDto = z.object({ step: z.int() }).meta({ id: "LiveEdit" });

/** GET /api/runs/:runId/result -> the result document of the kernels; 409 "wrong-state" while there is none. */
