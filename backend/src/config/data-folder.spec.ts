import { spawn } from "node:child_process";
import { once } from "node:events";
import { mkdtemp, rm, stat, symlink, writeFile } from "node:fs/promises";
import { tmpdir } from "node:os";
import { join } from "node:path";
import { createHash } from "node:crypto";
import { realpathSync } from "node:fs";
import { afterEach, beforeEach, describe, expect, it } from "vitest";
import { DataFolderError, openDataFolder, readSecret } from "./data-folder.js";

let parent: string;
beforeEach(async () => {
  parent = await mkdtemp(join(tmpdir(), "heddle-folder-"));
});
afterEach(() => rm(parent, { recursive: true, force: true }));

describe("the data folder", () => {
  it("is made, and held by one server at a time under whatever name", async () => {
    const path = join(parent, "a", "b");
    const held = await openDataFolder(path);
    await symlink(path, join(parent, "other-name"));
    await expect(openDataFolder(path)).rejects.toThrow(/Another Heddle server already uses the data folder/);
    await expect(openDataFolder(join(parent, "other-name"))).rejects.toThrow(DataFolderError);
    await held.release();
    const again = await openDataFolder(path);
    await again.release();
  });

  it.runIf(process.platform === "linux")("is free again at once when its holder is killed", async () => {
    const path = join(parent, "held");
    await (await openDataFolder(path)).release();
    const name = createHash("sha256").update(realpathSync(path)).digest("hex").slice(0, 32);
    const holder = spawn(process.execPath, [
      "-e",
      `require("node:net").createServer().listen("\\0heddle-${name}", () => process.stdout.write("held"))`,
    ]);
    await once(holder.stdout, "data");
    await expect(openDataFolder(path)).rejects.toThrow(DataFolderError);
    holder.kill("SIGKILL");
    await once(holder, "exit");
    const again = await openDataFolder(path);
    await again.release();
  });

  it("is refused with a sentence where it is a file", async () => {
    const path = join(parent, "file");
    await writeFile(path, "");
    await expect(openDataFolder(path)).rejects.toThrow(/is a file or lies below one/);
    await expect(openDataFolder(join(path, "below"))).rejects.toThrow(/is a file or lies below one/);
  });

  it("keeps one secret, for the server's user alone", async () => {
    const folder = await openDataFolder(join(parent, "data"));
    const secret = await readSecret(folder);
    expect(secret).toMatch(/^[0-9a-f]{64}$/);
    expect(await readSecret(folder)).toBe(secret);
    if (process.platform !== "win32") {
      expect((await stat(join(folder.path, "secret"))).mode & 0o777).toBe(0o600);
    }
    await writeFile(join(folder.path, "secret"), "short");
    await expect(readSecret(folder)).rejects.toThrow(/is damaged/);
    await folder.release();
  });
});
