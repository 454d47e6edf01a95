import { defineConfig } from "vitest/config";

export default defineConfig({
  resolve: { conditions: ["source"] },
  ssr: { resolve: { conditions: ["source"] } },
  test: { include: ["src/**/*.spec.{ts,tsx}"], environment: "node", pool: "threads", testTimeout: 30_000 },
});
