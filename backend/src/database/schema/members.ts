import { sql } from "drizzle-orm";
import { check, index, pgTable, primaryKey, text, uuid } from "drizzle-orm/pg-core";
import { MEMBER_ROLES } from "../../contract/permissions.js";
import { moment } from "./columns.js";
import { people } from "./people.js";
import { workspaces } from "./workspaces.js";

export const members = pgTable(
  "members",
  {
    workspaceId: uuid()
      .notNull()
      .references(() => workspaces.id, { onDelete: "cascade" }),
    personId: uuid()
      .notNull()
      .references(() => people.id, { onDelete: "cascade" }),
    role: text({ enum: MEMBER_ROLES }).notNull(),
    joinedAt: moment().notNull().defaultNow(),
  },
  (table) => [
    primaryKey({ columns: [table.workspaceId, table.personId] }),
    index().on(table.personId),
    check("members_role_known", sql`${table.role} in ('owner', 'engineer', 'reviewer', 'manager')`),
  ],
);
