import type { Resonance, SolveResult } from "@heddle/kernels/scene";
import { renderToStaticMarkup } from "react-dom/server";
import { describe, expect, it } from "vitest";
import { digitsOf, qualityInWords, RingPanel, shownResonances } from "./ring-panel";

const at = (GHz: number, levelDb: number | null) => ({
  probe: "p",
  GHz,
  q: 100,
  levelDb,
  ghzUncertainty: 1e-6,
  qUncertainty: 1,
});

const resultWith = (resonances?: Resonance[]): SolveResult => ({
  format: "heddle-result",
  version: 1,
  scene: { name: "A box", sha256: "" },
  solver: { version: "0", engine: "wasm", precision: "f32" },
  grid: { nx: 1, ny: 1, dxMm: 1, dyMm: 1, stepPs: 1, steps: 1, courant: 0.99 },
  stopped: { reason: "decay", decayDb: 60 },
  probes: [],
  ...(resonances === undefined ? {} : { resonances }),
  quality: {
    cellsPerWavelength: {},
    dispersionError: 0,
    boundaryReflectionDb: null,
    energyLeft: null,
    warnings: [],
  },
  timing: { seconds: 1, cellStepsPerSecond: 1, threads: 1 },
});
const shownText = (result: SolveResult | null): string =>
  renderToStaticMarkup(<RingPanel result={result} outdated={false} nameOf={(id) => `probe ${id}`} />)
    .replaceAll(/<[^>]*>/g, " ")
    .replaceAll(/\s+/g, " ")
    .trim();

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

  it("say where the section rings, that nothing does, or nothing at all where no one looked", () => {
    expect(shownText(null)).toBe("");
    expect(shownText(resultWith())).toBe("");
    expect(shownText(resultWith([]))).toBe("Rings at Nothing rings in the band.");
    expect(shownText(resultWith([at(2.45, -3)]))).toBe("Rings at 2.45 GHz Q 100 ± 1");
    expect(shownText(resultWith([{ ...at(2.45, -3), qWithPlates: 80 }]))).toBe(
      "Rings at 2.45 GHz Q 80 Q with the loss of the plates above and below.",
    );
  });
});
