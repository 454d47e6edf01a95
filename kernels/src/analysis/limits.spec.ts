import { describe, expect, it } from "vitest";
import { judgeLevels, limitAt } from "./index.js";

const limit = {
  sense: "below",
  points: [
    [1, 40],
    [10, 60],
  ],
} as const;

describe("limits on levels", () => {
  it("are straight against log frequency between their points and nothing beyond", () => {
    expect(limitAt(limit, Math.sqrt(10))).toBeCloseTo(50, 12);
    expect(limitAt(limit, 1)).toBe(40);
    expect(limitAt(limit, 10)).toBe(60);
    expect(limitAt(limit, 0.9)).toBeNull();
    expect(limitAt(limit, 10.1)).toBeNull();
  });

  it("give the smallest margin and where it is", () => {
    expect(judgeLevels(limit, [0.5, 1, 10], [99, 30, 58])).toEqual({ holds: true, margin: 2, atGHz: 10 });
    expect(judgeLevels(limit, [1, 10], [41, 58])).toEqual({ holds: false, margin: -1, atGHz: 1 });
    expect(judgeLevels({ ...limit, sense: "above" }, [1], [41])).toEqual({
      holds: true,
      margin: 1,
      atGHz: 1,
    });
  });

  it("are not judged where no level is known", () => {
    expect(judgeLevels(limit, [20], [0]).holds).toBeNull();
    expect(judgeLevels(limit, [1, 10], [null, 0])).toEqual({ holds: null, margin: null, atGHz: 1 });
  });
});
