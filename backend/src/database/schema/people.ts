import { boolean, pgTable, text, uuid } from "drizzle-orm/pg-core";
import { moment } from "./columns.js";

export const people = pgTable("people", {
  id: uuid().primaryKey(),
  name: text().notNull(),
  /** Lower case. */
  email: text().notNull().unique(),
  emailVerified: boolean().notNull().default(false),
  image: text(),
  createdAt: moment().notNull().defaultNow(),
  updatedAt: moment().notNull().defaultNow(),
});
