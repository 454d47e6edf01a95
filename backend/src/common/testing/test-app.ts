/** A whole server for specs: its own data folder, its tables in memory, nothing listening. */
import { mkdtemp, rm } from "node:fs/promises";
import { tmpdir } from "node:os";
import { join } from "node:path";
import type { NestExpressApplication } from "@nestjs/platform-express";
import request from "supertest";
import { z } from "zod";
import { createApp } from "../../app.js";
import type { Config } from "../../config/config.js";
import type { MemberRole } from "../../contract/permissions.js";
import { migratedSnapshot } from "../../database/testing/snapshot.js";

export interface TestApp {
  app: NestExpressApplication;
  config: Config;
  /** An agent without a session. */
  stranger(): ReturnType<typeof request.agent>;
  /** An agent signed in as the demo's person of that role. */
  as(role: MemberRole): Promise<ReturnType<typeof request.agent>>;
  close(): Promise<void>;
}

export async function testConfig(changes: Partial<Config> = {}): Promise<Config> {
  const dataDir = changes.dataDir ?? (await mkdtemp(join(tmpdir(), "heddle-spec-")));
  return {
    host: "127.0.0.1",
    port: 0,
    appUrl: null,
    database: { kind: "memory", snapshot: await migratedSnapshot() },
    demo: true,
    ...changes,
    dataDir,
  };
}

/**
 * @param changes of the settings; everything else is the default of an installation on this machine
 * @param options keepData: leave the data folder when it closes, to start on it again
 */
export async function startTestApp(
  changes: Partial<Config> = {},
  { keepData = false }: { keepData?: boolean } = {},
): Promise<TestApp> {
  const config = await testConfig(changes);
  const app = await createApp(config, { logger: false });
  await app.listen(config.port, config.host);
  const server = app.getHttpServer();
  const stranger = () => request.agent(server);
  return {
    app,
    config,
    stranger,
    as: async (role) => {
      const agent = stranger();
      await agent.post("/api/demo-sign-in").send({ role }).expect(204);
      return agent;
    },
    close: async () => {
      await app.close();
      if (!keepData) await rm(config.dataDir, { recursive: true, force: true });
    },
  };
}

/** One field of every row of an answer's list. */
export const column = (answer: { body: unknown }, key: string): unknown[] =>
  z
    .array(z.looseObject({}))
    .parse(answer.body)
    .map((row) => row[key]);
