import { boolean, pgTable, text, uuid } from "drizzle-orm/pg-core";
import { moment } from "./columns.js";

export const workspaces = pgTable("workspaces", {
  id: uuid().primaryKey().defaultRandom(),
  name: text().notNull(),
  /** Seeded with invented people and scenes at the first start. */
  demo: boolean().notNull().default(false),
  createdAt: moment().notNull().defaultNow(),
});
