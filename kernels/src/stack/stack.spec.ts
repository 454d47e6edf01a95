import { describe, expect, it } from "vitest";
import type { FillMedium } from "../scene/index.js";
import { AIR } from "../scene/index.js";
import type { Stack, StackElement } from "./index.js";
import { stackResponse } from "./index.js";

const ETA0 = 376.730313668;
/** c in mm·GHz. */
const C = 299.792458;

const medium = (changes: Partial<FillMedium>): FillMedium => ({ ...AIR, id: "m", ...changes });
const layer = (thicknessMm: number, changes: Partial<FillMedium> = {}): StackElement => ({
  kind: "layer",
  medium: medium(changes),
  thicknessMm,
});
const film = (ohmsPerSquare: number): StackElement => ({ kind: "film", ohmsPerSquare });
const size = (value: { re: number; im: number } | null): number =>
  value === null ? Number.NaN : Math.hypot(value.re, value.im);
const both = ["TMz", "TEz"] as const;

describe("signs and references", () => {
  it.each(both)("metal reflects −1 of the tangential E in %s, and +1 of Hz", (polarization) => {
    const found = stackResponse(
      { elements: [], backing: "metal" },
      { polarization, angleDeg: 37, frequencyGHz: 5 },
    );
    expect(found.reflection.re).toBeCloseTo(-1, 12);
    expect(found.fieldReflection.re).toBeCloseTo(polarization === "TEz" ? 1 : -1, 12);
    expect(found.transmission).toBeNull();
    expect(found).toMatchObject({ transmitted: 0 });
  });

  it("turns the phase by exp(−2jkd cos θ) with air of thickness d over metal", () => {
    const wave = { polarization: "TMz", angleDeg: 30, frequencyGHz: 7 } as const;
    const { reflection } = stackResponse({ elements: [layer(11)], backing: "metal" }, wave);
    const phase = (4 * Math.PI * 11 * 7 * Math.cos(Math.PI / 6)) / C;
    expect(reflection.re).toBeCloseTo(-Math.cos(phase), 12);
    expect(reflection.im).toBeCloseTo(Math.sin(phase), 12);
  });

  it("is transparent where nothing is, with the phase of the way through", () => {
    const wave = { polarization: "TEz", angleDeg: 60, frequencyGHz: 4 } as const;
    const found = stackResponse({ elements: [layer(9), layer(4)], backing: AIR }, wave);
    expect(size(found.reflection)).toBeLessThan(1e-14);
    const phase = (2 * Math.PI * 13 * 4 * 0.5) / C;
    expect(found.transmission?.re).toBeCloseTo(Math.cos(phase), 12);
    expect(found.transmission?.im).toBeCloseTo(-Math.sin(phase), 12);
  });

  // Fresnel: M. Born, E. Wolf, Principles of Optics, 7th ed. 1999, §1.5.2. n = 2, θ = 40°.
  it("follows Fresnel's formulas in both polarizations", () => {
    const backing = medium({ relativePermittivity: 4 });
    const c1 = Math.cos((40 * Math.PI) / 180);
    const c2 = Math.sqrt(1 - (Math.sin((40 * Math.PI) / 180) / 2) ** 2);
    const at = (polarization: "TMz" | "TEz") =>
      stackResponse({ elements: [], backing }, { polarization, angleDeg: 40, frequencyGHz: 3 });
    expect(at("TMz").reflection.re).toBeCloseTo((c1 - 2 * c2) / (c1 + 2 * c2), 12);
    expect(at("TEz").fieldReflection.re).toBeCloseTo((2 * c1 - c2) / (2 * c1 + c2), 12);
    for (const polarization of both) {
      const found = at(polarization);
      expect(found.reflected + found.transmitted).toBeCloseTo(1, 12);
      expect(found.absorbed).toBeCloseTo(0, 12);
    }
  });
});

describe("known absorbers and windows", () => {
  // W. W. Salisbury's screen: η₀ per square a quarter wave before metal; R. L. Fante, M. T. McCormack, IEEE Trans. Antennas Propag. 36 (1988) 1443.
  it("absorbs all in a resistive film a quarter wave before metal", () => {
    const screen: Stack = { elements: [film(ETA0), layer(C / 40)], backing: "metal" };
    const found = stackResponse(screen, { polarization: "TMz", angleDeg: 0, frequencyGHz: 10 });
    expect(size(found.reflection)).toBeLessThan(1e-9);
    expect(found.absorbed).toBeCloseTo(1, 12);
    // Half a wave before metal the film is shorted.
    const off = stackResponse(screen, { polarization: "TMz", angleDeg: 0, frequencyGHz: 20 });
    expect(off.reflection.re).toBeCloseTo(-1, 12);
  });

  it("takes a film for a thin layer of the same sheet conductance", () => {
    const wave = { polarization: "TEz", angleDeg: 50, frequencyGHz: 6 } as const;
    const thin = layer(1e-5, { conductivity: 1 / (200 * 1e-8) });
    const a = stackResponse({ elements: [layer(3), film(200), layer(5)], backing: AIR }, wave);
    const b = stackResponse({ elements: [layer(3), thin, layer(5)], backing: AIR }, wave);
    expect(a.reflection.re).toBeCloseTo(b.reflection.re, 5);
    expect(a.reflection.im).toBeCloseTo(b.reflection.im, 5);
  });

  it("passes a half-wave window and matches by a quarter wave", () => {
    const wave = { polarization: "TMz", angleDeg: 0, frequencyGHz: 5 } as const;
    const half = layer(C / 5 / 2 / 3, { relativePermittivity: 9 });
    expect(stackResponse({ elements: [half], backing: AIR }, wave).reflected).toBeLessThan(1e-20);
    const quarter = layer(C / 5 / 4 / 2, { relativePermittivity: 4 });
    const backing = medium({ relativePermittivity: 16 });
    expect(stackResponse({ elements: [quarter], backing }, wave).reflected).toBeLessThan(1e-20);
  });
});

