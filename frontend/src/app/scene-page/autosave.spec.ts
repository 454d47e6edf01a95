import type { SceneDto, StaleRevisionDto } from "@heddle/backend/contract";
import type { Scene } from "@heddle/kernels/scene";
import { afterEach, beforeEach, describe, expect, it, vi } from "vitest";
import type { Draft, SaveOutcome } from "./autosave";
import { Autosave } from "./autosave";

const scene = (name: string): Scene => ({ name }) as Scene;
const dto = (revision: number): SceneDto => ({ revision, updatedAt: `t${revision.toString()}` }) as SceneDto;

function setUp() {
  const calls: { name: string; base: number; answer: (outcome: SaveOutcome) => void }[] = [];
  let draft: Draft | null = null;
  const autosave = new Autosave({
    scene: { revision: 3, updatedAt: "t3" },
    document: scene("first"),
    save: (document, base) =>
      new Promise((resolve) => {
        calls.push({ name: document.name, base, answer: resolve });
      }),
    drafts: {
      read: () => draft,
      write: (next) => {
        draft = next;
      },
      clear: () => {
        draft = null;
      },
    },
  });
  const kinds: string[] = [];
  autosave.subscribe(() => kinds.push(autosave.getState().kind));
  const answer = async (index: number, outcome: SaveOutcome): Promise<void> => {
    calls[index]?.answer(outcome);
    await vi.advanceTimersByTimeAsync(0);
  };
  return { autosave, calls, kinds, answer, draft: () => draft };
}

describe("autosave", () => {
  beforeEach(() => {
    vi.useFakeTimers();
  });
  afterEach(() => {
    vi.useRealTimers();
  });

  it("saves once, a moment after the last of several gestures, on the revision it knows", async () => {
    const { autosave, calls, kinds, answer, draft } = setUp();
    autosave.change(scene("a"));
    await vi.advanceTimersByTimeAsync(500);
    autosave.change(scene("b"));
    expect(draft()?.document).toEqual({ name: "b" });
    await vi.advanceTimersByTimeAsync(799);
    expect(calls).toHaveLength(0);
    await vi.advanceTimersByTimeAsync(1);
    expect(calls.map(({ name, base }) => [name, base])).toEqual([["b", 3]]);
    await answer(0, { kind: "saved", scene: dto(4) });
    expect(autosave.revision).toBe(4);
    expect(kinds.at(-1)).toBe("saved");
    expect(draft()).toBeNull();
  });

  it("saves again what was drawn during a save, on the new revision", async () => {
    const { autosave, calls, answer, draft } = setUp();
    autosave.change(scene("a"));
    await vi.advanceTimersByTimeAsync(800);
    autosave.change(scene("b"));
    await vi.advanceTimersByTimeAsync(2_000);
    expect(calls).toHaveLength(1);
    await answer(0, { kind: "saved", scene: dto(4) });
    expect(draft()?.document).toEqual({ name: "b" });
    await vi.advanceTimersByTimeAsync(800);
    expect(calls[1]).toMatchObject({ name: "b", base: 4 });
  });

  it("keeps the draft and tries again by itself while the server is out of reach", async () => {
    const { autosave, calls, answer, draft } = setUp();
    autosave.change(scene("a"));
    await vi.advanceTimersByTimeAsync(800);
    await answer(0, { kind: "offline", sentence: "gone" });
    expect(autosave.getState()).toEqual({ kind: "offline", sentence: "gone" });
    expect(draft()?.document).toEqual({ name: "a" });
    await vi.advanceTimersByTimeAsync(5_000);
    expect(calls).toHaveLength(2);
    await answer(1, { kind: "saved", scene: dto(4) });
    expect(autosave.getState().kind).toBe("saved");
  });

  it("stops at a conflict until a person decides, and loses nothing meanwhile", async () => {
    const { autosave, calls, answer, draft } = setUp();
    autosave.change(scene("mine"));
    await vi.advanceTimersByTimeAsync(800);
    const stale = { current: dto(9), changes: [] } as unknown as StaleRevisionDto;
    await answer(0, { kind: "stale", stale });
    autosave.change(scene("mine more"));
    await vi.advanceTimersByTimeAsync(20_000);
    expect(calls).toHaveLength(1);
    expect(await autosave.flush()).toBeNull();
    expect(draft()?.document).toEqual({ name: "mine more" });
    expect(autosave.waiting?.name).toBe("mine more");
    autosave.adopt(dto(9), scene("theirs"));
    expect(autosave.getState().kind).toBe("saved");
    expect(draft()).toBeNull();
    autosave.change(scene("theirs"));
    expect(autosave.getState().kind).toBe("saved");
    autosave.change(scene("on theirs"));
    await vi.advanceTimersByTimeAsync(800);
    expect(calls[1]).toMatchObject({ name: "on theirs", base: 9 });
  });

  it("flushes at once and answers with the revision that holds the drawing", async () => {
    const { autosave, calls, answer } = setUp();
    expect(await autosave.flush()).toBe(3);
    autosave.change(scene("a"));
    const flushed = autosave.flush();
    await vi.advanceTimersByTimeAsync(0);
    expect(calls).toHaveLength(1);
    await answer(0, { kind: "saved", scene: dto(4) });
    expect(await flushed).toBe(4);
  });

  it("flushes what was drawn during a running save too", async () => {
    const { autosave, calls, answer } = setUp();
    autosave.change(scene("a"));
    await vi.advanceTimersByTimeAsync(800);
    autosave.change(scene("b"));
    const flushed = autosave.flush();
    await answer(0, { kind: "saved", scene: dto(4) });
    expect(calls[1]).toMatchObject({ name: "b", base: 4 });
    await answer(1, { kind: "saved", scene: dto(5) });
    expect(await flushed).toBe(5);
  });

  it("shows a refusal with its problems and tries again with the next change", async () => {
    const { autosave, calls, answer } = setUp();
    autosave.change(scene("bad"));
    const flushed = autosave.flush();
    await answer(0, { kind: "refused", sentence: "no", problems: [{ path: "paint[0]", sentence: "no" }] });
    expect(await flushed).toBeNull();
    expect(autosave.getState()).toMatchObject({ kind: "refused", problems: [{ path: "paint[0]" }] });
    await vi.advanceTimersByTimeAsync(60_000);
    expect(calls).toHaveLength(1);
    autosave.change(scene("better"));
    await vi.advanceTimersByTimeAsync(800);
    expect(calls).toHaveLength(2);
  });

  it("does not save what equals what stands", async () => {
    const { autosave, calls } = setUp();
    autosave.change(scene("first"));
    await vi.advanceTimersByTimeAsync(5_000);
    expect(calls).toHaveLength(0);
  });

  it("saves a restored draft on the revision it was drawn on, so that the server can see a conflict", async () => {
    const { autosave, calls } = setUp();
    autosave.rebase(2);
    autosave.change(scene("draft"));
    await vi.advanceTimersByTimeAsync(800);
    expect(calls[0]).toMatchObject({ name: "draft", base: 2 });
  });
});
