import { gzipSync } from "node:zlib";
import react from "@vitejs/plugin-react";
import type { Plugin } from "vite";
import { defaultClientConditions, defineConfig } from "vite";

/**
 * Fails the build when the scripts of the first page (the entry and all it imports statically) exceed a budget.
 * @param maxBytes compressed (gzip) size that may not be exceeded
 */
function initialScriptBudget(maxBytes: number): Plugin {
  return {
    name: "heddle:initial-script-budget",
    apply: "build",
    generateBundle(_options, bundle) {
      const seen = new Set<string>();
      const visit = (fileName: string): number => {
        const chunk = bundle[fileName];
        if (seen.has(fileName) || chunk?.type !== "chunk") return 0;
        seen.add(fileName);
        return chunk.imports.reduce((sum, next) => sum + visit(next), gzipSync(chunk.code).length);
      };
      const entries = Object.values(bundle).filter((part) => part.type === "chunk" && part.isEntry);
      if (entries.length === 0) this.error("The build has no entry script.");
      const bytes = entries.reduce((sum, entry) => sum + visit(entry.fileName), 0);
      const kB = (bytes / 1000).toFixed(1);
      if (bytes > maxBytes) {
        this.error(
          `The first page's scripts are ${kB} kB compressed, over the budget of ${maxBytes / 1000} kB. Load a part of it lazily.`,
        );
      }
      this.info(`First page: ${kB} kB of script, compressed, of ${maxBytes / 1000} kB allowed.`);
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
  plugins: [react(), initialScriptBudget(400_000)],
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
