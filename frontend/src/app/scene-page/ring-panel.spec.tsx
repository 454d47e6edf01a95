import { describe, expect, it } from "vitest";
import { digitsOf, qualityInWords, shownResonances } from "./ring-panel";

const at = (GHz: number, levelDb: number | null) => ({
  probe: "p",
  GHz,
  q: 100,
  levelDb,
  ghzUncertainty: 1e-6,
  qUncertainty: 1,
});

describe("the resonances beside the sheet", () => {
  it("have as many digits as their uncertainty leaves", () => {
    expect(digitsOf(2.45, 0.001)).toBe(5);
    expect(digitsOf(2.45, 1e-12)).toBe(6);
    expect(digitsOf(2.45, 2)).toBe(2);
    expect(qualityInWords(297.41, 0.3)).toBe("297.4\u2009±\u20090.3");
    expect(qualityInWords(null, null)).toBe("too high to tell");
  });

  it("are the strongest in rising order, those without decay first of all", () => {
    const all = [1, 2, 3, 4, 5, 6, 7].map((GHz) => at(GHz, -GHz));
    expect(shownResonances(all).shown.map(({ GHz }) => GHz)).toEqual([1, 2, 3, 4, 5, 6]);
    const { shown, more } = shownResonances([...all, at(8, null)]);
    expect(shown.map(({ GHz }) => GHz)).toEqual([1, 2, 3, 4, 5, 8]);
    expect(more).toBe(2);
  });
});
