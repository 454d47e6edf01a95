/**
 * A migrated embedded database as a file, made once per set of migrations: to unpack it takes a sixth of the time
 * that making one takes, and every spec needs one.
 */
import { createHash } from "node:crypto";
import { existsSync } from "node:fs";
import { readdir, readFile, rename, writeFile } from "node:fs/promises";
import { tmpdir } from "node:os";
import { join } from "node:path";
import { PGlite } from "@electric-sql/pglite";
import { PATHS } from "../../config/paths.js";
import { migrateEmbedded } from "../database.js";

async function keyOfMigrations(): Promise<string> {
  const hash = createHash("sha256");
  for (const name of (await readdir(PATHS.migrations)).filter((file) => file.endsWith(".sql")).sort()) {
    hash.update(name).update(await readFile(join(PATHS.migrations, name)));
  }
  hash.update(await readFile(join(PATHS.migrations, "meta", "_journal.json")));
  return hash.digest("hex").slice(0, 16);
}

async function make(): Promise<string> {
  const file = join(tmpdir(), `heddle-spec-database-${await keyOfMigrations()}.tar`);
  if (existsSync(file)) return file;
  const client = await PGlite.create("memory://");
  await migrateEmbedded(client);
  const dump = await client.dumpDataDir("none");
  await client.close();
  // Several test processes may make it at once: each writes its own, and the rename is whole.
  const own = `${file}.${process.pid}`;
  await writeFile(own, Buffer.from(await dump.arrayBuffer()));
  await rename(own, file);
  return file;
}

let made: Promise<string> | undefined;

/** Path of the file, for `{ kind: "memory", snapshot }`. */
export const migratedSnapshot = (): Promise<string> => (made ??= make());
