#!/usr/bin/env node
// `npm run --silent modes -- SCENE.json …`: see kernels/src/cli/modes.ts.
import { ensureBuilt } from "./built.mjs";

try {
  ensureBuilt();
  const { modesMain } = await import("../dist/cli/index.js");
  await modesMain(process.argv.slice(2));
} catch (error) {
  process.stderr.write(`${error instanceof Error ? error.message : String(error)}\n`);
  process.exitCode = 3;
}
