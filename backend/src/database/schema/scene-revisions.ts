import { integer, jsonb, pgTable, primaryKey, text, uuid } from "drizzle-orm/pg-core";
import { moment } from "./columns.js";
import { people } from "./people.js";
import { scenes } from "./scenes.js";

/** Every save, whole; a row is never changed. */
export const sceneRevisions = pgTable(
  "scene_revisions",
  {
    sceneId: uuid()
      .notNull()
      .references(() => scenes.id, { onDelete: "cascade" }),
    revision: integer().notNull(),
    document: jsonb().$type<Record<string, unknown>>().notNull(),
    /** Canonical hash of the document with its defaults filled in, in hexadecimal. */
    sha256: text().notNull(),
    savedAt: moment().notNull().defaultNow(),
    savedBy: uuid()
      .notNull()
      .references(() => people.id),
  },
  (table) => [primaryKey({ columns: [table.sceneId, table.revision] })],
);
