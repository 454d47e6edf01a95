import { describe, expect, it } from "vitest";
import { colourMap, colourOf, scaled, unscaled, ZERO_LEVEL } from "./colour-maps";
import type { Rgb } from "./colour-space";
import { difference, toLab, toRgb } from "./colour-space";

const DAY: Rgb = [0xfb, 0xf9, 0xf3];
const NIGHT: Rgb = [0x18, 0x20, 0x27];
const linear = { kind: "linear" } as const;
const symlog = { kind: "symlog", linearShare: 0.01 } as const;

const rgbAt = (map: ReturnType<typeof colourMap>, level: number): Rgb => [
  map.get(level, 0),
  map.get(level, 1),
  map.get(level, 2),
];
const lightness = (map: ReturnType<typeof colourMap>, level: number): number => toLab(rgbAt(map, level))[0];

describe("colour space", () => {
  it("gives the published L*a*b* of pure sRGB red (D65): 53.24, 80.09, 67.20", () => {
    // Source: Bruce Lindbloom's colour calculator, sRGB, D65; from memory.
    const [l, a, b] = toLab([255, 0, 0]);
    expect(l).toBeCloseTo(53.24, 1);
    expect(a).toBeCloseTo(80.09, 1);
    expect(b).toBeCloseTo(67.2, 1);
  });

  it("returns to the same colour", () => {
    for (const colour of [DAY, NIGHT, [84, 48, 5], [1, 102, 94]] as Rgb[])
      expect(toRgb(toLab(colour))).toEqual(colour);
  });
});

for (const [name, sheet] of [
  ["day", DAY],
  ["night", NIGHT],
] as const) {
  describe(`maps by ${name}`, () => {
    it("draws zero exactly as the sheet, signed or not", () => {
      expect(rgbAt(colourMap({ signed: true, sheet, scale: linear }), ZERO_LEVEL)).toEqual(sheet);
      expect(rgbAt(colourMap({ signed: true, sheet, scale: symlog }), ZERO_LEVEL)).toEqual(sheet);
      expect(rgbAt(colourMap({ signed: false, sheet, scale: linear }), 0)).toEqual(sheet);
    });

    it("has a lightness that only moves away from the sheet's, on both arms", () => {
      const map = colourMap({ signed: true, sheet, scale: linear });
      const direction = name === "day" ? -1 : 1;
      // 8-bit channels: a step may be lost in rounding, never turned.
      for (let level = ZERO_LEVEL; level < 255; level += 1)
        expect((lightness(map, level + 1) - lightness(map, level)) * direction).toBeGreaterThan(-0.25);
      for (let level = ZERO_LEVEL; level > 1; level -= 1)
        expect((lightness(map, level - 1) - lightness(map, level)) * direction).toBeGreaterThan(-0.25);
      expect(Math.abs(lightness(map, 255) - lightness(map, ZERO_LEVEL))).toBeGreaterThan(50);
      expect(Math.abs(lightness(map, 1) - lightness(map, ZERO_LEVEL))).toBeGreaterThan(50);
    });

    it("has a lightness that only moves away from the sheet's for levels", () => {
      const map = colourMap({ signed: false, sheet, scale: linear });
      const direction = name === "day" ? -1 : 1;
      for (let level = 0; level < 255; level += 1)
        expect((lightness(map, level + 1) - lightness(map, level)) * direction).toBeGreaterThan(-0.25);
      expect(Math.abs(lightness(map, 255) - lightness(map, 0))).toBeGreaterThan(60);
    });

    it("spaces a signed map's colours evenly", () => {
      const map = colourMap({ signed: true, sheet, scale: linear });
      const steps: number[] = [];
      for (let level = ZERO_LEVEL; level + 8 <= 255; level += 8)
        steps.push(difference(toLab(rgbAt(map, level)), toLab(rgbAt(map, level + 8))));
      const mean = steps.reduce((sum, step) => sum + step, 0) / steps.length;
      for (const step of steps) expect(Math.abs(step - mean)).toBeLessThan(0.25 * mean);
    });

    it("tells plus from minus by more than lightness", () => {
      for (const share of [0.2, 0.5, 1]) {
        const plus = toLab(colourOf({ signed: true, sheet, scale: linear }, share));
        const minus = toLab(colourOf({ signed: true, sheet, scale: linear }, -share));
        // Teal lies at negative a*, brown at positive b*.
        expect(plus[1]).toBeLessThan(0);
        expect(minus[2] - plus[2]).toBeGreaterThan(10);
      }
    });
  });
}

describe("symmetric-log scale", () => {
  it("keeps 0 and 1, lifts the small, and is undone by its inverse", () => {
    expect(scaled(symlog, 0)).toBe(0);
    expect(scaled(symlog, 1)).toBeCloseTo(1, 12);
    expect(scaled(symlog, 0.01)).toBeGreaterThan(0.14);
    for (const share of [0, 0.003, 0.2, 1])
      expect(unscaled(symlog, scaled(symlog, share))).toBeCloseTo(share, 12);
  });
});
