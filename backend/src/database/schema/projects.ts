import { index, pgTable, text, uuid } from "drizzle-orm/pg-core";
import { moment } from "./columns.js";
import { people } from "./people.js";
import { workspaces } from "./workspaces.js";

export const projects = pgTable(
  "projects",
  {
    id: uuid().primaryKey().defaultRandom(),
    workspaceId: uuid()
      .notNull()
      .references(() => workspaces.id, { onDelete: "cascade" }),
    ownerId: uuid()
      .notNull()
      .references(() => people.id),
    name: text().notNull(),
    notes: text().notNull().default(""),
    createdAt: moment().notNull().defaultNow(),
    updatedAt: moment().notNull().defaultNow(),
  },
  (table) => [index().on(table.workspaceId)],
);
