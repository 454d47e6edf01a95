import { defineConfig } from "vitest/config";

export default defineConfig({
  resolve: { conditions: ["source"] },
  ssr: { resolve: { conditions: ["source"] } },
  test: {
    // A bound against hanging, wide enough for a busy machine.
    testTimeout: 60_000,
    include: ["src/**/*.spec.ts"],
    environment: "node",
    pool: "threads",
    globalSetup: ["bin/assemble.mjs"],
  },
});
