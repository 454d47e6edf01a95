import { bigserial, index, pgTable, text, uuid } from "drizzle-orm/pg-core";
import { moment } from "./columns.js";
import { people } from "./people.js";
import { projects } from "./projects.js";
import { scenes } from "./scenes.js";

/** What was done in a project, as sentences. */
export const activity = pgTable(
  "activity",
  {
    id: bigserial({ mode: "number" }).primaryKey(),
    projectId: uuid()
      .notNull()
      .references(() => projects.id, { onDelete: "cascade" }),
    sceneId: uuid().references(() => scenes.id, { onDelete: "set null" }),
    personId: uuid()
      .notNull()
      .references(() => people.id),
    sentence: text().notNull(),
    at: moment().notNull().defaultNow(),
  },
  (table) => [index().on(table.projectId, table.id)],
);
