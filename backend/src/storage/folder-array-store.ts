import { randomUUID } from "node:crypto";
import { mkdir, open, readFile, rename, rm, stat } from "node:fs/promises";
import { dirname, join } from "node:path";
import type { ArrayStore } from "./array-store.js";

const SHA256 = /^[0-9a-f]{64}$/;

const isMissing = (error: unknown): boolean =>
  error instanceof Error && "code" in error && error.code === "ENOENT";

/** Arrays as files of a folder: `ab/abcd….bin`. A file is written aside, flushed and then moved into its place. */
export class FolderArrayStore implements ArrayStore {
  constructor(private readonly folder: string) {}

  async put(sha256: string, bytes: Uint8Array): Promise<void> {
    const path = this.pathOf(sha256);
    if (await exists(path)) return;
    await mkdir(dirname(path), { recursive: true, mode: 0o700 });
    const aside = `${path}.${randomUUID()}.part`;
    try {
      const file = await open(aside, "wx", 0o600);
      try {
        await file.writeFile(bytes);
        await file.sync();
      } finally {
        await file.close();
      }
      await rename(aside, path);
      await syncFolder(dirname(path));
    } catch (error) {
      await rm(aside, { force: true });
      throw error;
    }
  }

  async get(sha256: string): Promise<Uint8Array | null> {
    try {
      return await readFile(this.pathOf(sha256));
    } catch (error) {
      if (isMissing(error)) return null;
      throw error;
    }
  }

  private pathOf(sha256: string): string {
    if (!SHA256.test(sha256)) throw new RangeError(`"${sha256}" is no SHA-256 in hexadecimal.`);
    return join(this.folder, sha256.slice(0, 2), `${sha256}.bin`);
  }
}

async function exists(path: string): Promise<boolean> {
  try {
    await stat(path);
    return true;
  } catch (error) {
    if (isMissing(error)) return false;
    throw error;
  }
}

/** A renamed file survives a power cut only once its folder is flushed, too; Windows has no such call. */
async function syncFolder(path: string): Promise<void> {
  if (process.platform === "win32") return;
  const folder = await open(path, "r");
  try {
    await folder.sync();
  } finally {
    await folder.close();
  }
}
