import { Inject, Injectable } from "@nestjs/common";
import { desc, eq } from "drizzle-orm";
import type { ActivityDto } from "../contract/projects.js";
import { DATABASE, type Database } from "../database/database.js";
import { firstRow } from "../database/rows.js";
import { activity, people, projects } from "../database/schema/index.js";

export interface Deed {
  projectId: string;
  sceneId: string | null;
  personId: string;
  /** What was done, without who: `started a run of "Slotted box"`. */
  sentence: string;
  /** A deed of the same kind, on the same scene, by the same person replaces the one before within an hour. */
  kind?: "save";
}

const SAVE_WORD = "saved ";
const HOUR_MS = 3_600_000;
const LISTED = 200;

/** What was done in a project. */
@Injectable()
export class ActivityRepository {
  constructor(@Inject(DATABASE) private readonly db: Database) {}

  /** Writes a deed down and marks its project as changed; `db` is best the transaction that does it. */
  async add(db: Database, deed: Deed): Promise<void> {
    const { projectId, sceneId, personId, sentence } = deed;
    const now = new Date();
    await db.update(projects).set({ updatedAt: now }).where(eq(projects.id, projectId));
    if (deed.kind === "save") {
      const latest = await db
        .select()
        .from(activity)
        .where(eq(activity.projectId, projectId))
        .orderBy(desc(activity.id))
        .limit(1);
      const last = firstRow(latest);
      const continues =
        last?.sceneId === sceneId &&
        last.personId === personId &&
        last.sentence.startsWith(SAVE_WORD) &&
        now.getTime() - last.at.getTime() < HOUR_MS;
      if (continues) {
        await db.update(activity).set({ sentence, at: now }).where(eq(activity.id, last.id));
        return;
      }
    }
    await db.insert(activity).values({ projectId, sceneId, personId, sentence });
  }

  /** The latest deeds, newest first. */
  async list(projectId: string): Promise<ActivityDto[]> {
    const rows = await this.db
      .select({
        at: activity.at,
        who: { id: people.id, name: people.name },
        sentence: activity.sentence,
        sceneId: activity.sceneId,
      })
      .from(activity)
      .innerJoin(people, eq(people.id, activity.personId))
      .where(eq(activity.projectId, projectId))
      .orderBy(desc(activity.id))
      .limit(LISTED);
    return rows.map((row) => ({ ...row, at: row.at.toISOString() }));
  }
}
