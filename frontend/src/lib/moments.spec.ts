import { describe, expect, it } from "vitest";
import { whenInWords } from "./moments";

const at = (y: number, m: number, d: number, h = 12, min = 0): Date => new Date(y, m - 1, d, h, min);

describe("whenInWords", () => {
  const now = at(2026, 12, 1, 15, 0);
  it.each([
    [at(2026, 12, 1, 15, 0), "just now"],
    [at(2026, 12, 1, 14, 48), "12 min ago"],
    [at(2026, 12, 1, 9, 5), "today 09:05"],
    [at(2026, 11, 30, 23, 59), "yesterday 23:59"],
    [at(2026, 11, 29), "29 Nov"],
    [at(2025, 11, 29), "29 Nov 2025"],
  ])("says %s as %s", (moment, words) => {
    expect(whenInWords(moment.toISOString(), now)).toBe(words);
  });
});
