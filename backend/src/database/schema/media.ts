import { index, jsonb, pgTable, text, uuid } from "drizzle-orm/pg-core";
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
  (table) => [index().on(table.workspaceId)],
);
