import { describe, expect, it } from "vitest";
import { EVENTS_PER_SECOND, EventAllowance } from "./event-allowance.js";

describe("EventAllowance", () => {
  it("takes a steady rate for ever and a flood only for a moment", () => {
    let nowMs = 0;
    const allowance = new EventAllowance(() => nowMs);
    for (let event = 0; event < 5_000; event++) {
      nowMs += 1000 / EVENTS_PER_SECOND;
      expect(allowance.take()).toBe("taken");
    }
    const flood = Array.from({ length: 3_000 }, () => allowance.take());
    expect(flood.filter((taken) => taken === "taken").length).toBeLessThan(500);
    expect(flood).toContain("over");
    expect(flood.at(-1)).toBe("hopeless");
    nowMs += 1_000;
    expect(allowance.take()).toBe("taken");
  });

  it("gives up on who keeps sending five times too much, though some of it passes", () => {
    let nowMs = 0;
    const allowance = new EventAllowance(() => nowMs);
    const taken = Array.from({ length: 20 * EVENTS_PER_SECOND }, () => {
      nowMs += 1000 / (5 * EVENTS_PER_SECOND);
      return allowance.take();
    });
    expect(taken).toContain("hopeless");
  });

  it("forgets what was refused once the socket has kept quiet", () => {
    let nowMs = 0;
    const allowance = new EventAllowance(() => nowMs);
    for (let round = 0; round < 10; round++) {
      const flood = Array.from({ length: 900 }, () => allowance.take());
      expect(flood).not.toContain("hopeless");
      nowMs += 60_000;
    }
  });
});
