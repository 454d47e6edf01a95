// Makes sure that kernels/dist is there and up to date, so that the commands work right after `npm ci`.
import { spawnSync } from "node:child_process";
import { existsSync, mkdirSync, readdirSync, rmSync, statSync, utimesSync, writeFileSync } from "node:fs";
import { createRequire } from "node:module";
import { join } from "node:path";
import { fileURLToPath } from "node:url";
import { ensureAssembled } from "./assemble.mjs";

const folder = fileURLToPath(new URL("..", import.meta.url));
const stamp = join(folder, "dist", ".built");
const lock = join(folder, "dist", ".building");
const WAIT_MS = 200;
/** A lock older than this was left behind by a build that was killed. */
const STALE_MS = 120_000;

const newestSource = (at) =>
  readdirSync(at, { withFileTypes: true, recursive: true })
    .filter((entry) => entry.isFile() && /(?<!\.spec)\.ts$/.test(entry.name))
    .reduce(
      (newest, entry) => Math.max(newest, statSync(join(entry.parentPath ?? entry.path, entry.name)).mtimeMs),
      0,
    );

const isFresh = () =>
  existsSync(stamp) &&
  statSync(stamp).mtimeMs >=
    Math.max(newestSource(join(folder, "src")), statSync(join(folder, "tsconfig.build.json")).mtimeMs);

const pause = () => Atomics.wait(new Int32Array(new SharedArrayBuffer(4)), 0, 0, WAIT_MS);

/** Takes the lock, or waits for the process that is building. True: this process builds. */
const takeLock = () => {
  mkdirSync(join(folder, "dist"), { recursive: true });
  for (;;) {
    try {
      mkdirSync(lock);
      return true;
    } catch (error) {
      if (error.code !== "EEXIST") throw error;
    }
    const since = statSync(lock, { throwIfNoEntry: false })?.mtimeMs;
    if (since !== undefined && Date.now() - since > STALE_MS) rmSync(lock, { recursive: true, force: true });
    else pause();
    if (isFresh()) return false;
  }
};

/** Builds kernels/dist where it is missing or older than its source. Nothing is printed on standard output. */
export const ensureBuilt = () => {
  ensureAssembled();
  if (isFresh() || !takeLock()) return;
  try {
    const started = new Date();
    const tsc = createRequire(import.meta.url).resolve("typescript/bin/tsc");
    const built = spawnSync(process.execPath, [tsc, "-p", join(folder, "tsconfig.build.json")], {
      encoding: "utf8",
    });
    if (built.status !== 0)
      throw new Error(`The kernels could not be built:\n${built.stdout}${built.stderr}`.trim());
    // The stamp bears the time at which the build began: a file changed during it makes the next start build again.
    writeFileSync(stamp, `${started.toISOString()}\n`);
    utimesSync(stamp, started, started);
  } finally {
    rmSync(lock, { recursive: true, force: true });
  }
};
