import { AIR, PEC } from "@heddle/kernels/scene";
import { describe, expect, it } from "vitest";
import type { StackDraft } from "./stack-draft";
import { curveOf, FIRST_DRAFT, floorDb, layerMedia, mayAdd, pointAt, readDraft } from "./stack-draft";

const glass = { ...AIR, id: "glass", name: "Glass", relativePermittivity: 4 };
const media = layerMedia([PEC, glass]);
const read = (changes: Partial<StackDraft>) => readDraft({ ...FIRST_DRAFT, ...changes }, media);

describe("layers as typed", () => {
  it("offers air and every medium that waves can enter", () => {
    expect([...media.keys()]).toEqual(["air", "glass"]);
  });

  it("starts from a resistive film that absorbs at 10 GHz", () => {
    const { plan, faults } = read({});
    expect(faults).toEqual({});
    if (plan === null) throw new Error("The first draft is not valid.");
    expect(pointAt(plan, 10).reflectedDb).toBeLessThan(-50);
    expect(pointAt(plan, 10).transmittedDb).toBeNull();
    expect(pointAt(plan, 10).absorbed).toBeGreaterThan(0.9999);
    const points = curveOf(plan);
    expect([points[0]?.GHz, points.at(-1)?.GHz]).toEqual([2, 18]);
    expect(floorDb(points)).toBeLessThanOrEqual(-60);
  });

  it("says of each field what is wrong with it, and of nothing else", () => {
    const { plan, faults } = read({
      elements: [
        { key: 7, kind: "film", ohmsPerSquare: "0" },
        { key: 8, kind: "layer", mediumId: "glass", thicknessMm: "thick" },
        { key: 9, kind: "layer", mediumId: "lost", thicknessMm: "1" },
        { key: 10, kind: "layer", mediumId: "glass", thicknessMm: "1,5" },
      ],
      angleDeg: "90",
      toGHz: "1",
      backing: "lost",
    });
    expect(plan).toBeNull();
    expect(Object.keys(faults).sort()).toEqual([
      "angleDeg",
      "backing",
      "elements.7",
      "elements.8",
      "elements.9",
      "toGHz",
    ]);
  });

  it("shows a window's passband at 0 dB and nothing below the floor", () => {
    // Half a wavelength of n = 2 at 10 GHz.
    const { plan } = read({
      elements: [{ key: 1, kind: "layer", mediumId: "glass", thicknessMm: "7.49481145" }],
      backing: "air",
    });
    if (plan === null) throw new Error("The draft is not valid.");
    expect(pointAt(plan, 10).transmittedDb).toBeCloseTo(0, 9);
    expect(floorDb([pointAt(plan, 10)])).toBe(-100);
    expect(floorDb([pointAt(plan, 5)])).toBe(-20);
  });

  it("ends the list at twenty", () => {
    const many = Array.from(
      { length: 20 },
      (_, key) => ({ key, kind: "film", ohmsPerSquare: "50" }) as const,
    );
    expect(mayAdd({ ...FIRST_DRAFT, elements: many })).toBe(false);
    expect(mayAdd(FIRST_DRAFT)).toBe(true);
  });
});
