/** A server with fake solver threads, a scene in it, and people who may and may not run it. */
import type { AddressInfo } from "node:net";
import { z } from "zod";
import type { Config } from "../../config/config.js";
import type { MemberRole } from "../../contract/permissions.js";
import { isOver, type RunDto } from "../../contract/runs.js";
import { startTestApp, type TestApp } from "../../common/testing/test-app.js";
import { SolverThreads } from "../live/solver-thread.js";
import { QUEUE_LIMITS, type QueueLimits } from "../queue/queue-limits.js";
import { FakeThreads } from "./fake-threads.js";
import { smallScene } from "./scene.js";
import { openWatcher, until, type Watcher } from "./watcher.js";

type Agent = Awaited<ReturnType<TestApp["as"]>>;

export interface RunBench {
  server: TestApp;
  threads: FakeThreads;
  limits: QueueLimits;
  url: string;
  engineer: Agent;
  sceneId: string;
  /** Starts the scene's first revision and gives the run. */
  start: (body?: { paused?: boolean; twoMesh?: boolean }, agent?: Agent) => Promise<RunDto>;
  get: (runId: string) => Promise<RunDto>;
  command: (runId: string, body: object) => Promise<{ status: number; body: RunDto & { message: string } }>;
  reaches: (runId: string, state: RunDto["state"]) => Promise<RunDto>;
  watch: (role?: MemberRole, options?: { credits?: boolean }) => Promise<Watcher>;
  cookieOf: (role: MemberRole) => Promise<string>;
  /** Ends what still goes on and puts limits and threads back to where they were. */
  clear: () => Promise<void>;
  close: () => Promise<void>;
}

const idOf = (body: unknown): string => z.object({ id: z.string() }).parse(body).id;

export async function startRunBench(changes: Partial<Config> = {}): Promise<RunBench> {
  const server = await startTestApp(changes);
  const threads = new FakeThreads();
  // A plain replacement and no mock, so that a spec may restore its mocks and keep it.
  server.app.get(SolverThreads).start = (task, events) => threads.start(task, events);
  const limits = server.app.get<QueueLimits>(QUEUE_LIMITS);
  Object.assign(limits, { running: 1 });
  const atFirst = { ...limits };
  const { port } = server.app.getHttpServer().address() as AddressInfo;
  const url = `http://127.0.0.1:${port}`;
  const engineer = await server.as("engineer");
  const project = await engineer.post("/api/projects").send({ name: "Runs" }).expect(201);
  const scene = await engineer
    .post(`/api/projects/${idOf(project.body)}/scenes`)
    .send({ document: smallScene() })
    .expect(201);
  const sceneId = idOf(scene.body);

  const get: RunBench["get"] = async (runId) =>
    (await engineer.get(`/api/runs/${runId}`).expect(200)).body as RunDto;
  const cookieOf: RunBench["cookieOf"] = async (role) => {
    const answer = await server.stranger().post("/api/demo-sign-in").send({ role }).expect(204);
    return (
      answer
        .get("Set-Cookie")
        ?.map((cookie) => cookie.split(";").at(0))
        .join("; ") ?? ""
    );
  };
  return {
    server,
    threads,
    limits,
    url,
    engineer,
    sceneId,
    start: async (body = {}, agent = engineer) =>
      (
        await agent
          .post(`/api/scenes/${sceneId}/runs`)
          .send({ revision: 1, ...body })
          .expect(201)
      ).body as RunDto,
    get,
    command: async (runId, body) => await engineer.post(`/api/runs/${runId}/commands`).send(body),
    reaches: (runId, state) =>
      until(async () => {
        const run = await get(runId);
        return run.state === state ? run : null;
      }),
    watch: async (role = "engineer", options = {}) =>
      openWatcher(url, { cookie: await cookieOf(role), credits: true, ...options }),
    cookieOf,
    clear: async () => {
      const list = await engineer.get(`/api/scenes/${sceneId}/runs`).expect(200);
      // Those that wait first, so that none of them starts meanwhile.
      const open = (list.body as RunDto[]).filter(({ state }) => !isOver(state));
      for (const state of ["queued", "paused", "running"]) {
        for (const run of open.filter((one) => one.state === state)) {
          await engineer.post(`/api/runs/${run.id}/commands`).send({ kind: "stop" });
        }
      }
      Object.assign(limits, atFirst);
      threads.options = {};
      threads.started.length = 0;
    },
    close: () => server.close(),
  };
}