describe("hard cases", () => {
  it("stays finite and exact for layers of many skin depths", () => {
    const wave = { polarization: "TEz", angleDeg: 70, frequencyGHz: 10 } as const;
    const copper = { conductivity: 5.8e7 };
    const thick = stackResponse({ elements: [layer(100, copper)], backing: AIR }, wave);
    const endless = stackResponse({ elements: [], backing: medium(copper) }, wave);
    expect(thick.reflection.re).toBeCloseTo(endless.reflection.re, 14);
    expect(thick.reflection.im).toBeCloseTo(endless.reflection.im, 14);
    expect(thick.transmission).toEqual({ re: 0, im: expect.closeTo(0, 300) });
    expect(thick.transmitted).toBe(0);
  });

  // Frustrated total reflection: what tunnels a gap falls by exp(−2κd) in power once the gap is wide.
  it("tunnels through a gap beyond the angle of total reflection", () => {
    const glass = medium({ relativePermittivity: 4 });
    const kappa = (2 * Math.PI * 10 * Math.sqrt(4 * 0.5 - 1)) / C;
    for (const polarization of both) {
      const at = (gap: number): number =>
        stackResponse(
          { front: glass, elements: [layer(gap)], backing: glass },
          { polarization, angleDeg: 45, frequencyGHz: 10 },
        ).transmitted;
      expect(at(0)).toBeCloseTo(1, 12);
      expect(Math.log(at(40) / at(42)) / (4 * kappa)).toBeCloseTo(1, 4);
    }
  });

  it("crosses the angle at which the wave in a layer grazes", () => {
    const glass = medium({ relativePermittivity: 4 });
    for (const polarization of both) {
      const at = (angleDeg: number) =>
        stackResponse(
          { front: glass, elements: [layer(5)], backing: glass },
          { polarization, angleDeg, frequencyGHz: 10 },
        );
      const exact = at((Math.asin(0.5) * 180) / Math.PI);
      const near = at((Math.asin(0.5) * 180) / Math.PI + 1e-7);
      expect(exact.reflection.re).toBeCloseTo(near.reflection.re, 6);
      expect(exact.reflected + exact.transmitted).toBeCloseTo(1, 9);
    }
  });

  it("keeps the balance with poles of both kinds, electric and magnetic, and never gains", () => {
    const dispersive = layer(4, {
      relativePermittivity: 2,
      electricPoles: [{ kind: "debye", delta: 6, tauNs: 0.01 }],
      magneticPoles: [{ kind: "lorentz", delta: 1.5, resonanceGHz: 8, dampingGHz: 2 }],
    });
    for (const polarization of both) {
      for (const angleDeg of [0, 30, 60, 85]) {
        for (const frequencyGHz of [1, 7, 8, 9, 20]) {
          const found = stackResponse(
            { elements: [dispersive, film(500)], backing: AIR },
            { polarization, angleDeg, frequencyGHz },
          );
          expect(found.absorbed).toBeGreaterThan(0);
          expect(found.absorbed).toBeLessThan(1);
          expect(found.reflected).toBeGreaterThanOrEqual(0);
        }
      }
    }
  });

  // Reciprocity: what passes does not depend on the side.
  it("passes the same from either side", () => {
    const elements = [
      layer(3, { relativePermittivity: 5, conductivity: 0.3 }),
      film(90),
      layer(2, { magneticLoss: 3000 }),
    ];
    const wave = { polarization: "TEz", angleDeg: 33, frequencyGHz: 9 } as const;
    const there = stackResponse({ elements, backing: AIR }, wave).transmission;
    const back = stackResponse({ elements: [...elements].reverse(), backing: AIR }, wave).transmission;
    expect(there?.re).toBeCloseTo(back?.re ?? Number.NaN, 12);
    expect(there?.im).toBeCloseTo(back?.im ?? Number.NaN, 12);
  });

  it("refuses what has no meaning, in a sentence", () => {
    const wave = { polarization: "TMz", angleDeg: 0, frequencyGHz: 1 } as const;
    const air: Stack = { elements: [], backing: AIR };
    expect(() => stackResponse(air, { ...wave, angleDeg: 90 })).toThrow("give 0 to below 90");
    expect(() => stackResponse(air, { ...wave, frequencyGHz: 0 })).toThrow("give one above 0");
    expect(() => stackResponse({ ...air, elements: [layer(-1)] }, wave)).toThrow("Layer 1 is -1 mm thick");
    expect(() => stackResponse({ ...air, elements: [film(0)] }, wave)).toThrow("0 Ω per square");
    expect(() => stackResponse({ ...air, front: medium({ conductivity: 1 }) }, wave)).toThrow("lossless");
  });
});
