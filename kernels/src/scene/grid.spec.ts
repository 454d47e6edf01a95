import { describe, expect, it } from "vitest";
import { estimateCost, gridOf, shortestWavelengthMm, wavelengthMm } from "./index.js";
import { resolved } from "./testing-document.js";

describe("the grid", () => {
  const grid = (widthMm: number, cellMm: number) =>
    gridOf(
      resolved({ section: { widthMm, heightMm: 30 }, mesh: { cellMm }, paint: [], sources: [], probes: [] }),
    );

  it("fills the section exactly, with cells of at most the size asked for", () => {
    expect(grid(60, 1)).toMatchObject({ nx: 60, ny: 30, dxMm: 1, dyMm: 1 });
    const uneven = grid(60.5, 1);
    expect(uneven.nx).toBe(61);
    expect(uneven.nx * uneven.dxMm).toBeCloseTo(60.5, 12);
    expect(uneven.dxMm).toBeLessThanOrEqual(1);
  });

  it("adds no cell for rounding: 0.3/0.1 is three", () => {
    expect(0.3 / 0.1).not.toBe(3);
    expect(grid(0.3, 0.1).nx).toBe(3);
    expect(grid(3 * (1 + 1e-7), 1).nx).toBe(3);
    expect(grid(3 * (1 + 1e-5), 1).nx).toBe(4);
  });

  it("steps at 0.99 of the two-dimensional limit and counts steps up to the last", () => {
    const g = gridOf(resolved({ mesh: { cellMm: 1, metal: "staircase" }, stop: { maxTimeNs: 10 } }));
    // 1 mm / (c √2), in ps; c = 0.299792458 mm/ps.
    expect(g.stepPs).toBeCloseTo((0.99 * 1) / (0.299792458 * Math.SQRT2), 12);
    expect(g.maxSteps).toBe(Math.ceil(10_000 / g.stepPs));
    expect(g.courant).toBe(0.99);
  });

  it("steps at 0.82 of the limit where conformal metal cuts cells of TEz, and only there", () => {
    const courant = (polarization: "TMz" | "TEz", x: number, medium = "pec", more: object = {}): number =>
      gridOf(
        resolved({
          polarization,
          mesh: { cellMm: 1 },
          sources: [],
          probes: [],
          paint: [{ kind: "rectangle", id: "block", medium, x, y: 3, width: 6, height: 4, ...more }],
        }),
      ).courant;
    expect(courant("TEz", 5.3)).toBe(0.82);
    expect(courant("TEz", 5)).toBe(0.99);
    expect(courant("TEz", 5, "pec", { angle: 10 })).toBe(0.82);
    expect(courant("TEz", 5.3, "air")).toBe(0.99);
    expect(courant("TMz", 5.3)).toBe(0.99);
  });

  it("takes the shortest wavelength among media that are used and not too lossy", () => {
    const glass = { id: "glass", name: "Glass", relativePermittivity: 4 };
    const carbon = { id: "carbon", name: "Carbon", relativePermittivity: 9, conductivity: 10 };
    const unused = { id: "unused", name: "Unused", relativePermittivity: 25 };
    const media = [glass, carbon, unused];
    const area = { kind: "rectangle" as const, x: 1, y: 1, width: 5, height: 5 };
    const mesh = { cellsPerWavelength: 20 };
    // c/f = 59.958 mm at 5 GHz; half of it in ε = 4.
    const both = resolved({
      media,
      mesh,
      paint: [
        { ...area, id: "g", medium: "glass" },
        { ...area, id: "c", medium: "carbon" },
      ],
    });
    expect(shortestWavelengthMm(both)).toBeCloseTo(299.792458 / 5 / 2, 9);
    expect(gridOf(both).nx).toBe(Math.ceil(60 / (299.792458 / 5 / 2 / 20)));
    const lossyOnly = resolved({ media, mesh, background: "carbon", paint: [] });
    expect(shortestWavelengthMm(lossyOnly)).toBeCloseTo(299.792458 / 5, 9);
  });

  it("looks over the whole band where a medium is dispersive", () => {
    const pole = { kind: "lorentz" as const, delta: 1, resonanceGHz: 3, dampingGHz: 0.05 };
    const slow = { id: "slow", name: "Slow", electricPoles: [pole] };
    const scene = resolved({
      media: [slow],
      paint: [{ kind: "ellipse", id: "e", medium: "slow", x: 9, y: 9, rx: 1, ry: 1 }],
    });
    const filled = scene.mediaById.get("slow");
    if (filled === undefined || "perfect" in filled) throw new Error("missing");
    // Below its resonance the medium is slowest, far from the band's upper edge.
    expect(shortestWavelengthMm(scene)).toBeLessThan(0.75 * wavelengthMm(filled, 5));
  });

  it("says what a run costs, with the absorbing layers outside the section", () => {
    const cost = estimateCost(resolved());
    expect(cost).toMatchObject({ nx: 60, ny: 30, cells: (60 + 24) * (30 + 24) });
    expect(cost.cellsPerWavelength.air).toBeCloseTo(59.958, 2);
    const closed = { left: "electric", right: "electric", bottom: "electric", top: "magnetic" } as const;
    expect(estimateCost(resolved({ edges: closed })).cells).toBe(60 * 30);
  });
});
