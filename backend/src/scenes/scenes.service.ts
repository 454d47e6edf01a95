import { Inject, Injectable } from "@nestjs/common";
import { sceneDiff, type Scene } from "@heddle/kernels/scene";
import type { z } from "zod";
import type { Actor } from "../common/actor.js";
import { notFound, Refusal } from "../common/refusal.js";
import type {
  CopySceneBody,
  CreateSceneBody,
  RevisionDto,
  SaveSceneBody,
  SceneDto,
  SceneSummaryDto,
  StaleRevisionDto,
} from "../contract/scenes.js";
import { DATABASE, type Database } from "../database/database.js";
import { ExamplesService } from "../examples/examples.service.js";
import { ActivityRepository } from "../projects/activity.repository.js";
import { ProjectsService } from "../projects/projects.service.js";
import { emptyScene } from "./empty-scene.js";
import { judgeImport, judgeSave, type Judged } from "./judge.js";
import { ScenesRepository, type SceneRecord } from "./scenes.repository.js";
import { summaryOf, toSceneDto } from "./scene-dto.js";

/** Scenes of the caller's workspace and their revisions; another workspace's are not found. */
@Injectable()
export class ScenesService {
  constructor(
    @Inject(DATABASE) private readonly db: Database,
    private readonly scenes: ScenesRepository,
    private readonly projects: ProjectsService,
    private readonly activities: ActivityRepository,
    private readonly examples: ExamplesService,
  ) {}

  async list(actor: Actor, projectId: string): Promise<SceneSummaryDto[]> {
    await this.projects.get(actor, projectId);
    const records = await this.scenes.listOfProject(projectId);
    const lastRuns = await this.scenes.lastRuns(records.map(({ id }) => id));
    const byScene = new Map(lastRuns.map((run) => [run.sceneId, run]));
    return records.map((record) => summaryOf(record, byScene.get(record.id) ?? null));
  }

  /** The latest revision. @throws Refusal "not-found" */
  async get(actor: Actor, sceneId: string): Promise<SceneDto> {
    return toSceneDto(await this.find(actor, sceneId));
  }

  /** @throws Refusal "not-found" */
  async getRevision(actor: Actor, sceneId: string, revision: number): Promise<SceneDto> {
    const found = await this.scenes.findRevision(actor.workspace.id, sceneId, revision);
    if (found === null) throw notFound("revision of this scene");
    return toSceneDto(found);
  }

  async revisions(actor: Actor, sceneId: string): Promise<RevisionDto[]> {
    await this.find(actor, sceneId);
    return (await this.scenes.listRevisions(sceneId)).map((row) => ({ ...row, at: row.at.toISOString() }));
  }

  /** Adds a scene: imported, from an example, or an empty sheet. */
  async create(actor: Actor, projectId: string, body: z.output<typeof CreateSceneBody>): Promise<SceneDto> {
    await this.projects.get(actor, projectId);
    if (body.document !== undefined && body.example !== undefined) {
      throw new Refusal("bad-request", "Give a document or the name of an example, not both.");
    }
    const judged = judgeImport(await this.template(body));
    const verb = body.document === undefined ? "added" : "imported";
    return await this.keepNew(actor, projectId, judged, `${verb} the scene "${judged.name}"`);
  }

  /**
   * Keeps a document as the next revision; one that changes nothing is answered with the revision that stands.
   * @throws Refusal "stale-revision" with the revision that stands, when `baseRevision` is not the latest
   */
  async save(actor: Actor, sceneId: string, body: z.output<typeof SaveSceneBody>): Promise<SceneDto> {
    const judged = judgeSave(body.document);
    const current = await this.find(actor, sceneId);
    const { baseRevision } = body;
    if (baseRevision > current.revision) throw notFound("revision of this scene");
    if (judged.sha256 === current.sha256) return toSceneDto(current);
    const personId = actor.person.id;
    const revision = await this.db.transaction(async (tx) => {
      const next = await this.scenes.append(tx, sceneId, baseRevision, judged, personId);
      if (next !== null) {
        const sentence = `saved revision ${next} of "${judged.name}"`;
        const { projectId } = current;
        await this.activities.add(tx, { projectId, sceneId, personId, sentence, kind: "save" });
      }
      return next;
    });
    if (revision === null) throw await this.stale(actor, sceneId, baseRevision);
    return await this.getRevision(actor, sceneId, revision);
  }

  /** Keeps a document beside the scene it came from, in the same project, as a scene of its own. */
  async copy(actor: Actor, sceneId: string, body: z.output<typeof CopySceneBody>): Promise<SceneDto> {
    const origin = await this.find(actor, sceneId);
    const judged = judgeSave({ ...body.document, name: body.name });
    const sentence = `kept "${judged.name}" beside "${origin.name}"`;
    return await this.keepNew(actor, origin.projectId, judged, sentence);
  }

  /** @throws Refusal "wrong-state" while one of its runs goes on or waits */
  async remove(actor: Actor, sceneId: string): Promise<void> {
    const { projectId, name } = await this.find(actor, sceneId);
    if (!(await this.scenes.remove(sceneId))) {
      throw new Refusal("wrong-state", "A run of this scene is not over: stop it, then delete the scene.");
    }
    const sentence = `deleted the scene "${name}"`;
    await this.activities.add(this.db, { projectId, sceneId: null, personId: actor.person.id, sentence });
  }

  private async find(actor: Actor, sceneId: string): Promise<SceneRecord> {
    const found = await this.scenes.find(actor.workspace.id, sceneId);
    if (found === null) throw notFound("scene");
    return found;
  }

  private async template(body: z.output<typeof CreateSceneBody>): Promise<Record<string, unknown>> {
    const { name, document, example } = body;
    const start =
      document ??
      (example === undefined ? emptyScene("Untitled section") : (await this.examples.get(example)).document);
    return name === undefined ? start : { ...start, name };
  }

  private async keepNew(
    actor: Actor,
    projectId: string,
    judged: Judged,
    sentence: string,
  ): Promise<SceneDto> {
    const personId = actor.person.id;
    const sceneId = await this.db.transaction(async (tx) => {
      const id = await this.scenes.create(tx, projectId, judged, personId);
      await this.activities.add(tx, { projectId, sceneId: id, personId, sentence });
      return id;
    });
    return await this.get(actor, sceneId);
  }

  private async stale(actor: Actor, sceneId: string, baseRevision: number): Promise<Refusal> {
    const current = await this.find(actor, sceneId);
    const base = await this.scenes.findRevision(actor.workspace.id, sceneId, baseRevision);
    // Kept documents passed the schema when they were saved.
    const changes = base === null ? [] : sceneDiff(base.document as Scene, current.document as Scene);
    const extra: Omit<StaleRevisionDto, "code" | "message"> = {
      current: toSceneDto(current),
      changes: changes.map(({ path, sentence }) => ({ path, sentence })),
    };
    return new Refusal(
      "stale-revision",
      `${current.savedBy.name} saved revision ${current.revision} since you opened revision ${baseRevision}: take theirs, or keep yours as a copy beside it.`,
      extra,
    );
  }
}
