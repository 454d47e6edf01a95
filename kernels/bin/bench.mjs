#!/usr/bin/env node
// `npm run bench [-- --json --case NAME]`: see kernels/src/cli/bench.ts.
import { ensureBuilt } from "./built.mjs";

try {
  ensureBuilt();
  const { runBench } = await import("../dist/cli/index.js");
  process.exitCode = await runBench(process.argv.slice(2), process.stdout, process.stderr);
} catch (error) {
  process.stderr.write(`${error instanceof Error ? error.message : String(error)}\n`);
  process.exitCode = 3;
}
