import { randomUUID } from "node:crypto";
import { afterAll, afterEach, beforeAll, describe, expect, it, vi } from "vitest";
import { resultSchema } from "@heddle/kernels/scene";
import { FolderArrayStore } from "../storage/folder-array-store.js";
import { RunsRepository } from "./runs.repository.js";
import { startRunBench, type RunBench } from "./testing/run-bench.js";
import { smallScene } from "./testing/scene.js";
import { until } from "./testing/watcher.js";

describe("runs", () => {
  let bench: RunBench;
  beforeAll(async () => {
    bench = await startRunBench();
  });
  afterEach(async () => {
    vi.restoreAllMocks();
    await bench.clear();
  });
  afterAll(() => bench.close());

  it("runs a scene to its end and keeps the result", async () => {
    bench.threads.options = { maxSteps: 50 };
    const started = await bench.start();
    expect(started).toMatchObject({ sceneId: bench.sceneId, revision: 1, edited: false });
    const done = await bench.reaches(started.id, "done");
    expect(done).toMatchObject({ step: 50, stopReason: "time", message: null, queuePlace: null });
    expect(done.grid?.nx).toBe(40);
    const answer = await bench.engineer.get(`/api/runs/${done.id}/result`).expect(200);
    expect(answer.headers["content-type"]).toMatch(/^application\/json/);
    expect(resultSchema.parse(answer.body).probes[0]?.trace.values).toHaveLength(50);
  });

  it("finds a scene's runs again, newest first", async () => {
    bench.threads.options = { maxSteps: 5 };
    const first = await bench.start();
    await bench.reaches(first.id, "done");
    const second = await bench.start({ paused: true });
    await bench.reaches(second.id, "paused");
    const list = await bench.engineer.get(`/api/scenes/${bench.sceneId}/runs`).expect(200);
    const newest = list.body as { id: string; state: string }[];
    expect(newest.slice(0, 2).map(({ id, state }) => [id, state])).toEqual([
      [second.id, "paused"],
      [first.id, "done"],
    ]);
  });

  it("pauses, steps exactly, resumes and stops", async () => {
    const { id } = await bench.start();
    await bench.reaches(id, "running");
    const paused = await bench.command(id, { kind: "pause" });
    expect(paused.body.state).toBe("paused");
    const stepped = await bench.command(id, { kind: "step", steps: 7 });
    expect(stepped.body.step).toBe(paused.body.step + 7);
    expect((await bench.command(id, { kind: "resume" })).body.state).toBe("running");
    await until(async () => (await bench.get(id)).step > stepped.body.step);
    const stopped = await bench.command(id, { kind: "stop" });
    expect(stopped.body).toMatchObject({ state: "stopped", stopReason: "cancelled" });
    await bench.engineer.get(`/api/runs/${id}/result`).expect(200);
  });

  it("starts paused when asked", async () => {
    const { id } = await bench.start({ paused: true });
    expect((await bench.reaches(id, "paused")).step).toBe(0);
  });

  it("answers a command that the state does not allow with the reason", async () => {
    const { id } = await bench.start();
    await bench.reaches(id, "running");
    for (const kind of ["resume", "step"]) {
      const answer = await bench.command(id, { kind });
      expect(answer.status).toBe(409);
      expect(answer.body).toMatchObject({ code: "wrong-state" });
    }
    await bench.command(id, { kind: "stop" });
    const late = await bench.command(id, { kind: "pause" });
    expect(late.status).toBe(409);
    expect(late.body.message).toMatch(/was stopped/);
    expect((await bench.command(id, { kind: "dance" })).status).toBe(400);
  });

  it("has no result while the run goes on, and says so", async () => {
    const { id } = await bench.start();
    const answer = await bench.engineer.get(`/api/runs/${id}/result`).expect(409);
    expect(answer.body).toMatchObject({
      code: "wrong-state",
      message: expect.stringMatching(/no result yet/),
    });
  });

  it("changes the pace of a waiting and of a running run", async () => {
    const first = await bench.start();
    const second = await bench.start();
    await bench.reaches(first.id, "running");
    const pace = { kind: "pace", picosecondsPerSecond: 40 };
    expect((await bench.command(second.id, pace)).body).toMatchObject({
      state: "queued",
      pacePsPerSecond: 40,
    });
    expect((await bench.command(first.id, pace)).body.pacePsPerSecond).toBe(40);
    const before = (await bench.get(first.id)).step;
    await new Promise((resolve) => setTimeout(resolve, 600));
    // 2 ps a step: twenty steps a second.
    expect((await bench.get(first.id)).step - before).toBeLessThan(40);
  });

  it("lets nobody but those who may run things, and hides runs from other ids", async () => {
    const { id } = await bench.start();
    const manager = await bench.server.as("manager");
    await manager.get(`/api/runs/${id}`).expect(200);
    await manager.post(`/api/scenes/${bench.sceneId}/runs`).send({ revision: 1 }).expect(403);
    await manager.post(`/api/runs/${id}/commands`).send({ kind: "stop" }).expect(403);
    await manager.post(`/api/runs/${id}/edits`).send({ document: smallScene() }).expect(403);
    await bench.server.stranger().get(`/api/runs/${id}`).expect(401);
    for (const stranger of [randomUUID(), "1", "../etc"]) {
      await bench.engineer.get(`/api/runs/${encodeURIComponent(stranger)}`).expect(404);
      await bench.engineer
        .post(`/api/scenes/${encodeURIComponent(stranger)}/runs`)
        .send({ revision: 1 })
        .expect(404);
    }
    await bench.engineer.post(`/api/scenes/${bench.sceneId}/runs`).send({ revision: 99 }).expect(404);
  });

  it("refuses a run that needs more memory than there is, with the numbers", async () => {
    bench.limits.memoryBytes = 1_000;
    const answer = await bench.engineer.post(`/api/scenes/${bench.sceneId}/runs`).send({ revision: 1 });
    expect(answer.status).toBe(413);
    expect(answer.body.message).toMatch(/needs about \d+\.\d GB.*gives its runs 0\.0 GB/);
  });

  it("asks for the runs that it is to be compared with, and says so", async () => {
    const started = await bench.start({ paused: true, twoMesh: true });
    expect(await bench.reaches(started.id, "paused")).toMatchObject({ twoMesh: true, shielding: false });
    expect(bench.threads.started.at(-1)?.task).toMatchObject({ twoMesh: true, shielding: false });
  });

  it("refuses to compare with a scene that is there no more without its marked patches, or too large", async () => {
    const ask = (body: object) =>
      bench.engineer.post(`/api/scenes/${bench.sceneId}/runs`).send({ revision: 1, ...body });
    const unmarked = await ask({ shielding: true }).expect(422);
    expect(unmarked.body).toMatchObject({ code: "scene-refused", problems: [{ path: "paint" }] });
    const alone = await bench.start();
    const run = await bench.server.app.get(RunsRepository).findAnywhere(alone.id);
    bench.limits.memoryBytes = run?.memoryBytes ?? 0;
    await ask({}).expect(201);
    expect((await ask({ twoMesh: true }).expect(413)).body).toMatchObject({ code: "too-large" });
  });

  it("holds what is over the slots in the queue, tells places, and refuses what is over its bounds", async () => {
    Object.assign(bench.limits, { queued: 3, queuedPerPerson: 2 });
    const going = await bench.start();
    const waiting = [await bench.start(), await bench.start()];
    expect(waiting.map(({ state, queuePlace }) => [state, queuePlace])).toEqual([
      ["queued", 1],
      ["queued", 2],
    ]);
    const third = await bench.engineer.post(`/api/scenes/${bench.sceneId}/runs`).send({ revision: 1 });
    expect(third.status).toBe(429);
    expect(third.body).toMatchObject({
      code: "queue-full",
      message: expect.stringMatching(/^2 of your runs/),
    });

    const owner = await bench.server.as("owner");
    expect((await bench.start({}, owner)).queuePlace).toBe(1);
    const fourth = await owner.post(`/api/scenes/${bench.sceneId}/runs`).send({ revision: 1 });
    expect(fourth.status).toBe(429);
    expect(fourth.body.message).toMatch(/^3 runs wait/);

    const first = waiting.at(0);
    expect((await bench.command(String(first?.id), { kind: "stop" })).body.state).toBe("stopped");
    await bench.command(going.id, { kind: "stop" });
    await until(() => bench.threads.started.length === 2);
  });

  it("gives a freed slot to who has nothing running, before who has", async () => {
    bench.limits.running = 2;
    const first = await bench.start();
    await bench.start();
    const third = await bench.start();
    const owner = await bench.server.as("owner");
    const theirs = await bench.start({}, owner);
    expect(theirs).toMatchObject({ state: "queued", queuePlace: 1 });
    await bench.command(first.id, { kind: "stop" });
    await bench.reaches(theirs.id, "running");
    expect((await bench.get(third.id)).state).toBe("queued");
  });

  it("frees the slot of a paused run, and resumes it in its turn", async () => {
    const first = await bench.start();
    const second = await bench.start();
    await bench.reaches(first.id, "running");
    await bench.command(first.id, { kind: "pause" });
    await bench.reaches(second.id, "running");
    const resumed = await bench.command(first.id, { kind: "resume" });
    expect(resumed.body).toMatchObject({ state: "queued", queuePlace: 1 });
    const step = resumed.body.step;
    await bench.command(second.id, { kind: "stop" });
    await bench.reaches(first.id, "running");
    await until(async () => (await bench.get(first.id)).step > step);
    expect(bench.threads.started).toHaveLength(2);
  });

  it("bounds how many runs stay paused", async () => {
    bench.limits.paused = 1;
    const first = await bench.start({ paused: true });
    await bench.reaches(first.id, "paused");
    const second = await bench.start();
    await bench.reaches(second.id, "running");
    const answer = await bench.command(second.id, { kind: "pause" });
    expect(answer.status).toBe(429);
    expect(answer.body.message).toMatch(/paused already/);
  });

  it("takes a live edit, marks the run, keeps who did it, and refuses what may not change", async () => {
    const { id } = await bench.start();
    await bench.reaches(id, "running");
    const edit = (document: object) => bench.engineer.post(`/api/runs/${id}/edits`).send({ document });
    const taken = await edit(smallScene({ paint: [] })).expect(200);
    const run = await bench.get(id);
    expect(run.edited).toBe(true);
    expect(run.edits).toMatchObject([{ step: taken.body.step, by: { name: run.by.name } }]);

    const refused = await edit(smallScene({ section: { widthMm: 70, heightMm: 40 } })).expect(422);
    expect(refused.body.code).toBe("scene-refused");
    expect(refused.body.problems[0].path).toBe("section");
    const broken = await edit({ format: "heddle-scene" }).expect(422);
    expect(broken.body.problems.length).toBeGreaterThan(3);

    await bench.command(id, { kind: "stop" });
    await edit(smallScene()).expect(409);
    expect((await bench.get(id)).edits).toHaveLength(1);
  });

  it("outlives a killed thread and goes on with the queue", async () => {
    const first = await bench.start();
    const second = await bench.start();
    await bench.reaches(first.id, "running");
    bench.threads.started[0]?.die();
    const lost = await bench.reaches(first.id, "interrupted");
    expect(lost.message).toMatch(/thread was ended at step \d+ from outside/);
    await bench.reaches(second.id, "running");
    const none = await bench.engineer.get(`/api/runs/${first.id}/result`).expect(409);
    expect(none.body.message).toContain(String(lost.message));
  });

  it("fails a run whose thread has no memory left", async () => {
    const { id } = await bench.start();
    await bench.reaches(id, "running");
    bench.threads.started[0]?.die(Object.assign(new Error("heap"), { code: "ERR_WORKER_OUT_OF_MEMORY" }));
    expect((await bench.reaches(id, "failed")).message).toMatch(/ran out of memory/);
  });

  it("fails a run whose field or solver fails, in a sentence", async () => {
    bench.threads.options = { failsAt: 3 };
    const first = await bench.start();
    expect((await bench.reaches(first.id, "failed")).message).toBe("The field grew past every bound.");
    bench.threads.options = { throws: new Error("A fault.") };
    const second = await bench.start();
    expect((await bench.reaches(second.id, "failed")).message).toBe("A fault.");
  });

  it("fails a run whose result finds no room, and keeps no half of it", async () => {
    const write = vi.spyOn(RunsRepository.prototype, "end");
    write.mockRejectedValueOnce(Object.assign(new Error("no room"), { code: "53100" }));
    bench.threads.options = { maxSteps: 20 };
    const { id } = await bench.start();
    const failed = await bench.reaches(id, "failed");
    expect(failed.message).toMatch(/disk is full.*could not be kept/);
    await bench.engineer.get(`/api/runs/${id}/result`).expect(409);
  });

  it("fails a run whose long arrays find no room", async () => {
    vi.spyOn(FolderArrayStore.prototype, "put").mockRejectedValue(
      Object.assign(new Error("write"), { code: "ENOSPC" }),
    );
    bench.threads.options = { maxSteps: 20, resultSamples: 200_000 };
    const { id } = await bench.start();
    expect((await bench.reaches(id, "failed")).message).toMatch(/disk is full/);
  });

  it("keeps long traces in files and gives them back whole", async () => {
    bench.threads.options = { maxSteps: 20, resultSamples: 200_000 };
    const { id } = await bench.start();
    await bench.reaches(id, "done");
    const answer = await bench.engineer.get(`/api/runs/${id}/result`).expect(200);
    const values = resultSchema.parse(answer.body).probes[0]?.trace.values ?? [];
    expect(values).toHaveLength(200_000);
    expect(values[123_456]).toBe(Math.sin(123_456));
  });
});
