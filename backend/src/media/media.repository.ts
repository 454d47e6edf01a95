import { Inject, Injectable } from "@nestjs/common";
import { and, eq, sql } from "drizzle-orm";
import { DATABASE, type Database } from "../database/database.js";
import { firstRow, writtenRow } from "../database/rows.js";
import { media } from "../database/schema/index.js";

export type MediumRecord = typeof media.$inferSelect;

@Injectable()
export class MediaRepository {
  constructor(@Inject(DATABASE) private readonly db: Database) {}

  /** By the media's names. */
  list(workspaceId: string): Promise<MediumRecord[]> {
    return this.db
      .select()
      .from(media)
      .where(eq(media.workspaceId, workspaceId))
      .orderBy(sql`lower(${media.medium}->>'name')`, media.id);
  }

  async create(
    db: Database,
    values: { workspaceId: string; medium: Record<string, unknown>; source: string },
  ): Promise<MediumRecord> {
    return writtenRow(await db.insert(media).values(values).returning(), "medium");
  }

  /** @returns null for a medium that the workspace does not have */
  async update(
    workspaceId: string,
    mediumId: string,
    values: { medium: Record<string, unknown>; source: string },
  ): Promise<MediumRecord | null> {
    const rows = await this.db
      .update(media)
      .set({ ...values, updatedAt: new Date() })
      .where(and(eq(media.id, mediumId), eq(media.workspaceId, workspaceId)))
      .returning();
    return firstRow(rows) ?? null;
  }

  async remove(workspaceId: string, mediumId: string): Promise<boolean> {
    const gone = await this.db
      .delete(media)
      .where(and(eq(media.id, mediumId), eq(media.workspaceId, workspaceId)))
      .returning({ id: media.id });
    return gone.length > 0;
  }
}
