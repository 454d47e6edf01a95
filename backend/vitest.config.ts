import { defineConfig } from "vitest/config";

export default defineConfig({
  resolve: { conditions: ["source"] },
  ssr: { resolve: { conditions: ["source"] } },
  test: {
    include: ["src/**/*.spec.ts"],
    globalSetup: ["../kernels/bin/assemble.mjs"],
    environment: "node",
    // Each file opens embedded databases of its own; two at a time fit small machines.
    pool: "forks",
    maxWorkers: 2,
    testTimeout: 60_000,
    hookTimeout: 180_000,
  },
});
