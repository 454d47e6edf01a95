/**
 * Fields inside very lossy media, σΔt/2ε up to 3.3, by the TEM wave of a strip: between two depths the wave changes by exp(−γd) with
 * γ = √(jωμ₀(σ + jωε₀)) (D. M. Pozar, Microwave Engineering, section 1.4). Bar: 0.01 in exp(−γd), as for the reflection of such media.
 */
import { describe, expect, it } from "vitest";
import { measured } from "./support/measured.js";
import { phasorOf, solve } from "./support/run.js";

const EPS0 = 8.8541878128e-12;
const MU0 = 1.25663706212e-6;
const CELL = 0.25;

describe.each(["TMz", "TEz"] as const)("skin effect in %s", (wave) => {
  // Skin depths of 1.8 mm and 0.8 mm at 4 GHz: 7 and 3.2 cells.
  it.each([
    [20, 2],
    [100, 1],
  ])("σ = %d S/m over %d mm", async (sigma, depth) => {
    const half = wave === "TEz" ? CELL / 2 : 0;
    const frequencies = [2, 4];
    const beside = wave === "TEz" ? ("electric" as const) : ("magnetic" as const);
    const result = await solve(
      {
        polarization: wave,
        section: { widthMm: 50, heightMm: 2 },
        band: { fromGHz: 1, toGHz: 6 },
        mesh: { cellMm: CELL },
        edges: { left: "absorbing", right: "absorbing", bottom: beside, top: beside },
        media: [{ id: "graphite", name: "Graphite", conductivity: sigma }],
        paint: [{ kind: "rectangle", id: "wall", medium: "graphite", x: 30, y: 0, width: 20, height: 2 }],
        sources: [{ kind: "line", id: "wire", x: 15 + half, y: 1 + half }],
        probes: [30.5, 30.5 + depth].map((x, n) => ({
          kind: "point" as const,
          id: `p${n}`,
          x: x + half,
          y: 1 + half,
          field: wave === "TEz" ? ("Hz" as const) : ("Ez" as const),
        })),
        stop: { maxTimeNs: 20, decayDb: 100 },
      },
      { frequenciesGHz: frequencies },
    );
    frequencies.forEach((frequency, index) => {
      const omega = 2e9 * Math.PI * frequency;
      // γ² = −ω²με + jωμσ.
      const [re, im] = [-omega * omega * MU0 * EPS0, omega * MU0 * sigma];
      const size = Math.sqrt(Math.hypot(re, im));
      const angle = Math.atan2(im, re) / 2;
      const path = (depth / 1000) * size;
      const fall = Math.exp(-path * Math.cos(angle));
      const want = {
        re: fall * Math.cos(path * Math.sin(angle)),
        im: -fall * Math.sin(path * Math.sin(angle)),
      };
      const [a, b] = [phasorOf(result, "p0", index), phasorOf(result, "p1", index)];
      const norm = a.re * a.re + a.im * a.im;
      const got = { re: (b.re * a.re + b.im * a.im) / norm, im: (b.im * a.re - b.re * a.im) / norm };
      const error = Math.hypot(got.re - want.re, got.im - want.im);
      measured(`skin effect ${wave} ${sigma} S/m ${frequency} GHz, of ${fall.toFixed(3)}`, error);
      expect(error).toBeLessThan(0.01);
    });
  });
});
