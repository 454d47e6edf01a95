import type { FillMedium, ResolvedPatch } from "@heddle/kernels/scene";
import { describe, expect, it } from "vitest";
import { foam } from "../driver/sheet-driver";
import { matchingMagneticLoss } from "../panels/matching";
import { groupPaint } from "./groups";
import { hatchingOf, lossesOf, spacingOf, tintOf } from "./hatch";
import { tileSide } from "./hatch-pattern";

const medium = (part: Partial<FillMedium>): FillMedium => ({
  ...(foam as FillMedium),
  relativePermittivity: 1,
  conductivity: 0,
  ...part,
});

describe("hatching", () => {
  it("sets strokes from 9 px apart, weak, to 3 px, strong, evenly over the decades", () => {
    expect(spacingOf(1e-4)).toBeCloseTo(9, 10);
    expect(spacingOf(1e2)).toBeCloseTo(3, 10);
    expect(spacingOf(1e-9)).toBe(9);
    expect(spacingOf(1e6)).toBe(3);
    expect(spacingOf(1e-2) - spacingOf(1e-1)).toBeCloseTo(spacingOf(1) - spacingOf(10), 10);
  });

  it("falls to the right for σ, rises for σ*, and does both for both", () => {
    const directions = (part: Partial<FillMedium>): string[] =>
      hatchingOf(medium(part), 1).strokes.map(({ direction }) => direction);
    expect(directions({ conductivity: 0.05 })).toEqual(["falling"]);
    expect(directions({ magneticLoss: 3000 })).toEqual(["rising"]);
    expect(directions({ conductivity: 1, magneticLoss: 3000 })).toEqual(["falling", "rising"]);
    expect(directions({ relativePermittivity: 4 })).toEqual([]);
  });

  it("cross-hatches a matched medium evenly, whatever its ε and μ", () => {
    const base = { conductivity: 0.02, relativePermittivity: 6, relativePermeability: 2 };
    const matched = medium({ ...base, magneticLoss: matchingMagneticLoss(base) });
    expect(lossesOf(matched, 1).matched).toBe(true);
    const [falling, rising] = hatchingOf(matched, 1).strokes;
    expect(falling.spacingPx).toBe(rising.spacingPx);
    expect(lossesOf(medium({ ...base, magneticLoss: 100 }), 1).matched).toBe(false);
  });

  it("draws the loss of poles at the frequency in question", () => {
    const lossy = medium({ electricPoles: [{ kind: "debye", delta: 3, tauNs: 0.1 }] });
    // ωτ = 1 at 1/(2π·0.1 ns): ε″ = Δ/2, so σ = ωε₀Δ/2 = ε₀Δ/(2τ).
    const sigma = (8.8541878128e-12 * 3) / (2 * 0.1e-9);
    expect(lossesOf(lossy, 1 / (2 * Math.PI * 0.1)).sigma / sigma).toBeCloseTo(1, 6);
    expect(hatchingOf(lossy, 1).strokes.map(({ direction }) => direction)).toEqual(["falling"]);
  });

  it("covers the field with metal only, and pairs the strokes of a magnetic conductor", () => {
    const metal = hatchingOf({ id: "m", name: "", perfect: "electric" }, 1);
    expect(metal).toMatchObject({
      opaque: true,
      strokes: [{ direction: "rising", spacingPx: 5, paired: false }],
    });
    expect(hatchingOf({ id: "m", name: "", perfect: "magnetic" }, 1).strokes[0]?.paired).toBe(true);
    expect(hatchingOf(foam, 1).opaque).toBe(false);
  });

  it("tints a lossless dielectric by εr", () => {
    expect(tintOf(1)).toBe(0);
    expect(tintOf(2)).toBeLessThan(tintOf(10));
    expect(tintOf(30)).toBeCloseTo(tintOf(300), 12);
    expect(hatchingOf(medium({}), 1)).toMatchObject({ tint: 0, wash: 0, strokes: [] });
  });

  it("tiles in whole device pixels at every pixel ratio", () => {
    for (const ratio of [1, 1.25, 1.5, 2, 3])
      for (const spacing of [3, 4.4, 5, 9]) expect(Number.isInteger(tileSide(spacing, ratio))).toBe(true);
    expect(tileSide(5, 1)).toBe(7);
  });
});

describe("bodies of one medium", () => {
  const patch = (id: string, of: string, x: number): ResolvedPatch => ({
    kind: "rectangle",
    id,
    medium: of,
    x,
    y: 0,
    width: 10,
    height: 10,
    angle: 0,
  });
  const ids = (paint: ResolvedPatch[]): string[][] =>
    groupPaint(paint).map(({ patches }) => patches.map(({ id }) => id));

  it("gathers what the picture allows", () => {
    expect(ids([patch("a", "m", 0), patch("x", "f", 50), patch("b", "m", 5)])).toEqual([["a", "b"], ["x"]]);
  });
  it("never lets a later patch slip under what was painted before it", () => {
    expect(ids([patch("a", "m", 0), patch("x", "f", 5), patch("b", "m", 8)])).toEqual([["a"], ["x"], ["b"]]);
  });
});
