import { Inject, Injectable } from "@nestjs/common";
import type { z } from "zod";
import type { Actor } from "../common/actor.js";
import { notFound, Refusal } from "../common/refusal.js";
import type { ActivityDto, CreateProjectBody, ProjectDto, UpdateProjectBody } from "../contract/projects.js";
import { DATABASE, type Database } from "../database/database.js";
import { ExamplesService } from "../examples/examples.service.js";
import { judgeImport } from "../scenes/judge.js";
import { ScenesRepository } from "../scenes/scenes.repository.js";
import { ActivityRepository } from "./activity.repository.js";
import { ProjectsRepository, type ProjectRecord } from "./projects.repository.js";

const toDto = ({ lastRun, createdAt, updatedAt, ...rest }: ProjectRecord): ProjectDto => ({
  ...rest,
  lastRunAt: lastRun?.at.toISOString() ?? null,
  lastRunState: lastRun?.state ?? null,
  createdAt: createdAt.toISOString(),
  updatedAt: updatedAt.toISOString(),
});

/** Projects of the caller's workspace; another workspace's are not found. */
@Injectable()
export class ProjectsService {
  constructor(
    @Inject(DATABASE) private readonly db: Database,
    private readonly projects: ProjectsRepository,
    private readonly scenes: ScenesRepository,
    private readonly activities: ActivityRepository,
    private readonly examples: ExamplesService,
  ) {}

  async list(actor: Actor): Promise<ProjectDto[]> {
    return (await this.projects.list(actor.workspace.id)).map(toDto);
  }

  /** @throws Refusal "not-found" */
  async get(actor: Actor, projectId: string): Promise<ProjectDto> {
    const project = await this.projects.find(actor.workspace.id, projectId);
    if (project === null) throw notFound("project");
    return toDto(project);
  }

  async create(actor: Actor, body: z.output<typeof CreateProjectBody>): Promise<ProjectDto> {
    const example = body.example === undefined ? null : await this.examples.get(body.example);
    const judged = example === null ? null : judgeImport(example.document);
    const personId = actor.person.id;
    const id = await this.db.transaction(async (tx) => {
      const projectId = await this.projects.create(tx, {
        workspaceId: actor.workspace.id,
        ownerId: personId,
        name: body.name,
        notes: body.notes,
      });
      const made = { projectId, sceneId: null, personId, sentence: `made the project "${body.name}"` };
      await this.activities.add(tx, made);
      if (judged !== null) {
        const sceneId = await this.scenes.create(tx, projectId, judged, personId);
        await this.activities.add(tx, { ...made, sceneId, sentence: `added the example "${judged.name}"` });
      }
      return projectId;
    });
    return await this.get(actor, id);
  }

  async update(
    actor: Actor,
    projectId: string,
    body: z.output<typeof UpdateProjectBody>,
  ): Promise<ProjectDto> {
    const before = await this.get(actor, projectId);
    const { name, notes } = body;
    await this.projects.update(projectId, {
      ...(name === undefined ? {} : { name }),
      ...(notes === undefined ? {} : { notes }),
    });
    if (name !== undefined && name !== before.name) {
      const sentence = `renamed the project from "${before.name}" to "${name}"`;
      await this.activities.add(this.db, { projectId, sceneId: null, personId: actor.person.id, sentence });
    }
    return await this.get(actor, projectId);
  }

  /** @throws Refusal "wrong-state" while a run in it goes on or waits */
  async remove(actor: Actor, projectId: string): Promise<void> {
    await this.get(actor, projectId);
    if (!(await this.projects.remove(projectId))) {
      throw new Refusal(
        "wrong-state",
        "A run in this project is not over: stop it, then delete the project.",
      );
    }
  }

  async activity(actor: Actor, projectId: string): Promise<ActivityDto[]> {
    await this.get(actor, projectId);
    return await this.activities.list(projectId);
  }
}
