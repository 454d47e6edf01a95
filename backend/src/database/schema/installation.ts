import { boolean, check, integer, pgTable } from "drizzle-orm/pg-core";
import { sql } from "drizzle-orm";
import { moment } from "./columns.js";

/** One row: what happened to this installation once and must not happen twice. */
export const installation = pgTable(
  "installation",
  {
    id: integer().primaryKey().default(1),
    demoSeeded: boolean().notNull().default(false),
    firstOwnerMade: boolean().notNull().default(false),
    createdAt: moment().notNull().defaultNow(),
  },
  (table) => [check("installation_single", sql`${table.id} = 1`)],
);
