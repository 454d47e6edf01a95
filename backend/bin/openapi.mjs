// Writes backend/openapi.json from the built server; with --check, compares instead and fails on a difference.
import { execFileSync } from "node:child_process";
import { readFileSync, writeFileSync } from "node:fs";
import { fileURLToPath } from "node:url";
import { buildWhatIsMissing } from "./build.mjs";

const file = fileURLToPath(new URL("../openapi.json", import.meta.url));
const script = fileURLToPath(new URL("../dist/openapi.js", import.meta.url));

buildWhatIsMissing(["kernels", "backend"]);
const made = execFileSync(process.execPath, [script], { encoding: "utf8", maxBuffer: 64 * 1024 * 1024 });
if (process.argv.includes("--check")) {
  let kept = "";
  try {
    kept = readFileSync(file, "utf8");
  } catch {
    // A missing file differs like any other.
  }
  if (kept !== made) {
    process.stderr.write(
      "backend/openapi.json does not match the routes: run npm run api:generate and commit what changes.\n",
    );
    process.exit(1);
  }
} else {
  writeFileSync(file, made);
}
