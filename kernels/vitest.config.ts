import { defineConfig } from "vitest/config";

export default defineConfig({
  resolve: { conditions: ["source"] },
  ssr: { resolve: { conditions: ["source"] } },
  test: {
    include: ["src/**/*.spec.ts"],
    environment: "node",
    pool: "threads",
    globalSetup: ["bin/assemble.mjs"],
  },
});
