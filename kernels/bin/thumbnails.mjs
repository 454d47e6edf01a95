#!/usr/bin/env node
// Draws examples/<name>/thumbnail.png: `node kernels/bin/thumbnails.mjs [NAME …]`.
import { fileURLToPath } from "node:url";
import { ensureBuilt } from "./built.mjs";

ensureBuilt();
const { drawThumbnails } = await import("../dist/cli/thumbnails.js");
await drawThumbnails(fileURLToPath(new URL("../../examples", import.meta.url)), process.argv.slice(2));
