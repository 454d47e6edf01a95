import { index, integer, pgTable, text, uuid } from "drizzle-orm/pg-core";
import { moment } from "./columns.js";
import { people } from "./people.js";
import { projects } from "./projects.js";

/** A scene; what it holds stands in its revisions, the latest of which is `revision`. */
export const scenes = pgTable(
  "scenes",
  {
    id: uuid().primaryKey().defaultRandom(),
    projectId: uuid()
      .notNull()
      .references(() => projects.id, { onDelete: "cascade" }),
    name: text().notNull(),
    revision: integer().notNull().default(1),
    createdAt: moment().notNull().defaultNow(),
    updatedAt: moment().notNull().defaultNow(),
    updatedBy: uuid()
      .notNull()
      .references(() => people.id),
  },
  (table) => [index().on(table.projectId)],
);
