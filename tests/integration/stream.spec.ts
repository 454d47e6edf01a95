import { afterAll, beforeAll, describe, expect, it } from "vitest";
import type { RunDto } from "@heddle/backend/contract";
import { isSigned } from "@heddle/kernels/frames";
import { resultSchema, resultSha256 } from "@heddle/kernels/scene";
import { endlessScene, smallScene } from "../support/scenes.js";
import { startServer, type Client, type RunningServer } from "../support/server.js";
import { openViewer, until, type Viewer } from "../support/viewer.js";

describe("runs and stream of the built server", () => {
  let server: RunningServer;
  let engineer: Client;
  const open: Viewer[] = [];

  beforeAll(async () => {
    server = await startServer();
    engineer = await server.as("engineer");
  }, 120_000);
  afterAll(async () => {
    for (const viewer of open) viewer.close();
    await server.stop();
  });

  const get = async (runId: string): Promise<RunDto> =>
    (await engineer.send<RunDto>("GET", `/api/runs/${runId}`)).body;
  const reaches = (runId: string, state: RunDto["state"]) =>
    until(async () => {
      const run = await get(runId);
      return run.state === state ? run : null;
    }, 60_000);
  const command = (runId: string, body: object) =>
    engineer.send<RunDto>("POST", `/api/runs/${runId}/commands`, body);
  const watch = async (runId: string, client = engineer): Promise<Viewer> => {
    const viewer = await openViewer(server.url, { cookie: client.cookie, origin: server.url });
    open.push(viewer);
    expect(await viewer.join(runId)).toMatchObject({ ok: true });
    return viewer;
  };

  it("solves a scene in a thread; the viewer's trace is the result's, without a gap", async () => {
    const scene = await engineer.scene(smallScene());
    const run = await engineer.run(scene.id, { paused: true });
    await reaches(run.id, "paused");
    const viewer = await watch(run.id);
    await command(run.id, { kind: "resume" });
    const done = await reaches(run.id, "done");
    expect(done.sha256).toBe(scene.sha256);
    await until(() => viewer.states.at(-1)?.state === "done");

    const result = resultSchema.parse((await engineer.send("GET", `/api/runs/${run.id}/result`)).body);
    expect(result.scene.sha256).toBe(scene.sha256);
    expect(result.grid.steps).toBe(done.step);
    const whole = result.probes[0]?.trace.values ?? [];
    const live: number[] = [];
    for (const event of viewer.traces) {
      const trace = event.traces.at(0);
      expect(trace?.from).toBe(live.length);
      live.push(...(trace?.values ?? []));
    }
    expect(live).toHaveLength(whole.length);
    expect(Math.max(...whole.map(Math.abs))).toBeGreaterThan(0);
    whole.forEach((value, index) => {
      // Live samples carry seven significant digits.
      expect(Math.abs((live[index] ?? Number.NaN) - value)).toBeLessThanOrEqual(1e-6 * Math.abs(value));
    });
  });

  it("streams a growing field, at most to its credits, and the scale turns levels back into V/m", async () => {
    const scene = await engineer.scene(endlessScene());
    const run = await engineer.run(scene.id);
    const viewer = await watch(run.id, await server.as("reviewer"));
    const view = {
      runId: run.id,
      quantity: "Ez",
      width: 60,
      height: 40,
      range: null,
      framesPerSecond: 30,
    } as const;
    expect(await viewer.view(view)).toEqual({ ok: true });
    await until(() => viewer.frames.length >= 20);
    const last = viewer.frames.at(-1);
    expect(last).toMatchObject({ quantity: "Ez" });
    expect(isSigned("Ez")).toBe(true);
    expect(last?.peak).toBeGreaterThan(0);
    expect(new Set(last?.levels).size).toBeGreaterThan(20);
    const steps = viewer.frames.map(({ step }) => step);
    expect(steps).toEqual([...steps].sort((a, b) => a - b));

    // A locked range: twice the scale brings half the level.
    const range = (last?.peak ?? 1) * 4;
    await viewer.view({ ...view, range });
    await until(() => viewer.frames.at(-1)?.range === range);
    await command(run.id, { kind: "stop" });
  });

  it("shows every live edit, and the absorber drops the level", async () => {
    const scene = await engineer.scene(endlessScene());
    const run = await engineer.run(scene.id, { paused: true });
    await reaches(run.id, "paused");
    await command(run.id, { kind: "step", steps: 2_000 });
    const viewer = await watch(run.id);
    await viewer.view({ runId: run.id, quantity: "absE", width: 60, height: 40, range: null });
    await until(() => viewer.frames.length > 0);

    const lining = (x: number) =>
      endlessScene({
        paint: [{ id: "fill", kind: "rectangle", x, y: 0, width: 60 - x, height: 40, medium: "lining" }],
      });
    for (const x of [55, 50, 45, 40, 35]) {
      const before = viewer.frames.length;
      const answer = await engineer.send("POST", `/api/runs/${run.id}/edits`, { document: lining(x) });
      expect(answer.status).toBe(200);
      await until(() => viewer.frames.length > before);
    }

    const amplitude = async (): Promise<number> => {
      await command(run.id, { kind: "step", steps: 4_000 });
      await until(async () => (await get(run.id)).state === "paused");
      const joined = await viewer.join(run.id);
      const values = joined.ok ? (joined.traces[0]?.values ?? []) : [];
      return Math.max(...values.slice(-500).map(Math.abs));
    };
    const lined = await amplitude();
    await engineer.send("POST", `/api/runs/${run.id}/edits`, { document: endlessScene({ paint: [] }) });
    const bare = await amplitude();
    expect(lined).toBeLessThan(0.5 * bare);

    expect(await get(run.id)).toMatchObject({ edited: true, edits: { length: 6 } });
    await command(run.id, { kind: "stop" });
    const result = resultSchema.parse((await engineer.send("GET", `/api/runs/${run.id}/result`)).body);
    expect(result.probes[0]?.spectrum).toBeNull();
    expect(result.edits).toHaveLength(6);
  });

  it("refuses an edit that touches the mesh, with every reason", async () => {
    const scene = await engineer.scene(endlessScene());
    const run = await engineer.run(scene.id);
    await reaches(run.id, "running");
    const refused = await engineer.send<{ code: string; problems: { path: string }[] }>(
      "POST",
      `/api/runs/${run.id}/edits`,
      { document: endlessScene({ section: { widthMm: 80, heightMm: 40 }, polarization: "TEz", probes: [] }) },
    );
    expect(refused.status).toBe(422);
    expect(refused.body.problems.map(({ path }) => path)).toEqual(
      expect.arrayContaining(["section", "polarization"]),
    );
    await command(run.id, { kind: "stop" });
  });

  it("gives the same result twice, by its hash without the timing", async () => {
    const scene = await engineer.scene(smallScene());
    const hashes = [];
    for (let turn = 0; turn < 2; turn++) {
      const run = await engineer.run(scene.id);
      await reaches(run.id, "done");
      const { body } = await engineer.send("GET", `/api/runs/${run.id}/result`);
      hashes.push(resultSha256(resultSchema.parse(body)));
    }
    expect(hashes[0]).toBe(hashes[1]);
  });

  it("ends a stopped server's runs as interrupted, keeps what waits, and goes on after a restart", async () => {
    const own = await startServer();
    try {
      const client = await own.as("engineer");
      const scene = await client.scene(endlessScene());
      const short = await client.scene(smallScene());
      const going = await client.run(scene.id);
      await until(async () => {
        const { body } = await client.send<RunDto>("GET", `/api/runs/${going.id}`);
        return body.state === "running" && body.step > 0;
      });
      const waiting = [];
      for (let turn = 0; turn < 3; turn++) waiting.push(await client.run(short.id));
      await own.kill();

      const next = await startServer({ dataDir: own.dataDir });
      try {
        const again = await next.as("engineer");
        const run = (await again.send<RunDto>("GET", `/api/runs/${going.id}`)).body;
        expect(run.state).toBe("interrupted");
        expect(run.message).toMatch(/server stopped while this run was going on/);
        const last = waiting.at(-1);
        await until(async () => {
          const { body } = await again.send<RunDto>("GET", `/api/runs/${String(last?.id)}`);
          return body.state === "done";
        }, 60_000);
      } finally {
        await next.stop();
      }
    } finally {
      await own.stop();
    }
  }, 180_000);

  it("leaves a run in order when the server is asked to stop", async () => {
    const own = await startServer();
    const client = await own.as("engineer");
    const scene = await client.scene(endlessScene());
    const going = await client.run(scene.id);
    await until(async () => (await client.send<RunDto>("GET", `/api/runs/${going.id}`)).body.step > 0);
    expect(await own.end()).toBe(0);
    const next = await startServer({ dataDir: own.dataDir });
    try {
      const run = (await (await next.as("engineer")).send<RunDto>("GET", `/api/runs/${going.id}`)).body;
      expect(run.state).toBe("interrupted");
      expect(run.message).toMatch(/server was stopped at step \d+/);
    } finally {
      await next.stop();
      await own.stop();
    }
  }, 180_000);
});
