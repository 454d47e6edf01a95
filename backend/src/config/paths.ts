/** Where the repository's own folders lie, the same from `src` and from `dist`. */
import { fileURLToPath } from "node:url";

const fromRoot = (path: string): string => fileURLToPath(new URL(`../../../${path}`, import.meta.url));

export const PATHS = {
  migrations: fromRoot("drizzle"),
  examples: fromRoot("examples"),
  pages: fromRoot("frontend/dist"),
  manifest: fromRoot("backend/package.json"),
  defaultDataDir: fromRoot(".data"),
} as const;
