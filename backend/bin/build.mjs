// Builds those workspaces whose output is missing or older than their sources.
import { spawnSync } from "node:child_process";
import { existsSync, readdirSync, statSync } from "node:fs";
import { join } from "node:path";
import { fileURLToPath } from "node:url";

export const root = fileURLToPath(new URL("../..", import.meta.url));

/** What each workspace is made from, and a file that its build writes. */
const WORKSPACES = {
  kernels: {
    output: "kernels/dist/scene/index.js",
    sources: ["kernels/src", "kernels/assembly", "kernels/package.json", "kernels/tsconfig.build.json"],
  },
  backend: {
    output: "backend/dist/main.js",
    sources: ["backend/src", "backend/package.json", "backend/tsconfig.build.json", "backend/nest-cli.json"],
  },
  frontend: {
    output: "frontend/dist/index.html",
    sources: [
      "frontend/src",
      "frontend/public",
      "frontend/index.html",
      "frontend/package.json",
      "frontend/vite.config.ts",
      "kernels/src",
      "backend/src/contract",
    ],
  },
};

/** Milliseconds of the newest file at or below a path; tests do not count. */
function newest(path) {
  if (!existsSync(path)) return 0;
  const stats = statSync(path);
  if (!stats.isDirectory()) return /\.spec\.tsx?$/.test(path) ? 0 : stats.mtimeMs;
  return Math.max(0, ...readdirSync(path).map((name) => newest(join(path, name))));
}

function isStale({ output, sources }) {
  const file = join(root, output);
  if (!existsSync(file)) return true;
  return Math.max(...sources.map((source) => newest(join(root, source)))) > statSync(file).mtimeMs;
}

/** Runs an npm command at the root, with the npm that started us where one did. */
function npm(args) {
  const own = process.env.npm_execpath;
  const options = { cwd: root, encoding: "utf8", maxBuffer: 64 * 1024 * 1024 };
  return own?.endsWith(".js")
    ? spawnSync(process.execPath, [own, ...args], options)
    : spawnSync("npm", args, { ...options, shell: process.platform === "win32" });
}

/** Ends the process with a sentence where something cannot be built. */
export function buildWhatIsMissing(names) {
  if (!existsSync(join(root, "node_modules/@nestjs/core"))) {
    process.stderr.write("The packages are not installed: run npm ci, then start again.\n");
    process.exit(1);
  }
  for (const name of names) {
    if (!isStale(WORKSPACES[name])) continue;
    process.stderr.write(`Building ${name} …\n`);
    const built = npm(["run", "build", "-w", name]);
    if (built.status !== 0) {
      process.stderr.write(`${built.stdout ?? ""}${built.stderr ?? ""}${built.error?.message ?? ""}\n`);
      process.stderr.write(`The ${name} could not be built; the reason stands above.\n`);
      process.exit(1);
    }
  }
}
