import { createHash } from "node:crypto";
import { mkdtemp, readdir, rm, writeFile } from "node:fs/promises";
import { tmpdir } from "node:os";
import { join } from "node:path";
import { afterEach, beforeEach, describe, expect, it } from "vitest";
import { FolderArrayStore } from "./folder-array-store.js";

const hashOf = (bytes: Uint8Array): string => createHash("sha256").update(bytes).digest("hex");

describe("FolderArrayStore", () => {
  let folder: string;
  let store: FolderArrayStore;

  beforeEach(async () => {
    folder = await mkdtemp(join(tmpdir(), "arrays-"));
    store = new FolderArrayStore(folder);
  });
  afterEach(() => rm(folder, { recursive: true, force: true }));

  it("gives back what was put, and puts the same twice", async () => {
    const bytes = Uint8Array.from({ length: 10_000 }, (_, index) => index % 251);
    const sha256 = hashOf(bytes);
    await store.put(sha256, bytes);
    await store.put(sha256, bytes);
    expect(new Uint8Array((await store.get(sha256)) ?? [])).toEqual(bytes);
    expect(await readdir(join(folder, sha256.slice(0, 2)))).toEqual([`${sha256}.bin`]);
  });

  it("knows nothing of what was never put", async () => {
    expect(await store.get(hashOf(new Uint8Array([1])))).toBeNull();
  });

  it("refuses a name that is no hash, so that no path can be smuggled in", async () => {
    await expect(store.get("../../etc/passwd")).rejects.toThrow(RangeError);
    await expect(store.put("../x", new Uint8Array(1))).rejects.toThrow(RangeError);
  });

  it("leaves nothing behind where it cannot write", async () => {
    const bytes = new Uint8Array([1, 2, 3]);
    const sha256 = hashOf(bytes);
    // A file where the folder should be: the write fails as it would on a broken disk.
    await writeFile(join(folder, sha256.slice(0, 2)), "");
    await expect(store.put(sha256, bytes)).rejects.toThrow();
    expect(await readdir(folder)).toEqual([sha256.slice(0, 2)]);
  });
});
