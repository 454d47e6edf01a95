import { Inject, Injectable } from "@nestjs/common";
import { and, asc, desc, eq, inArray, sql } from "drizzle-orm";
import type { PersonDto } from "../contract/people.js";
import type { RunState } from "../contract/runs.js";
import { DATABASE, type Database } from "../database/database.js";
import { firstRow, writtenRow } from "../database/rows.js";
import { people, projects, runs, sceneRevisions, scenes } from "../database/schema/index.js";
import type { Judged } from "./judge.js";

/** One revision of a scene, with what names it. */
export interface SceneRecord {
  id: string;
  projectId: string;
  projectName: string;
  name: string;
  revision: number;
  document: Record<string, unknown>;
  sha256: string;
  savedAt: Date;
  savedBy: PersonDto;
}

export interface LastRun {
  sceneId: string;
  id: string;
  state: RunState;
  revision: number;
  at: Date;
}

const revisionColumns = {
  id: scenes.id,
  projectId: scenes.projectId,
  projectName: projects.name,
  name: scenes.name,
  revision: sceneRevisions.revision,
  document: sceneRevisions.document,
  sha256: sceneRevisions.sha256,
  savedAt: sceneRevisions.savedAt,
  savedBy: { id: people.id, name: people.name },
};

@Injectable()
export class ScenesRepository {
  constructor(@Inject(DATABASE) private readonly db: Database) {}

  private revisions() {
    return this.db
      .select(revisionColumns)
      .from(sceneRevisions)
      .innerJoin(scenes, eq(scenes.id, sceneRevisions.sceneId))
      .innerJoin(projects, eq(projects.id, scenes.projectId))
      .innerJoin(people, eq(people.id, sceneRevisions.savedBy));
  }

  /** The latest revision of every scene of a project, by name. */
  listOfProject(projectId: string): Promise<SceneRecord[]> {
    return this.revisions()
      .where(and(eq(scenes.projectId, projectId), eq(sceneRevisions.revision, scenes.revision)))
      .orderBy(asc(scenes.name), asc(scenes.id));
  }

  /** The latest revision, or null for a scene that the workspace does not have. */
  async find(workspaceId: string, sceneId: string): Promise<SceneRecord | null> {
    const rows = await this.revisions().where(
      and(
        eq(scenes.id, sceneId),
        eq(projects.workspaceId, workspaceId),
        eq(sceneRevisions.revision, scenes.revision),
      ),
    );
    return firstRow(rows) ?? null;
  }

  async findRevision(workspaceId: string, sceneId: string, revision: number): Promise<SceneRecord | null> {
    const rows = await this.revisions().where(
      and(
        eq(scenes.id, sceneId),
        eq(projects.workspaceId, workspaceId),
        eq(sceneRevisions.revision, revision),
      ),
    );
    return firstRow(rows) ?? null;
  }

  /** Newest first, without the documents. */
  listRevisions(sceneId: string): Promise<{ revision: number; sha256: string; at: Date; by: PersonDto }[]> {
    return this.db
      .select({
        revision: sceneRevisions.revision,
        sha256: sceneRevisions.sha256,
        at: sceneRevisions.savedAt,
        by: { id: people.id, name: people.name },
      })
      .from(sceneRevisions)
      .innerJoin(people, eq(people.id, sceneRevisions.savedBy))
      .where(eq(sceneRevisions.sceneId, sceneId))
      .orderBy(desc(sceneRevisions.revision));
  }

  /** The run that was asked for last, by scene. */
  async lastRuns(sceneIds: readonly string[]): Promise<LastRun[]> {
    if (sceneIds.length === 0) return [];
    return await this.db
      .selectDistinctOn([runs.sceneId], {
        sceneId: runs.sceneId,
        id: runs.id,
        state: runs.state,
        revision: runs.revision,
        at: runs.queuedAt,
      })
      .from(runs)
      .where(inArray(runs.sceneId, [...sceneIds]))
      .orderBy(runs.sceneId, desc(runs.queuedAt), desc(runs.id));
  }

  /** Adds a scene with its first revision, best inside an open transaction. */
  async create(db: Database, projectId: string, judged: Judged, personId: string): Promise<string> {
    const made = await db
      .insert(scenes)
      .values({ projectId, name: judged.name, updatedBy: personId })
      .returning({ id: scenes.id });
    const scene = writtenRow(made, "scene");
    await this.keep(db, scene.id, 1, judged, personId);
    return scene.id;
  }

  /**
   * Adds the revision after `baseRevision`, best inside an open transaction.
   * @returns its number, or null where `baseRevision` is no longer the latest
   */
  async append(
    db: Database,
    sceneId: string,
    baseRevision: number,
    judged: Judged,
    personId: string,
  ): Promise<number | null> {
    const moved = await db
      .update(scenes)
      .set({ revision: baseRevision + 1, name: judged.name, updatedAt: new Date(), updatedBy: personId })
      .where(and(eq(scenes.id, sceneId), eq(scenes.revision, baseRevision)))
      .returning({ id: scenes.id });
    if (moved.length === 0) return null;
    await this.keep(db, sceneId, baseRevision + 1, judged, personId);
    return baseRevision + 1;
  }

  /** @returns false while one of the scene's runs is not over; then nothing is deleted */
  async remove(sceneId: string): Promise<boolean> {
    const gone = await this.db
      .delete(scenes)
      .where(
        and(
          eq(scenes.id, sceneId),
          sql`not exists (select 1 from ${runs} where ${runs.sceneId} = ${sceneId} and ${runs.state} in ('queued', 'running', 'paused'))`,
        ),
      )
      .returning({ id: scenes.id });
    return gone.length > 0;
  }

  private async keep(
    db: Database,
    sceneId: string,
    revision: number,
    judged: Judged,
    personId: string,
  ): Promise<void> {
    const { document, sha256 } = judged;
    await db.insert(sceneRevisions).values({ sceneId, revision, document, sha256, savedBy: personId });
  }
}
