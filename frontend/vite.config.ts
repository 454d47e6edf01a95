import { gzipSync } from "node:zlib";
import react from "@vitejs/plugin-react";
import type { Plugin } from "vite";
import { defaultClientConditions, defineConfig } from "vite";

/** Pages that someone may see first: the sign-in, and the projects behind it. */
const FIRST_PAGES = ["src/app/sign-in-page.tsx", "src/app/projects-page.tsx"];

/**
 * Fails the build when the scripts of a first page (the entry, the page, and all they import statically) exceed a
 * budget.
 * @param maxBytes compressed (gzip) size that may not be exceeded
 */
function firstPageBudget(maxBytes: number): Plugin {
  return {
    name: "heddle:first-page-budget",
    apply: "build",
    generateBundle(_options, bundle) {
      const chunks = new Map(
        Object.values(bundle).flatMap((part) =>
          part.type === "chunk" ? [[part.fileName, part] as const] : [],
        ),
      );
      const entries = [...chunks.values()].filter((chunk) => chunk.isEntry);
      if (entries.length === 0) this.error("The build has no entry script.");
      for (const page of FIRST_PAGES) {
        const own = [...chunks.values()].find((chunk) => chunk.facadeModuleId?.endsWith(page) === true);
        if (own === undefined) this.error(`The build has no chunk for ${page}; is it still loaded lazily?`);
        const seen = new Set<string>();
        const sizeOf = (fileName: string): number => {
          const chunk = chunks.get(fileName);
          if (seen.has(fileName) || chunk === undefined) return 0;
          seen.add(fileName);
          return chunk.imports.reduce((sum, next) => sum + sizeOf(next), gzipSync(chunk.code).length);
        };
        const bytes = [...entries, own].reduce((sum, { fileName }) => sum + sizeOf(fileName), 0);
        const words = `${page}: ${(bytes / 1000).toFixed(1)} kB of script, compressed, of ${maxBytes / 1000} kB allowed`;
        if (bytes > maxBytes) this.error(`${words}. Load a part of it lazily.`);
        this.info(`${words}.`);
      }
    },
  };
}

/** Address of the server that the development pages talk to. */
const backend = process.env["BACKEND_URL"] ?? "http://127.0.0.1:3000";
const proxy = {
  "/api": { target: backend },
  "/socket.io": { target: backend, ws: true },
};

export default defineConfig({
  plugins: [react(), firstPageBudget(400_000)],
  resolve: { conditions: ["source", ...defaultClientConditions] },
  server: { port: 5173, proxy },
  preview: { port: 4173, proxy },
  build: {
    outDir: "dist",
    emptyOutDir: true,
    sourcemap: false,
    target: "es2022",
    assetsInlineLimit: 0,
    chunkSizeWarningLimit: 1000,
  },
});
