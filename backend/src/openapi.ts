/** Prints the API's description without listening: a server over tables in memory, put together and closed. */
import "reflect-metadata";
import { mkdtemp, rm } from "node:fs/promises";
import { tmpdir } from "node:os";
import { join } from "node:path";
import { createApp } from "./app.js";
import { describeApi } from "./common/openapi.js";

const dataDir = await mkdtemp(join(tmpdir(), "heddle-openapi-"));
try {
  const app = await createApp({
    host: "127.0.0.1",
    port: 0,
    appUrl: null,
    dataDir,
    database: { kind: "memory" },
    demo: false,
  });
  process.stdout.write(`${JSON.stringify(describeApi(app), null, 2)}\n`);
  await app.close();
} finally {
  await rm(dataDir, { recursive: true, force: true });
}
