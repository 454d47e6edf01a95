import { bigint, index, integer, pgTable, text, uuid } from "drizzle-orm/pg-core";
import { moment } from "./columns.js";
import { people } from "./people.js";

export const sessions = pgTable(
  "sessions",
  {
    id: uuid().primaryKey(),
    userId: uuid()
      .notNull()
      .references(() => people.id, { onDelete: "cascade" }),
    /** SHA-256 of the token that the cookie carries; the token itself is never kept. */
    token: text().notNull().unique(),
    expiresAt: moment().notNull(),
    ipAddress: text(),
    userAgent: text(),
    createdAt: moment().notNull().defaultNow(),
    updatedAt: moment().notNull().defaultNow(),
  },
  (table) => [index().on(table.userId)],
);

/** Ways of signing in; `password` is better-auth's salted scrypt hash. */
export const accounts = pgTable(
  "accounts",
  {
    id: uuid().primaryKey(),
    userId: uuid()
      .notNull()
      .references(() => people.id, { onDelete: "cascade" }),
    accountId: text().notNull(),
    providerId: text().notNull(),
    accessToken: text(),
    refreshToken: text(),
    idToken: text(),
    accessTokenExpiresAt: moment(),
    refreshTokenExpiresAt: moment(),
    scope: text(),
    password: text(),
    createdAt: moment().notNull().defaultNow(),
    updatedAt: moment().notNull().defaultNow(),
  },
  (table) => [index().on(table.userId)],
);

export const verifications = pgTable(
  "verifications",
  {
    id: uuid().primaryKey(),
    identifier: text().notNull(),
    value: text().notNull(),
    expiresAt: moment().notNull(),
    createdAt: moment().notNull().defaultNow(),
    updatedAt: moment().notNull().defaultNow(),
  },
  (table) => [index().on(table.identifier)],
);

/** Counters of sign-in attempts by address. */
export const rateLimits = pgTable("rate_limits", {
  id: uuid().primaryKey(),
  key: text().notNull().unique(),
  count: integer().notNull(),
  /** Milliseconds since 1970. */
  lastRequest: bigint({ mode: "number" }).notNull(),
});
