import { defineConfig } from "vitest/config";

const resolve = { conditions: ["source"] };

/** Suites that cross packages; one of them alone: `npx vitest run --project tests accuracy`. */
export default defineConfig({
  resolve,
  ssr: { resolve },
  test: {
    name: "tests",
    include: ["**/*.spec.ts"],
    globalSetup: ["../kernels/bin/assemble.mjs"],
    environment: "node",
    pool: "threads",
    testTimeout: 120_000,
    hookTimeout: 120_000,
  },
});
