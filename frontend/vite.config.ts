import react from "@vitejs/plugin-react";
import { defaultClientConditions, defineConfig } from "vite";
import { initialScriptBudget } from "./vite-script-budget";

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
  build: { outDir: "dist", emptyOutDir: true, sourcemap: false, target: "es2022", assetsInlineLimit: 0 },
});
