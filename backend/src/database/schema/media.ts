import { sql } from "drizzle-orm";
import { jsonb, pgTable, text, uniqueIndex, uuid } from "drizzle-orm/pg-core";
import { moment } from "./columns.js";
import { workspaces } from "./workspaces.js";

/** The workspace's library of media. */
export const media = pgTable(
  "media",
  {
    id: uuid().primaryKey().defaultRandom(),
    workspaceId: uuid()
      .notNull()
      .references(() => workspaces.id, { onDelete: "cascade" }),
    medium: jsonb().$type<Record<string, unknown>>().notNull(),
    source: text().notNull(),
    createdAt: moment().notNull().defaultNow(),
    updatedAt: moment().notNull().defaultNow(),
  },
  (table) => [
    // Ids name media inside a scene; two with one id could not both be taken to a sheet.
    uniqueIndex("media_medium_id").on(table.workspaceId, sql`(${table.medium}->>'id')`),
  ],
);
