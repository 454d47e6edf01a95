import { randomUUID } from "node:crypto";
import { afterAll, afterEach, beforeAll, describe, expect, it } from "vitest";
import { FRAME_CREDITS } from "../../contract/socket.js";
import { startRunBench, type RunBench } from "../testing/run-bench.js";
import { openWatcher, until, type Watcher } from "../testing/watcher.js";
import { StreamDoor } from "./stream-door.js";
import { RunsGateway } from "./runs.gateway.js";

describe("the stream", () => {
  let bench: RunBench;
  const open: Watcher[] = [];
  const watch = async (...parameters: Parameters<RunBench["watch"]>): Promise<Watcher> => {
    const watcher = await bench.watch(...parameters);
    open.push(watcher);
    return watcher;
  };
  const view = (runId: string, changes: object = {}) => ({
    runId,
    quantity: "Ez",
    width: 32,
    height: 24,
    range: null,
    framesPerSecond: 60,
    ...changes,
  });

  beforeAll(async () => {
    bench = await startRunBench();
  });
  afterEach(async () => {
    for (const watcher of open.splice(0)) watcher.close();
    await bench.clear();
  });
  afterAll(() => bench.close());

  describe("handshake", () => {
    const refused = async (options: Parameters<typeof openWatcher>[1]): Promise<unknown> =>
      openWatcher(bench.url, options).then(
        (watcher) => {
          watcher.close();
          return "was let in";
        },
        (error: unknown) => (error as { data?: unknown }).data,
      );

    it("refuses who has no session, or a made-up one", async () => {
      expect(await refused({})).toMatchObject({ code: "not-signed-in" });
      const made = (await bench.cookieOf("engineer")).replace(/=.{6}/, "=AAAAAA");
      expect(await refused({ cookie: made })).toMatchObject({ code: "not-signed-in" });
    });

    it("refuses a foreign page, and lets in our own", async () => {
      const cookie = await bench.cookieOf("engineer");
      expect(await refused({ cookie, origin: "https://elsewhere.example" })).toMatchObject({
        code: "not-allowed",
        message: expect.stringMatching(/own address/),
      });
      expect(await refused({ cookie, origin: bench.url })).toBe("was let in");
    });

    it("takes nobody by polling", async () => {
      const answer = await fetch(`${bench.url}/socket.io/?EIO=4&transport=polling`);
      expect(answer.status).toBe(400);
    });
  });

  it("answers a join with the run and every sample so far, then sends states and traces", async () => {
    const { id } = await bench.start({ paused: true });
    await bench.reaches(id, "paused");
    await bench.command(id, { kind: "step", steps: 12 });
    const watcher = await watch("reviewer");
    const joined = (await watcher.ask("join", { runId: id })) as {
      ok: true;
      run: { state: string; step: number };
      traces: { probe: string; from: number; values: number[] }[];
    };
    expect(joined).toMatchObject({ ok: true, run: { id, state: "paused", step: 12 } });
    expect(joined.traces[0]).toMatchObject({ probe: "inside", from: 0, values: { length: 12 } });

    await bench.command(id, { kind: "step", steps: 5 });
    await until(() => watcher.traces.length > 0);
    expect(watcher.traces[0]).toMatchObject({ runId: id, traces: [{ from: 12, values: { length: 5 } }] });
    await until(() => watcher.states.some(({ step }) => step === 17));
  });

  it("sends frames while they are acknowledged", async () => {
    const { id } = await bench.start();
    await bench.reaches(id, "running");
    const watcher = await watch();
    await watcher.ask("join", { runId: id });
    expect(await watcher.ask("view", view(id))).toEqual({ ok: true });
    await until(() => watcher.frames.length > 10);
    const sequences = watcher.frames.map(({ sequence }) => sequence);
    expect(sequences).toEqual([...sequences].sort((a, b) => a - b));
    expect(new Set(sequences).size).toBe(sequences.length);
    expect(watcher.frames[0]).toMatchObject({ quantity: "Ez", width: 32, height: 24 });
    const steps = watcher.frames.map(({ step }) => step);
    expect(steps.at(-1)).toBeGreaterThan(steps[0] ?? Infinity);
  });

  it("sends a viewer that never acknowledges its credits and no more, and others all the same", async () => {
    const { id } = await bench.start();
    const [silent, reads] = [await watch("engineer", { credits: false }), await watch("manager")];
    for (const watcher of [silent, reads]) {
      await watcher.ask("join", { runId: id });
      await watcher.ask("view", view(id));
    }
    await until(() => reads.frames.length > 15);
    expect(silent.frames).toHaveLength(FRAME_CREDITS);
  });

  it("shows a paused run on a new view and after a step, once each", async () => {
    const { id } = await bench.start({ paused: true });
    await bench.reaches(id, "paused");
    const watcher = await watch();
    await watcher.ask("join", { runId: id });
    await watcher.ask("view", view(id));
    await until(() => watcher.frames.length === 1);
    await bench.command(id, { kind: "step", steps: 3 });
    await until(() => watcher.frames.at(-1)?.step === 3);
    await watcher.ask("view", view(id, { width: 16 }));
    await until(() => watcher.frames.at(-1)?.width === 16);
    const count = watcher.frames.length;
    await new Promise((resolve) => setTimeout(resolve, 300));
    expect(watcher.frames).toHaveLength(count);
  });

  it("keeps a waiting run's view until it starts, and tells its place", async () => {
    const first = await bench.start();
    const second = await bench.start();
    const watcher = await watch();
    const joined = await watcher.ask("join", { runId: second.id });
    expect(joined).toMatchObject({ ok: true, run: { state: "queued", queuePlace: 1 }, traces: [] });
    await watcher.ask("view", view(second.id));
    await bench.command(first.id, { kind: "stop" });
    await until(() => watcher.frames.length > 0);
    expect(watcher.states.map(({ state }) => state)).toContain("running");
  });

  it("still shows the last field after the end, and says so once it is gone", async () => {
    bench.threads.options = { maxSteps: 25 };
    const { id } = await bench.start();
    await bench.reaches(id, "done");
    const watcher = await watch();
    const joined = (await watcher.ask("join", { runId: id })) as { traces: { values: number[] }[] };
    expect(joined.traces[0]?.values).toHaveLength(25);
    await watcher.ask("view", view(id));
    await until(() => watcher.frames.at(-1)?.step === 25);

    bench.threads.started[0]?.die();
    await until(async () => {
      const answer = (await watcher.ask("view", view(id))) as { ok: boolean; error?: { message: string } };
      return !answer.ok && answer.error?.message.includes("no longer in memory");
    });
    const again = (await watcher.ask("join", { runId: id })) as { traces: { values: number[] }[] };
    expect(again.traces[0]?.values).toHaveLength(25);
  });

  it("answers what is malformed and lives on", async () => {
    const { id } = await bench.start();
    const watcher = await watch();
    const bodies: unknown[] = [undefined, null, 7, "x", [], {}, { runId: "1" }, { runId: id, more: 1 }];
    for (const body of bodies) {
      for (const event of ["join", "leave", "view"]) {
        expect(await watcher.ask(event, body), `${event} ${JSON.stringify(body)}`).toMatchObject({
          ok: false,
          error: { code: "bad-request" },
        });
      }
      watcher.socket.emit("credit", body as { runId: string; sequence: number });
    }
    expect(await watcher.ask("rm -rf", {})).toMatchObject({ ok: false, error: { code: "bad-request" } });
    expect(await watcher.ask("view", view(id))).toMatchObject({ ok: false, error: { code: "wrong-state" } });
    expect(await watcher.ask("join", { runId: id })).toMatchObject({ ok: true });
    for (const wrong of [
      { width: 0 },
      { width: 1e9 },
      { quantity: "Q" },
      { range: -1 },
      { framesPerSecond: 1e6 },
    ]) {
      expect(await watcher.ask("view", view(id, wrong))).toMatchObject({
        ok: false,
        error: { code: "bad-request", problems: [{ path: Object.keys(wrong)[0] }] },
      });
    }
  });

  it("refuses a quantity that the polarization does not have", async () => {
    const { id } = await bench.start();
    await bench.reaches(id, "running");
    await until(() => bench.threads.started.length > 0);
    const watcher = await watch();
    await watcher.ask("join", { runId: id });
    await until(async () => {
      const answer = (await watcher.ask("view", view(id, { quantity: "Hz" }))) as {
        error?: { message: string };
      };
      return answer.error?.message.startsWith("This run has no Hz") ?? false;
    });
  });

  it("knows no run of others and none that is made up", async () => {
    const watcher = await watch();
    expect(await watcher.ask("join", { runId: randomUUID() })).toMatchObject({
      ok: false,
      error: { code: "not-found" },
    });
  });

  it("slows down and then closes a socket that floods it", async () => {
    const watcher = await watch();
    const answers = Array.from({ length: 600 }, () => watcher.ask("leave", { runId: randomUUID() }));
    const codes = (await Promise.all(answers)).map(
      (answer) => (answer as { error?: { code: string } }).error?.code,
    );
    expect(codes).toContain("too-many");
    const closed = new Promise((resolve) => watcher.socket.once("disconnect", resolve));
    for (let event = 0; event < 3_000; event++)
      watcher.socket.emit("credit", { runId: randomUUID(), sequence: 1 });
    await closed;
  });

  it("closes a socket whose message is too large, and only that one", async () => {
    const [large, other] = [await watch(), await watch()];
    const closed = new Promise((resolve) => large.socket.once("disconnect", resolve));
    large.socket.emit("leave", { runId: "x".repeat(100_000) }, () => undefined);
    await closed;
    expect(await other.ask("leave", { runId: randomUUID() })).toEqual({ ok: true });
  });

  it("closes the sockets of a session that has ended, and keeps the others", async () => {
    const cookie = await bench.cookieOf("engineer");
    const ended = await openWatcher(bench.url, { cookie });
    const kept = await watch();
    const out = await fetch(`${bench.url}/api/auth/sign-out`, {
      method: "POST",
      headers: { cookie, "content-type": "application/json" },
      body: "{}",
    });
    expect(out.status).toBe(200);
    const closed = new Promise((resolve) => ended.socket.once("disconnect", resolve));
    const gateway = bench.server.app.get(RunsGateway);
    await bench.server.app.get(StreamDoor).recheck(gateway.namespace);
    expect(await closed).toBe("io server disconnect");
    expect(kept.socket.connected).toBe(true);
  });
});
