import type { RunDto } from "@heddle/backend/contract";
import { QueryClient } from "@tanstack/react-query";
import { describe, expect, it } from "vitest";
import { newerOf, runsKey, tellRun } from "./runs";

const run = (over: Partial<RunDto>): RunDto =>
  ({ id: "a", sceneId: "s", state: "running", step: 10, ...over }) as RunDto;

describe("news of a run", () => {
  it("never takes a run back from its end, nor its step back", () => {
    const done = run({ state: "done", step: 50 });
    expect(newerOf(done, run({ step: 40 }))).toBe(done);
    expect(newerOf(run({ step: 40 }), done)).toBe(done);
    expect(newerOf(run({ step: 40 }), run({ step: 30 })).step).toBe(40);
    expect(newerOf(run({ step: 40 }), run({ state: "paused", step: 40 })).state).toBe("paused");
    expect(newerOf(run({ step: 40 }), run({ state: "failed", step: 0 })).state).toBe("failed");
  });

  it("puts a new run first and replaces a known one in place", () => {
    const client = new QueryClient();
    tellRun(client, run({ id: "a" }));
    tellRun(client, run({ id: "b" }));
    tellRun(client, run({ id: "a", step: 20 }));
    const list = client.getQueryData<RunDto[]>(runsKey("s"));
    expect(list?.map((entry) => [entry.id, entry.step])).toEqual([
      ["b", 10],
      ["a", 20],
    ]);
  });
});
