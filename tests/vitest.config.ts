import { defineConfig } from "vitest/config";

const resolve = { conditions: ["source"] };

/** Suites that cross packages. Each runs by its name: `npx vitest run --project accuracy`. */
export default defineConfig({
  resolve,
  ssr: { resolve },
  test: {
    projects: [
      {
        resolve,
        ssr: { resolve },
        test: {
          name: "accuracy",
          include: ["accuracy/**/*.spec.ts"],
          environment: "node",
          pool: "threads",
          testTimeout: 120_000,
        },
      },
      {
        resolve,
        ssr: { resolve },
        test: {
          name: "integration",
          include: ["integration/**/*.spec.ts"],
          environment: "node",
          pool: "forks",
          // Each file has a server of its own, which uses every core while it solves.
          maxWorkers: 1,
          testTimeout: 60_000,
          hookTimeout: 120_000,
        },
      },
    ],
  },
});
