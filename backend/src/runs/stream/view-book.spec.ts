import { beforeEach, describe, expect, it } from "vitest";
import { FRAME_CREDITS } from "../../contract/socket.js";
import type { ToThread } from "../worker/protocol.js";
import { MAX_VIEWS, ViewBook, type ViewWish } from "./view-book.js";

const wish = (changes: Partial<ViewWish["request"]> = {}, framesPerSecond = 20): ViewWish => ({
  request: { quantity: "Ez", width: 100, height: 80, ...changes },
  range: null,
  framesPerSecond,
});

describe("ViewBook", () => {
  let nowMs: number;
  let asked: ToThread[];
  let sent: { viewerIds: readonly string[]; bytes: Uint8Array }[];
  let alarms: { atMs: number; then: () => void; off: boolean }[];
  let book: ViewBook;
  let sequence: number;

  beforeEach(() => {
    nowMs = 0;
    asked = [];
    sent = [];
    alarms = [];
    sequence = 0;
    book = new ViewBook({
      ask: (message) => asked.push(message),
      send: (viewerIds, bytes) => sent.push({ viewerIds, bytes }),
      now: () => nowMs,
      later: (ms, then) => {
        const alarm = { atMs: nowMs + ms, then, off: false };
        alarms.push(alarm);
        return () => {
          alarm.off = true;
        };
      },
    });
  });

  const wants = () => asked.filter((message) => message.kind === "want");
  const viewIds = () => asked.flatMap((message) => (message.kind === "view" ? [message.view.viewId] : []));
  const frame = (viewId: number, version: number): number => {
    sequence += 1;
    book.deliver({ viewId, sequence, version, bytes: new Uint8Array([version]) });
    return sequence;
  };
  const passTo = (ms: number): void => {
    nowMs = ms;
    for (const alarm of alarms.filter(({ atMs, off }) => !off && atMs <= ms)) {
      alarm.off = true;
      alarm.then();
    }
  };

  it("asks for nothing while nobody watches, and for one frame when someone does", () => {
    expect(asked).toEqual([]);
    book.watch("a", wish());
    expect(asked.map(({ kind }) => kind)).toEqual(["view", "want"]);
    passTo(1_000);
    expect(wants()).toHaveLength(1);
  });

  it("encodes one view once for all who watch it", () => {
    for (const id of ["a", "b", "c"]) book.watch(id, wish());
    expect(viewIds()).toHaveLength(1);
    frame(1, 1);
    expect(sent).toHaveLength(1);
    expect(sent[0]?.viewerIds).toEqual(["a", "b", "c"]);
  });

  it("sends at most the credits, then nothing until one comes back", () => {
    book.watch("a", wish());
    for (let turn = 1; turn <= 5; turn++) {
      passTo(turn * 1_000);
      frame(1, turn);
    }
    expect(sent).toHaveLength(FRAME_CREDITS);
    const before = wants().length;
    passTo(60_000);
    expect(wants()).toHaveLength(before);

    book.credit("a", 1);
    expect(wants()).toHaveLength(before + 1);
    frame(1, 99);
    expect(sent.at(-1)?.bytes).toEqual(new Uint8Array([99]));
  });

  it("lets a viewer that stopped reading cost no other viewer a frame", () => {
    book.watch("stalled", wish());
    book.watch("reads", wish());
    let got = 0;
    for (let turn = 1; turn <= 10; turn++) {
      passTo(turn * 50);
      const last = frame(1, turn);
      if (sent.at(-1)?.viewerIds.includes("reads") === true) got += 1;
      book.credit("reads", last);
    }
    expect(got).toBe(10);
    expect(sent.filter(({ viewerIds }) => viewerIds.includes("stalled"))).toHaveLength(FRAME_CREDITS);
  });

  it("keeps each viewer's own rate", () => {
    book.watch("slow", wish({}, 2));
    book.watch("fast", wish({}, 20));
    for (let ms = 0; ms < 2_000; ms += 10) {
      passTo(ms);
      if (wants().length > sequence) {
        const last = frame(1, ms + 1);
        book.credit("slow", last);
        book.credit("fast", last);
      }
    }
    const taken = (id: string) => sent.filter(({ viewerIds }) => viewerIds.includes(id)).length;
    expect(taken("fast")).toBeGreaterThanOrEqual(38);
    expect(taken("fast")).toBeLessThanOrEqual(41);
    expect(taken("slow")).toBeGreaterThanOrEqual(4);
    expect(taken("slow")).toBeLessThanOrEqual(5);
  });

  it("does not send a field twice to one viewer, and does send it to a new one", () => {
    book.watch("a", wish());
    frame(1, 7);
    book.watch("b", wish());
    expect(wants().at(-1)).toMatchObject({ newerThan: -1 });
    nowMs = 500;
    frame(1, 7);
    expect(sent.map(({ viewerIds }) => viewerIds)).toEqual([["a"], ["b"]]);
  });

  it("lets a change of view buy no credit", () => {
    book.watch("a", wish());
    frame(1, 1);
    passTo(100);
    frame(1, 2);
    const before = wants().length;
    book.watch("a", wish({ width: 200 }));
    expect(wants()).toHaveLength(before);
    book.credit("a", 2);
    expect(wants().length).toBeGreaterThan(before);
  });

  it("forgets a view that nobody watches any more, and frames of it that still come", () => {
    book.watch("a", wish());
    book.watch("a", wish({ quantity: "Hx" }));
    expect(asked).toContainEqual({ kind: "forget-view", viewId: 1 });
    frame(1, 1);
    expect(sent).toEqual([]);
    book.unwatch("a");
    expect(book.watched).toBe(false);
  });

  it("bounds how many different views a run serves", () => {
    for (let index = 0; index < MAX_VIEWS; index++) {
      expect(book.watch(`v${index}`, wish({ width: 100 + index }))).toBe(true);
    }
    expect(book.watch("one more", wish({ width: 999 }))).toBe(false);
    expect(book.watch("one more", wish({ width: 100 }))).toBe(true);
    // Who is alone in a view may change it.
    expect(book.watch("v5", wish({ width: 998 }))).toBe(true);
  });

  it("tells a new thread every view and what is wanted", () => {
    book.watch("a", wish());
    frame(1, 3);
    asked.length = 0;
    nowMs = 1_000;
    book.attach();
    expect(asked.map(({ kind }) => kind)).toEqual(["view", "want"]);
  });
});
