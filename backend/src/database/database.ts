/** Opens the tables, embedded in the data folder or on a PostgreSQL server, and brings them up to date. */
import { mkdir, readFile } from "node:fs/promises";
import { PGlite } from "@electric-sql/pglite";
import { sql } from "drizzle-orm";
import { drizzle as drizzleNodePostgres } from "drizzle-orm/node-postgres";
import { migrate as migrateNodePostgres } from "drizzle-orm/node-postgres/migrator";
import type { PgDatabase, PgQueryResultHKT } from "drizzle-orm/pg-core";
import { drizzle as drizzlePglite } from "drizzle-orm/pglite";
import { migrate as migratePglite } from "drizzle-orm/pglite/migrator";
import pg from "pg";
import type { DatabaseChoice } from "../config/config.js";
import { PATHS } from "../config/paths.js";
import * as schema from "./schema/index.js";

/** Drizzle over either driver; an open transaction is one, too. */
export type Database = PgDatabase<PgQueryResultHKT, typeof schema>;

/** Injection token of the {@link Database}. */
export const DATABASE = Symbol("database");

export interface OpenDatabase {
  db: Database;
  kind: DatabaseChoice["kind"];
  close(): Promise<void>;
}

const OPTIONS = { schema, casing: "snake_case" } as const;
const MIGRATIONS = { migrationsFolder: PATHS.migrations };
/** Any fixed number of ours: servers that start together migrate one after the other. */
const MIGRATION_LOCK = 4_680_001;

/** Brings an embedded database up to date. */
export const migrateEmbedded = (client: PGlite): Promise<void> =>
  migratePglite(drizzlePglite(client, OPTIONS), MIGRATIONS);

async function embedded(kind: OpenDatabase["kind"], client: PGlite): Promise<OpenDatabase> {
  await migrateEmbedded(client);
  return { db: drizzlePglite(client, OPTIONS), kind, close: () => client.close() };
}

async function openFolder(folder: string): Promise<OpenDatabase> {
  await mkdir(folder, { recursive: true, mode: 0o700 });
  return await embedded("embedded", await PGlite.create(folder));
}

async function openMemory(snapshot: string | undefined): Promise<OpenDatabase> {
  const options = snapshot === undefined ? {} : { loadDataDir: new Blob([await readFile(snapshot)]) };
  return await embedded("memory", await PGlite.create("memory://", options));
}

async function openPostgres(url: string): Promise<OpenDatabase> {
  const pool = new pg.Pool({ connectionString: url, max: 10, connectionTimeoutMillis: 10_000 });
  // An idle connection that the server drops is replaced at the next query; unheard, it would end the process.
  pool.on("error", () => undefined);
  try {
    const client = await pool.connect();
    try {
      const one = drizzleNodePostgres(client, OPTIONS);
      await one.execute(sql`select pg_advisory_lock(${MIGRATION_LOCK})`);
      await migrateNodePostgres(one, MIGRATIONS);
      await one.execute(sql`select pg_advisory_unlock(${MIGRATION_LOCK})`);
    } finally {
      // Ends the connection and with it the lock, whatever happened.
      client.release(true);
    }
  } catch (error) {
    await pool.end();
    throw error;
  }
  return { db: drizzleNodePostgres(pool, OPTIONS), kind: "postgres", close: () => pool.end() };
}

/**
 * Opens and migrates the database. The embedded one takes no lock of its own: hold the data folder's first.
 * @throws whatever the driver throws, when the server is out of reach or a migration fails.
 */
export function openDatabase(choice: DatabaseChoice): Promise<OpenDatabase> {
  switch (choice.kind) {
    case "postgres":
      return openPostgres(choice.url);
    case "embedded":
      return openFolder(choice.folder);
    case "memory":
      return openMemory(choice.snapshot);
  }
}
