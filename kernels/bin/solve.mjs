#!/usr/bin/env node
// `npm run --silent solve -- SCENE.json …`: see kernels/src/cli.
import { ensureBuilt } from "./built.mjs";

try {
  ensureBuilt();
  const { main } = await import("../dist/cli/index.js");
  await main(process.argv.slice(2));
} catch (error) {
  process.stderr.write(`${error instanceof Error ? error.message : String(error)}\n`);
  process.exitCode = 3;
}
