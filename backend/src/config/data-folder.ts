/** The data folder: made, tried and locked for this process before anything in it is opened. */
import { createHash, randomBytes } from "node:crypto";
import { existsSync } from "node:fs";
import { mkdir, open, readFile, realpath, rm, unlink, writeFile } from "node:fs/promises";
import { connect, createServer, type Server } from "node:net";
import { tmpdir } from "node:os";
import { join } from "node:path";

/** The folder cannot be used; the message is one sentence for the person who starts the server. */
export class DataFolderError extends Error {
  constructor(message: string) {
    super(message);
    this.name = "DataFolderError";
  }
}

export interface DataFolder {
  /** Real, absolute path. */
  path: string;
  release(): Promise<void>;
}

const codeOf = (error: unknown): string =>
  error instanceof Error && "code" in error ? String(error.code) : "unknown";

async function make(path: string): Promise<string> {
  try {
    await mkdir(path, { recursive: true, mode: 0o700 });
    const probe = join(path, `.write-test-${process.pid}`);
    try {
      await writeFile(probe, Buffer.alloc(4096));
    } finally {
      await rm(probe, { force: true });
    }
    return await realpath(path);
  } catch (error) {
    const code = codeOf(error);
    if (code === "ENOSPC" || code === "EDQUOT") {
      throw new DataFolderError(
        `The disk of the data folder ${path} is full: free some space and start again.`,
      );
    }
    if (code === "EACCES" || code === "EPERM" || code === "EROFS") {
      throw new DataFolderError(
        `The data folder ${path} cannot be written: set DATA_DIR to a folder you may write.`,
      );
    }
    if (code === "EEXIST" || code === "ENOTDIR") {
      throw new DataFolderError(
        `The data folder ${path} is a file or lies below one: set DATA_DIR to a folder.`,
      );
    }
    throw new DataFolderError(
      `The data folder ${path} cannot be used (${code}): set DATA_DIR to another one.`,
    );
  }
}

const taken = (path: string): DataFolderError =>
  new DataFolderError(
    `Another Heddle server already uses the data folder ${path}: stop it, or set DATA_DIR to another folder.`,
  );

const listen = (address: string): Promise<Server> =>
  new Promise((resolve, reject) => {
    const server = createServer((socket) => socket.destroy());
    server.once("error", reject);
    server.listen(address, () => {
      server.unref();
      resolve(server);
    });
  });

const close = (server: Server): Promise<void> =>
  new Promise((resolve, reject) => {
    server.close((error) => (error === undefined ? resolve() : reject(error)));
  });

/** Linux and Windows name sockets that vanish with their process, so a killed server leaves no stale lock. */
async function lockBySocketName(path: string, name: string): Promise<() => Promise<void>> {
  const address = process.platform === "win32" ? `\\\\.\\pipe\\heddle-${name}` : `\0heddle-${name}`;
  try {
    const server = await listen(address);
    return () => close(server);
  } catch (error) {
    if (codeOf(error) === "EADDRINUSE" || codeOf(error) === "EACCES") throw taken(path);
    throw error;
  }
}

/** Whether a process answers on a socket file; a file that nobody listens on is what a killed server left. */
const answers = (file: string): Promise<boolean> =>
  new Promise((resolve) => {
    const socket = connect(file);
    socket.once("connect", () => {
      socket.destroy();
      resolve(true);
    });
    socket.once("error", () => resolve(false));
  });

/** Elsewhere a socket file: only a living process answers on it. Named by hash, as such paths are short. */
async function lockBySocketFile(path: string, name: string): Promise<() => Promise<void>> {
  const file = join(tmpdir(), `heddle-${name}.sock`);
  if (existsSync(file)) {
    if (await answers(file)) throw taken(path);
    await unlink(file);
  }
  try {
    const server = await listen(file);
    return () => close(server);
  } catch (error) {
    if (codeOf(error) === "EADDRINUSE") throw taken(path);
    throw error;
  }
}

/**
 * Makes the folder, proves that it can be written, and holds it until `release` or the end of the process.
 * @throws DataFolderError when it cannot be written, is full or is held by another server
 */
export async function openDataFolder(wanted: string): Promise<DataFolder> {
  const path = await make(wanted);
  const name = createHash("sha256").update(path).digest("hex").slice(0, 32);
  const named = process.platform === "linux" || process.platform === "win32";
  const release = named ? await lockBySocketName(path, name) : await lockBySocketFile(path, name);
  return { path, release };
}

/** The installation's secret, made at the first start; readable by the server's user alone. */
export async function readSecret(folder: DataFolder): Promise<string> {
  const file = join(folder.path, "secret");
  try {
    const handle = await open(file, "wx", 0o600);
    try {
      await handle.writeFile(`${randomBytes(32).toString("hex")}\n`);
      await handle.sync();
    } finally {
      await handle.close();
    }
  } catch (error) {
    if (codeOf(error) !== "EEXIST") throw error;
  }
  const secret = (await readFile(file, "utf8")).trim();
  if (secret.length < 32) {
    throw new DataFolderError(
      `The file ${file} is damaged: remove it and start again; everyone has to sign in anew.`,
    );
  }
  return secret;
}
