/**
 * A PostgreSQL database for one test file: a fresh one on the server of DATABASE_URL, or on a throwaway server
 * where the programs are installed. Nothing that exists on a given server is touched.
 */
import { execFile, spawn, type ChildProcess } from "node:child_process";
import { randomBytes } from "node:crypto";
import { once } from "node:events";
import { existsSync, readdirSync } from "node:fs";
import { chmod, chown, mkdtemp, rm } from "node:fs/promises";
import { createServer } from "node:net";
import { tmpdir } from "node:os";
import { delimiter, join } from "node:path";
import { setTimeout as wait } from "node:timers/promises";
import { promisify } from "node:util";
import pg from "pg";

const run = promisify(execFile);

export interface PostgresForTests {
  /** Address of an empty database. */
  url: string;
  stop(): Promise<void>;
}

/** Folder with `initdb` and `postgres`: on the path, or where Debian puts them. */
function programs(): string | null {
  const debian = "/usr/lib/postgresql";
  const folders = [
    ...(existsSync(debian) ? readdirSync(debian).map((version) => join(debian, version, "bin")) : []),
    ...(process.env.PATH ?? "").split(delimiter),
  ];
  return (
    folders.find((folder) => ["initdb", "postgres"].every((name) => existsSync(join(folder, name)))) ?? null
  );
}

/** What a run of PostgreSQL tests would use; null where there is nothing, and they are skipped by name. */
export const postgresSource = (): "given" | "installed" | null => {
  if ((process.env.DATABASE_URL ?? "") !== "") return "given";
  return process.platform !== "win32" && programs() !== null ? "installed" : null;
};

async function freePort(): Promise<number> {
  const server = createServer();
  server.listen(0, "127.0.0.1");
  await once(server, "listening");
  const address = server.address();
  server.close();
  await once(server, "close");
  if (address === null || typeof address === "string") throw new Error("The system gave no port.");
  return address.port;
}

async function answers(url: string): Promise<boolean> {
  const client = new pg.Client({ connectionString: url });
  try {
    await client.connect();
    return true;
  } catch {
    return false;
  } finally {
    await client.end().catch(() => undefined);
  }
}

async function freshDatabase(serverUrl: string): Promise<PostgresForTests> {
  const name = `heddle_test_${randomBytes(6).toString("hex")}`;
  const ask = async (statement: string): Promise<void> => {
    const client = new pg.Client({ connectionString: serverUrl });
    await client.connect();
    try {
      await client.query(statement);
    } finally {
      await client.end();
    }
  };
  await ask(`create database ${name}`);
  const url = new URL(serverUrl);
  url.pathname = `/${name}`;
  return { url: url.href, stop: () => ask(`drop database if exists ${name} with (force)`) };
}

async function stopped(server: ChildProcess): Promise<void> {
  if (server.exitCode !== null || server.signalCode !== null) return;
  const exit = once(server, "exit");
  server.kill("SIGINT");
  await exit;
}

/** The server refuses to run as root, so root starts it as the user `postgres`. */
async function throwawayServer(bin: string): Promise<PostgresForTests> {
  const isRoot = process.getuid?.() === 0;
  const folder = await mkdtemp(join(tmpdir(), "heddle-postgres-"));
  const remove = (): Promise<void> => rm(folder, { recursive: true, force: true });
  let identity: { uid?: number; gid?: number } = {};
  if (isRoot) {
    const idOf = async (flag: "-u" | "-g") => Number((await run("id", [flag, "postgres"])).stdout);
    const uid = await idOf("-u");
    const gid = await idOf("-g");
    await chown(folder, uid, gid);
    await chmod(folder, 0o700);
    identity = { uid, gid };
  }
  const data = join(folder, "data");
  const options = { ...identity, cwd: folder };
  await run(
    join(bin, "initdb"),
    ["-D", data, "-U", "heddle", "-A", "trust", "-E", "UTF8", "--no-sync"],
    options,
  );
  const port = await freePort();
  const server = spawn(
    join(bin, "postgres"),
    ["-D", data, "-p", String(port), "-h", "127.0.0.1", "-k", folder, "-F"],
    { ...options, stdio: "ignore" },
  );
  const url = `postgresql://heddle@127.0.0.1:${port}/postgres`;
  const stop = async (): Promise<void> => {
    await stopped(server);
    await remove();
  };
  for (let tries = 0; !(await answers(url)); tries++) {
    if (tries > 200 || server.exitCode !== null) {
      await stop();
      throw new Error("The throwaway PostgreSQL server did not start.");
    }
    await wait(100);
  }
  return { url, stop };
}

/** @throws where {@link postgresSource} is null, or what it names does not work */
export async function startPostgres(): Promise<PostgresForTests> {
  const given = process.env.DATABASE_URL;
  if (given !== undefined && given !== "") return await freshDatabase(given);
  const bin = programs();
  if (bin === null) throw new Error("There is no PostgreSQL here: install it, or set DATABASE_URL.");
  return await throwawayServer(bin);
}
