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
});
