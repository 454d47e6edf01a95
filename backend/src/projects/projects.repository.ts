import { Inject, Injectable } from "@nestjs/common";
import { and, asc, count, desc, eq, sql } from "drizzle-orm";
import type { PersonDto } from "../contract/people.js";
import type { RunState } from "../contract/runs.js";
import { DATABASE, type Database } from "../database/database.js";
import { firstRow, writtenRow } from "../database/rows.js";
import { people, projects, runs, scenes } from "../database/schema/index.js";

export interface ProjectRecord {
  id: string;
  name: string;
  notes: string;
  owner: PersonDto;
  sceneCount: number;
  lastRun: { at: Date; state: RunState } | null;
  createdAt: Date;
  updatedAt: Date;
}

@Injectable()
export class ProjectsRepository {
  constructor(@Inject(DATABASE) private readonly db: Database) {}

  /** By name. */
  list(workspaceId: string): Promise<ProjectRecord[]> {
    return this.select(workspaceId);
  }

  async find(workspaceId: string, projectId: string): Promise<ProjectRecord | null> {
    return firstRow(await this.select(workspaceId, projectId)) ?? null;
  }

  async create(
    db: Database,
    values: { workspaceId: string; ownerId: string; name: string; notes: string },
  ): Promise<string> {
    return writtenRow(await db.insert(projects).values(values).returning({ id: projects.id }), "project").id;
  }

  async update(projectId: string, changes: { name?: string; notes?: string }): Promise<void> {
    await this.db
      .update(projects)
      .set({ ...changes, updatedAt: new Date() })
      .where(eq(projects.id, projectId));
  }

  /** @returns false while a run in the project is not over; then nothing is deleted */
  async remove(projectId: string): Promise<boolean> {
    const gone = await this.db
      .delete(projects)
      .where(
        and(
          eq(projects.id, projectId),
          sql`not exists (select 1 from ${runs} join ${scenes} on ${scenes.id} = ${runs.sceneId} where ${scenes.projectId} = ${projectId} and ${runs.state} in ('queued', 'running', 'paused'))`,
        ),
      )
      .returning({ id: projects.id });
    return gone.length > 0;
  }

  private async select(workspaceId: string, projectId?: string): Promise<ProjectRecord[]> {
    const wanted = and(
      eq(projects.workspaceId, workspaceId),
      projectId === undefined ? undefined : eq(projects.id, projectId),
    );
    const rows = await this.db
      .select({
        id: projects.id,
        name: projects.name,
        notes: projects.notes,
        owner: { id: people.id, name: people.name },
        createdAt: projects.createdAt,
        updatedAt: projects.updatedAt,
      })
      .from(projects)
      .innerJoin(people, eq(people.id, projects.ownerId))
      .where(wanted)
      .orderBy(asc(projects.name), asc(projects.id));
    const counts = await this.db
      .select({ projectId: scenes.projectId, scenes: count() })
      .from(scenes)
      .innerJoin(projects, eq(projects.id, scenes.projectId))
      .where(wanted)
      .groupBy(scenes.projectId);
    const last = await this.db
      .selectDistinctOn([scenes.projectId], {
        projectId: scenes.projectId,
        at: runs.queuedAt,
        state: runs.state,
      })
      .from(runs)
      .innerJoin(scenes, eq(scenes.id, runs.sceneId))
      .innerJoin(projects, eq(projects.id, scenes.projectId))
      .where(wanted)
      .orderBy(scenes.projectId, desc(runs.queuedAt), desc(runs.id));
    const sceneCounts = new Map(counts.map((row) => [row.projectId, row.scenes]));
    const lastRuns = new Map(last.map(({ projectId: id, at, state }) => [id, { at, state }]));
    return rows.map((row) => ({
      ...row,
      sceneCount: sceneCounts.get(row.id) ?? 0,
      lastRun: lastRuns.get(row.id) ?? null,
    }));
  }
}
