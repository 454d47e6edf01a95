import { beforeEach, describe, expect, it } from "vitest";
import { readScene } from "@heddle/kernels/scene";
import { FakeSession, type FakeOptions } from "../testing/fake-session.js";
import { smallScene } from "../testing/scene.js";
import type { FromThread } from "./protocol.js";
import { SolverLoop } from "./solver-loop.js";

const sceneOf = (document: unknown) => {
  const read = readScene(document);
  if (!read.ok) throw new Error(read.problems.map(({ sentence }) => sentence).join(" "));
  return read.scene;
};

describe("SolverLoop", () => {
  let nowMs: number;
  let heard: FromThread[];
  let session: FakeSession;

  const make = (options: FakeOptions = {}, start: { startPaused?: boolean; pace?: number } = {}) => {
    session = new FakeSession(options);
    return new SolverLoop(
      {
        session,
        scene: sceneOf(smallScene()),
        post: (message) => heard.push(message),
        read: (document) => {
          const outcome = readScene(document);
          return outcome.ok ? { scene: outcome.scene, sha256: "ab" } : outcome;
        },
        encode: (sample, range, sequence) => new Uint8Array([sequence, range ?? 0, sample.step]),
        // Every look at the clock costs a millisecond.
        now: () => nowMs++,
      },
      { startPaused: start.startPaused ?? false, pacePsPerSecond: start.pace ?? null },
    );
  };
  const of = <K extends FromThread["kind"]>(kind: K) =>
    heard.filter((message): message is Extract<FromThread, { kind: K }> => message.kind === kind);
  const turns = (loop: SolverLoop, count: number): void => {
    for (let turn = 0; turn < count; turn++) loop.turn();
  };

  beforeEach(() => {
    nowMs = 0;
    heard = [];
  });

  it("says what it runs on before the first step", () => {
    make();
    expect(heard.map(({ kind }) => kind)).toEqual(["started", "activity"]);
    expect(of("started")[0]?.grid.nx).toBe(40);
  });

  it("steps, and reports progress at most four and traces at most ten times a second", () => {
    const loop = make();
    while (nowMs < 5_000) loop.turn();
    expect(session.step).toBeGreaterThan(0);
    expect(of("progress").length).toBeGreaterThan(10);
    expect(of("progress").length).toBeLessThanOrEqual(20);
    expect(of("traces").length).toBeLessThanOrEqual(50);
  });

  it("sends trace samples without gap or overlap, rounded to seven digits", () => {
    const loop = make();
    while (session.step < 1_500) loop.turn();
    loop.receive({ kind: "pause" });
    let next = 0;
    for (const { traces } of of("traces")) {
      expect(traces[0]?.from).toBe(next);
      next += traces[0]?.values.length ?? 0;
    }
    expect(next).toBe(1_000);
    const values = of("traces").flatMap(({ traces }) => traces[0]?.values ?? []);
    expect(values.slice(0, 3)).toEqual([0, 0.3333333, 0.6666667]);
  });

  it("answers a join with everything, after an increment up to the same sample", () => {
    const loop = make({}, { startPaused: true });
    loop.receive({ kind: "step", steps: 30 });
    turns(loop, 40);
    heard.length = 0;
    loop.receive({ kind: "traces", requestId: 5 });
    const answer = of("trace-answer").at(0);
    expect(answer?.requestId).toBe(5);
    expect(answer?.traces[0]).toMatchObject({ from: 0, values: { length: 30 } });
  });

  it("takes exactly the steps asked for while paused, then sleeps", () => {
    const loop = make({}, { startPaused: true });
    expect(loop.turn()).toBeNull();
    loop.receive({ kind: "step", steps: 25 });
    turns(loop, 60);
    expect(session.step).toBe(25);
    expect(loop.turn()).toBeNull();
    expect(of("activity").at(-1)).toMatchObject({ activity: "paused", progress: { step: 25 } });
  });

  it("renders only what is wanted, and not the same field twice", () => {
    const loop = make({}, { startPaused: true });
    const view = {
      viewId: 1,
      request: { quantity: "Ez", width: 8, height: 8 },
      range: null,
    } as const;
    loop.receive({ kind: "view", view });
    turns(loop, 5);
    expect(of("frame")).toEqual([]);

    loop.receive({ kind: "want", viewId: 1, newerThan: -1 });
    turns(loop, 5);
    const first = of("frame").at(0);
    expect(of("frame")).toHaveLength(1);
    loop.receive({ kind: "want", viewId: 1, newerThan: first?.frame.version ?? 0 });
    turns(loop, 5);
    expect(of("frame")).toHaveLength(1);

    loop.receive({ kind: "step", steps: 1 });
    turns(loop, 3);
    expect(of("frame")).toHaveLength(2);
    expect(of("frame")[1]?.frame.sequence).toBeGreaterThan(first?.frame.sequence ?? Infinity);
  });

  it("shows an edit of a paused run at once", () => {
    const loop = make({}, { startPaused: true });
    const view = { viewId: 1, request: { quantity: "Ez", width: 8, height: 8 }, range: null } as const;
    loop.receive({ kind: "view", view });
    loop.receive({ kind: "want", viewId: 1, newerThan: 0 });
    turns(loop, 3);
    expect(of("frame")).toHaveLength(0);
    loop.receive({ kind: "edit", requestId: 9, document: smallScene({ paint: [] }) });
    expect(of("edit-answer")[0]).toMatchObject({ requestId: 9, step: 0, sceneSha256: "ab" });
    loop.turn();
    expect(of("frame")).toHaveLength(1);
  });

  it("refuses an edit of anything but paint, media and sources, with the reason", () => {
    const loop = make();
    const document = smallScene({ section: { widthMm: 61, heightMm: 40 }, probes: [] });
    loop.receive({ kind: "edit", requestId: 1, document });
    const refused = of("edit-refused").at(0);
    expect(refused?.problems.map(({ path }) => path).sort()).toEqual(["probes", "section"]);
    expect(refused?.problems[0]?.sentence).toMatch(/cannot change while the run goes on/);
    expect(session.edits).toEqual([]);
  });

  it("hands on what the session refuses", () => {
    const loop = make({ refusesEdits: "It would need a smaller time step." });
    loop.receive({ kind: "edit", requestId: 1, document: smallScene({ paint: [] }) });
    expect(of("edit-refused")[0]?.problems[0]?.sentence).toBe("It would need a smaller time step.");
  });

  it("keeps the asked pace", () => {
    // 2 ps a step, 20 ps a second: ten steps a second.
    const loop = make({}, { pace: 20 });
    while (nowMs < 10_000) {
      const waitMs = loop.turn();
      if (waitMs !== null) nowMs += Math.min(waitMs, 50);
    }
    expect(session.step).toBeGreaterThanOrEqual(95);
    expect(session.step).toBeLessThanOrEqual(100);
  });

  it("ends with a result, serves frames of the last field, and takes nothing more", () => {
    const loop = make({ maxSteps: 40 });
    while (of("ended").length === 0) loop.turn();
    const ended = of("ended").at(0);
    expect(ended).toMatchObject({ reason: "time", progress: { step: 40 } });
    expect(JSON.parse(ended?.result.text ?? "")).toMatchObject({ format: "heddle-result" });
    expect(of("traces").flatMap(({ traces }) => traces[0]?.values ?? [])).toHaveLength(40);

    const view = { viewId: 1, request: { quantity: "Ez", width: 8, height: 8 }, range: null } as const;
    loop.receive({ kind: "view", view });
    loop.receive({ kind: "want", viewId: 1, newerThan: -1 });
    loop.receive({ kind: "step", steps: 5 });
    turns(loop, 5);
    expect(session.step).toBe(40);
    expect(of("frame")[0]?.frame.bytes[2]).toBe(40);
    loop.receive({ kind: "edit", requestId: 3, document: smallScene() });
    expect(of("edit-refused")).toHaveLength(1);
  });

  it("stops on demand with what it has", () => {
    const loop = make();
    turns(loop, 10);
    loop.receive({ kind: "stop" });
    loop.receive({ kind: "stop" });
    expect(of("ended")).toHaveLength(1);
    expect(of("ended")[0]?.reason).toBe("cancelled");
    expect(loop.turn()).toBeNull();
  });

  it("tells a failure of the field in its own words", () => {
    const loop = make({ failsAt: 3 });
    turns(loop, 10);
    expect(of("failed")).toHaveLength(1);
    expect(of("failed")[0]?.sentence).toBe("The field grew past every bound.");
  });
});
