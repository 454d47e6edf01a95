// The whole test run: what it needs is fetched or named, the product is built, then every test runs once.
import { spawnSync } from "node:child_process";
import { existsSync, mkdtempSync, readFileSync, rmSync } from "node:fs";
import { tmpdir } from "node:os";
import { dirname, join, resolve } from "node:path";
import { fileURLToPath } from "node:url";

const root = resolve(dirname(fileURLToPath(import.meta.url)), "../..");
const [major, minor] = process.versions.node.split(".").map(Number);
if (major < 20 || (major === 20 && minor < 19)) {
  console.error(`Heddle needs Node 20.19 or newer; this is ${process.versions.node}.`);
  process.exit(1);
}

const run = (command, args, options = {}) =>
  spawnSync(command, args, { cwd: root, stdio: "inherit", ...options }).status ?? 1;
const found = (paths) => paths.find((path) => path !== undefined && existsSync(path));
const mayInstall = process.getuid?.() === 0 && existsSync("/usr/bin/apt-get");

/** Installs Debian packages where this user may; says nothing where it cannot. */
function install(...packages) {
  if (!mayInstall) return false;
  const env = { ...process.env, DEBIAN_FRONTEND: "noninteractive" };
  const quiet = { env, stdio: ["ignore", "ignore", "inherit"] };
  return (
    run("apt-get", ["-qq", "update"], quiet) === 0 &&
    run("apt-get", ["-qq", "-y", "install", "--no-install-recommends", ...packages], quiet) === 0
  );
}

const browsers = () => found([process.env.CHROMIUM, "/usr/bin/chromium", "/usr/bin/chromium-browser"]);
if (browsers() === undefined) install("chromium");
const chromium = browsers();
if (chromium === undefined) {
  console.error(
    "The journeys need Chromium: install it (Debian: apt-get install chromium) or name it in CHROMIUM.",
  );
  process.exit(1);
}

const postgresFolder = () =>
  found([...[18, 17, 16, 15, 14].map((v) => `/usr/lib/postgresql/${v}/bin/initdb`), "/usr/local/bin/initdb"]);
if (process.env.DATABASE_URL === undefined && postgresFolder() === undefined) install("postgresql");

for (const workspace of ["kernels", "backend", "frontend"]) {
  if (run("npm", ["run", "--silent", "build", "-w", workspace]) !== 0) process.exit(1);
}

const scratch = mkdtempSync(join(tmpdir(), "heddle-test-"));
const report = join(scratch, "report.json");
const status = run(
  process.execPath,
  [
    join(root, "node_modules/vitest/vitest.mjs"),
    "run",
    "--reporter=default",
    "--reporter=json",
    `--outputFile.json=${report}`,
    ...process.argv.slice(2),
  ],
  { env: { ...process.env, CHROMIUM: chromium } },
);

if (existsSync(report)) {
  const { numPassedTests, numFailedTests, numPendingTests, testResults } = JSON.parse(
    readFileSync(report, "utf8"),
  );
  for (const file of testResults) {
    for (const test of file.assertionResults.filter(
      (one) => one.status === "pending" || one.status === "skipped",
    )) {
      console.log(`skipped: ${test.fullName}`);
    }
  }
  console.log(`${numPassedTests} passed, ${numFailedTests} failed, ${numPendingTests} skipped`);
  if (numPassedTests === 0) process.exitCode = 1;
}
rmSync(scratch, { recursive: true, force: true });
if (status !== 0) process.exitCode = status;
