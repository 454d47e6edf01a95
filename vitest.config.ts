import { defineConfig } from "vitest/config";

export default defineConfig({
  test: { projects: ["kernels", "backend", "frontend", "tests"], maxWorkers: 2 },
});
