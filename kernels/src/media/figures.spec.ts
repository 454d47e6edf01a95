import { describe, expect, it } from "vitest";
import type { FillMedium } from "../scene/schema-media.js";
import { AIR } from "../scene/schema-media.js";
import { mediumFigures } from "./figures.js";

const medium = (over: Partial<FillMedium>): FillMedium => ({ ...AIR, id: "m", name: "M", ...over });
const EPS0 = 8.8541878128e-12; // F/m, CODATA 2018
const MU0 = 1.25663706212e-6; // H/m, CODATA 2018

describe("mediumFigures", () => {
  // D. M. Pozar, Microwave Engineering, example on skin depth at 10 GHz: figures to three digits.
  it.each([
    ["aluminium", 3.816e7, 8.14e-4],
    ["copper", 5.813e7, 6.6e-4],
    ["silver", 6.173e7, 6.4e-4],
  ])("gives the published skin depth of %s at 10 GHz", (_name, conductivity, skinDepthMm) => {
    const figures = mediumFigures(medium({ conductivity }), 10);
    expect(Math.abs(figures.skinDepthMm / skinDepthMm - 1)).toBeLessThan(1e-3);
  });

  it("sees vacuum as it is: 376.73 Ω (CODATA 2018), no loss, c/f, no reflection", () => {
    const figures = mediumFigures(AIR, 3);
    expect(figures.impedanceOhm.re).toBeCloseTo(376.730313, 5);
    expect(figures.skinDepthMm).toBe(Number.POSITIVE_INFINITY);
    expect(figures.attenuationDbPerMm).toBe(0);
    expect(figures.wavelengthMm).toBeCloseTo(299.792458 / 3, 9);
    expect(figures.reflectionDb).toBe(Number.NEGATIVE_INFINITY);
    expect(figures.matchRatio).toBeNull();
  });

  // Fresnel at right angles: |Γ| = (n − 1)/(n + 1), here 1/3 (Pozar, plane interface of lossless media).
  it("reflects a third from a lossless dielectric of index two", () => {
    const figures = mediumFigures(medium({ relativePermittivity: 4 }), 1);
    expect(figures.reflectionDb).toBeCloseTo(20 * Math.log10(1 / 3), 9);
  });

  // Matched medium σ over ε = σ* over μ: k = ω√(με) − jσ√(μ/ε), Γ = 0 for ε = ε₀, μ = μ₀ (J.-P. Berenger, J. Comput. Phys. 114
  // (1994) 185, section 2, the matched layer before its splitting).
  it("finds the matched layer matched: no reflection, attenuation ση at every frequency", () => {
    const conductivity = 0.05;
    const magneticLoss = (conductivity * MU0) / EPS0;
    for (const frequencyGHz of [0.1, 1, 30]) {
      const figures = mediumFigures(medium({ conductivity, magneticLoss }), frequencyGHz);
      expect(figures.matchRatio).toBeCloseTo(1, 6);
      expect(figures.matchedMagneticLoss / magneticLoss).toBeCloseTo(1, 6);
      expect(figures.reflectionDb).toBeLessThan(-120);
      expect(figures.attenuationDbPerMm).toBeCloseTo(
        (conductivity * 376.730313 * 20 * Math.LOG10E) / 1000,
        6,
      );
    }
  });

  it("is dual: a magnetic loss attenuates as the electric one of the same tangent, with the inverse impedance", () => {
    const conductivity = 0.2;
    const electric = mediumFigures(medium({ conductivity }), 2);
    const magnetic = mediumFigures(medium({ magneticLoss: (conductivity * MU0) / EPS0 }), 2);
    expect(magnetic.attenuationDbPerMm / electric.attenuationDbPerMm).toBeCloseTo(1, 6);
    expect(magnetic.reflectionDb).toBeCloseTo(electric.reflectionDb, 6);
    const { re, im } = electric.impedanceOhm;
    expect(magnetic.impedanceOhm.re).toBeCloseTo((376.730313 ** 2 * re) / (re * re + im * im), 3);
    expect(electric.matchRatio).toBe(0);
    expect(magnetic.matchRatio).toBe(Number.POSITIVE_INFINITY);
  });

  it("keeps the attenuation of a nearly lossless medium: α = πf tan δ √ε / c", () => {
    const tangent = 1e-9;
    const frequencyGHz = 5;
    const conductivity = tangent * 2.2 * EPS0 * 2 * Math.PI * frequencyGHz * 1e9;
    const figures = mediumFigures(medium({ relativePermittivity: 2.2, conductivity }), frequencyGHz);
    const perMm = (Math.PI * frequencyGHz * tangent * Math.sqrt(2.2)) / 299.792458;
    expect(figures.skinDepthMm * perMm).toBeCloseTo(1, 6);
  });

  it("counts poles as loss: at ωτ = 1 a Debye pole halves between ε′ and ε″", () => {
    const tauNs = 1 / (2 * Math.PI * 2);
    const figures = mediumFigures(medium({ electricPoles: [{ kind: "debye", delta: 10, tauNs }] }), 2);
    expect(figures.permittivity.re).toBeCloseTo(6, 9);
    expect(figures.permittivity.im).toBeCloseTo(-5, 9);
    expect(figures.matchRatio).toBe(0);
  });

  it.each([0, -1, Number.NaN, Number.POSITIVE_INFINITY])("refuses %s GHz", (frequencyGHz) => {
    expect(() => mediumFigures(AIR, frequencyGHz)).toThrow(RangeError);
  });
});
