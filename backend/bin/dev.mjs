// Development: kernels and server rebuilt on every change, pages by vite with hot reload, on http://localhost:5173.
import { spawn } from "node:child_process";
import { existsSync } from "node:fs";
import { join } from "node:path";
import { buildWhatIsMissing, root } from "./build.mjs";

const PAGES = "http://localhost:5173";
const port = process.env.PORT ?? "4680";

buildWhatIsMissing(["kernels"]);

/** A package's program: beside the workspace where npm put it there, else at the root. */
const bin = (folder, name) => {
  const own = join(root, folder, "node_modules/.bin", name);
  return existsSync(own) ? own : join(root, "node_modules/.bin", name);
};
const children = [
  ["kernels", "tsc", ["-p", "tsconfig.build.json", "--watch", "--preserveWatchOutput"], {}],
  [
    "backend",
    "nest",
    ["start", "--watch", "--preserveWatchOutput"],
    { PORT: port, APP_URL: process.env.APP_URL ?? PAGES },
  ],
  ["frontend", "vite", [], { BACKEND_URL: `http://127.0.0.1:${port}` }],
].map(([folder, command, args, env]) =>
  spawn(bin(folder, command), args, {
    cwd: join(root, folder),
    stdio: "inherit",
    env: { ...process.env, ...env },
    shell: process.platform === "win32",
  }),
);

let ending = false;
function end(code) {
  if (ending) return;
  ending = true;
  process.exitCode = code;
  for (const child of children) child.kill("SIGTERM");
}

for (const child of children) {
  child.on("error", (error) => {
    process.stderr.write(`${error.message}\n`);
    end(1);
  });
  child.on("exit", (code) => end(code ?? 1));
}
process.on("SIGINT", () => end(0));
process.on("SIGTERM", () => end(0));
