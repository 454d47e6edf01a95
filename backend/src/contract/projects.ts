import { z } from "zod";
import { PersonDto } from "./people.js";
import { RunState } from "./runs.js";

const Name = z.string().trim().min(1, "Give it a name.").max(200);

/** GET /api/projects -> ProjectDto[]; POST -> 201 ProjectDto; GET, PATCH, DELETE /api/projects/:projectId */
export const ProjectDto = z
  .object({
    id: z.string(),
    name: z.string(),
    notes: z.string(),
    owner: PersonDto,
    sceneCount: z.int(),
    lastRunAt: z.iso.datetime().nullable(),
    lastRunState: RunState.nullable(),
    createdAt: z.iso.datetime(),
    updatedAt: z.iso.datetime(),
  })
  .meta({ id: "Project" });
export type ProjectDto = z.infer<typeof ProjectDto>;

export const CreateProjectBody = z
  .strictObject({
    name: Name,
    notes: z.string().max(10_000).default(""),
    /** Name of an example whose scene the project starts with. */
    example: z.string().max(100).optional(),
  })
  .meta({ id: "CreateProjectBody" });

export const UpdateProjectBody = z
  .strictObject({ name: Name.optional(), notes: z.string().max(10_000).optional() })
  .meta({ id: "UpdateProjectBody" });

/** GET /api/projects/:projectId/activity */
export const ActivityDto = z
  .object({ at: z.iso.datetime(), who: PersonDto, sentence: z.string(), sceneId: z.string().nullable() })
  .meta({ id: "Activity" });
export type ActivityDto = z.infer<typeof ActivityDto>;
