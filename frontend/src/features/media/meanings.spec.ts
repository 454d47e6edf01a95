import { AIR, PEC } from "@heddle/kernels/scene";
import { describe, expect, it } from "vitest";
import {
  figuresOf,
  impedanceWords,
  matchDistance,
  matchWords,
  reflectionWords,
  skinDepthWords,
} from "./meanings";

const at1GHz = (over: Partial<typeof AIR>) => {
  const figures = figuresOf({ ...AIR, ...over }, 1);
  if (figures === null) throw new Error("A filling medium has figures.");
  return figures;
};

describe("meanings", () => {
  it("has none for a perfect conductor", () => {
    expect(figuresOf(PEC, 1)).toBeNull();
  });
  it("says how far from matched", () => {
    expect(matchWords(at1GHz({}))).toBe("no loss");
    expect(matchWords(at1GHz({ conductivity: 1 }))).toBe("σ only");
    expect(matchWords(at1GHz({ magneticLoss: 1 }))).toBe("σ* only");
    const matched = at1GHz({ conductivity: 0.02, magneticLoss: 0.02 * 376.730313 ** 2 });
    expect(matchWords(matched)).toBe("matched");
    expect(reflectionWords(matched)).toBe("under −120\u2009dB");
    expect(matchDistance(matched)).toBeLessThan(1e-6);
    expect(matchWords(at1GHz({ conductivity: 0.02, magneticLoss: 0.01 * 376.730313 ** 2 }))).toBe(
      "0.5\u2009× match",
    );
  });
  it("puts a metal's impedance under a prefix", () => {
    expect(impedanceWords(at1GHz({ conductivity: 5.8e7 }))).toBe("8.25 + 8.25j\u2009mΩ");
  });
  it("writes impedance with its phase where it has one", () => {
    expect(impedanceWords(at1GHz({}))).toBe("377\u2009Ω");
    expect(impedanceWords(at1GHz({ conductivity: 100 }))).toMatch(/^6\.28 \+ 6\.28j\u2009Ω$/);
    expect(skinDepthWords(at1GHz({}))).toBe("∞\u2009m");
  });
});
