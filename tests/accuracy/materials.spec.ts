/**
 * Handbook materials as media: what the medium's figures and the layer calculator say of them. Sources stand in each entry. The
 * handbook values differ between tables by the entry's tolerance; what is computed from a stated σ, ε_r and tan δ is exact.
 */
import { mediumFigures } from "@heddle/kernels/media";
import { AIR } from "@heddle/kernels/scene";
import { stackResponse } from "@heddle/kernels/stack";
import { describe, expect, it } from "vitest";
import { measured } from "./support/measured.js";
import { numberAt, referenceEntries } from "./support/reference.js";

const entries = referenceEntries("materials");
const metals = entries.filter(({ geometry }) => geometry.kind === "metal");
const others = entries.filter(({ geometry }) => geometry.kind !== "metal");

describe("conductors at 10 GHz", () => {
  // Rs = √(πfμ/σ) and δ = 1/√(πfμσ) hold for σ ≫ ωε (D. M. Pozar, Microwave Engineering, sections 1.4 and 1.7); 1e-6 where ωε/σ is below
  // that, the entry's tolerance elsewhere.
  it.each(metals)("$id: surface resistance and skin depth", ({ expected, tolerance }) => {
    const conductivity = numberAt(expected, "sigma_S_per_m");
    const medium = { ...AIR, id: "metal", name: "Metal", conductivity };
    const good = (2e10 * Math.PI * 8.8541878128e-12) / conductivity < 1e-6;
    const limit = good ? 1e-6 : numberAt(tolerance, "rel");
    const resistance = stackResponse(
      { elements: [], backing: medium },
      { polarization: "TMz", angleDeg: 0, frequencyGHz: 10 },
    ).surfaceImpedanceOhm.re;
    const figures = mediumFigures(medium, 10);
    const errors = [
      resistance / numberAt(expected, "Rs_ohm_at_10GHz") - 1,
      figures.impedanceOhm.re / numberAt(expected, "Rs_ohm_at_10GHz") - 1,
      figures.skinDepthMm / 1000 / numberAt(expected, "skin_depth_m_at_10GHz") - 1,
    ];
    for (const error of errors) {
      measured("conductor", error);
      expect(Math.abs(error)).toBeLessThan(limit);
    }
  });
});

describe("dielectrics and absorbers at their stated frequency", () => {
  // ε″ = σ/ω and μ″ = σ*/ω: what a constant σ (σ*) makes at one frequency (the same book, section 1.3).
  it.each(others)("$id: permittivity and loss tangents of the equivalent σ and σ*", ({ expected }) => {
    const medium = {
      ...AIR,
      id: "stuff",
      name: "Stuff",
      relativePermittivity: numberAt(expected, "eps_r"),
      relativePermeability: numberAt(expected, "mu_r"),
      conductivity: numberAt(expected, "sigma_equiv_S_per_m"),
      magneticLoss: numberAt(expected, "sigma_m_equiv_ohm_per_m"),
    };
    const figures = mediumFigures(medium, numberAt(expected, "f_Hz") / 1e9);
    const errors = [
      figures.electricLossTangent - numberAt(expected, "tan_delta"),
      figures.magneticLossTangent - numberAt(expected, "tan_delta_m"),
    ];
    for (const error of errors) {
      measured("loss tangent", error);
      expect(Math.abs(error)).toBeLessThan(1e-8);
    }
    expect(figures.permittivity.re).toBe(numberAt(expected, "eps_r"));
  });

  // η in the medium is η₀√(μ/ε): what the layer calculator reflects from a half-space of it must be what the figures say.
  it.each(others)("$id: reflection of a half-space, layers against figures", ({ expected }) => {
    const ghz = numberAt(expected, "f_Hz") / 1e9;
    const medium = {
      ...AIR,
      id: "stuff",
      name: "Stuff",
      relativePermittivity: numberAt(expected, "eps_r"),
      relativePermeability: numberAt(expected, "mu_r"),
      conductivity: numberAt(expected, "sigma_equiv_S_per_m"),
      magneticLoss: numberAt(expected, "sigma_m_equiv_ohm_per_m"),
    };
    const { reflected } = stackResponse(
      { elements: [], backing: medium },
      { polarization: "TEz", angleDeg: 0, frequencyGHz: ghz },
    );
    expect(10 * Math.log10(reflected)).toBeCloseTo(mediumFigures(medium, ghz).reflectionDb, 6);
  });
});
