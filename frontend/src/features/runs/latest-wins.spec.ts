import { afterEach, beforeEach, describe, expect, it, vi } from "vitest";
import { createLatestWins } from "./latest-wins";

describe("latest wins", () => {
  beforeEach(() => {
    vi.useFakeTimers();
  });
  afterEach(() => {
    vi.useRealTimers();
  });

  it("sends the first at once, then only the newest of what came meanwhile", async () => {
    const sent: number[] = [];
    const queue = createLatestWins<number>((value) => {
      sent.push(value);
      return Promise.resolve();
    }, 100);
    for (const value of [1, 2, 3]) queue.push(value);
    expect(sent).toEqual([1]);
    await vi.advanceTimersByTimeAsync(100);
    expect(sent).toEqual([1, 3]);
    await vi.advanceTimersByTimeAsync(500);
    queue.push(4);
    expect(sent).toEqual([1, 3, 4]);
  });

  it("waits for a slow answer rather than overtaking it", async () => {
    const sent: number[] = [];
    const releases: (() => void)[] = [];
    const queue = createLatestWins<number>((value) => {
      sent.push(value);
      return new Promise((resolve) => releases.push(resolve));
    }, 10);
    queue.push(1);
    queue.push(2);
    await vi.advanceTimersByTimeAsync(1_000);
    expect(sent).toEqual([1]);
    releases[0]?.();
    await vi.advanceTimersByTimeAsync(20);
    expect(sent).toEqual([1, 2]);
  });

  it("drops what was not sent when cancelled", async () => {
    const sent: number[] = [];
    const queue = createLatestWins<number>((value) => {
      sent.push(value);
      return Promise.resolve();
    }, 10);
    queue.push(1);
    queue.push(2);
    queue.cancel();
    await vi.advanceTimersByTimeAsync(100);
    expect(sent).toEqual([1]);
  });
});
