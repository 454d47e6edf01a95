/**
 * Lossy layers and absorbing edges. A line source between two electric edges closer than half a wavelength excites the TEM wave
 * alone a few cells away, which is a plane wave at normal incidence.
 */
import {
  absorbingLayers,
  GUIDE_GRADING,
  evanescentReflectionDb,
  layerReflectionDb,
} from "@heddle/kernels/boundaries";
import { buildLattice } from "@heddle/kernels/lattice";
import { describe, expect, it } from "vitest";
import { measured } from "./support/measured.js";
import type { Document } from "./support/run.js";
import { OPEN_SPACE, phasorOf, solve, traceOf } from "./support/run.js";

const ETA0 = 376.730313668;
const EPS0 = 8.8541878128e-12;

const EDGES = { left: "absorbing", right: "absorbing", bottom: "electric", top: "electric" } as const;
const FREQUENCIES = [2, 5, 8];
/** Of layers across guides. */
const layerCells = 28;

/** A TEM guide of 4 mm height along x; the source at x = 20, probes at the places named. */
const temGuide = (
  widthMm: number,
  places: Record<string, number>,
  changes: Partial<Document> = {},
): Document => ({
  polarization: "TEz",
  section: { widthMm, heightMm: 4 },
  band: { fromGHz: 1, toGHz: 10 },
  mesh: { cellMm: 0.5 },
  edges: EDGES,
  sources: [{ kind: "line", id: "wire", x: 20.25, y: 2 }],
  probes: Object.entries(places).map(([id, x]) => ({ kind: "point", id, x, y: 2, field: "Hz" })),
  stop: { maxTimeNs: 30, decayDb: 100 },
  ...changes,
});

describe("a matched lossy layer, σ/ε = σ*/μ", () => {
  // σ = 0.05 S/m over half of the guide; σ* = σ·η₀². Source: the wave impedance √((jωμ + σ*)/(jωε + σ)) is then η₀ at every
  // frequency, and γ = ση₀ + jω/c; J.-P. Berenger, J. Comput. Phys. 114 (1994) 185, eq. 3.
  const sigma = 0.05;
  const matched = { id: "matched", name: "Matched", conductivity: sigma, magneticLoss: sigma * ETA0 * ETA0 };
  const slab = {
    kind: "rectangle",
    id: "slab",
    medium: "matched",
    x: 60,
    y: 0,
    width: 60,
    height: 4,
  } as const;
  const places = { before: 40.25, a: 70.25, b: 90.25 };

  it("reflects nothing: below −60 dB of the incident wave at 60 to 300 cells per wavelength", async () => {
    const filled = await solve(temGuide(120, places, { media: [matched], paint: [slab] }), {
      frequenciesGHz: FREQUENCIES,
    });
    const empty = await solve(temGuide(120, places), { frequenciesGHz: FREQUENCIES });
    FREQUENCIES.forEach((_, index) => {
      const total = phasorOf(filled, "before", index);
      const incident = phasorOf(empty, "before", index);
      const reflection =
        Math.hypot(total.re - incident.re, total.im - incident.im) / Math.hypot(incident.re, incident.im);
      measured(`matched layer reflection ${FREQUENCIES[index]} GHz, dB`, 20 * Math.log10(reflection));
      expect(20 * Math.log10(reflection)).toBeLessThan(-60);
    });
  });

  it("lets the wave decay as exp(−ση₀x), within 1e-3 of the exponent at every frequency", async () => {
    const result = await solve(temGuide(120, places, { media: [matched], paint: [slab] }), {
      frequenciesGHz: FREQUENCIES,
    });
    FREQUENCIES.forEach((_, index) => {
      const a = phasorOf(result, "a", index);
      const b = phasorOf(result, "b", index);
      const exponent = Math.log(Math.hypot(a.re, a.im) / Math.hypot(b.re, b.im));
      measured(`matched layer decay ${FREQUENCIES[index]} GHz`, exponent / (sigma * ETA0 * 0.02) - 1);
      expect(Math.abs(exponent / (sigma * ETA0 * 0.02) - 1)).toBeLessThan(1e-3);
    });
  });
});

describe("a very lossy half-space, σΔt/2ε ≫ 1", () => {
  // Source: Fresnel at normal incidence with η = √(jωμ₀/(jωε₀ + σ)); R of Hz is (η₀ − η)/(η₀ + η).
  // σ = 20 S/m has a skin depth of 1.8 mm at 4 GHz, and σΔt/2ε₀ = 0.66 at 0.25 mm; 100 S/m has 0.8 mm and 3.3.
  it.each([20, 100])("σ = %d S/m reflects as Fresnel says, within 0.01", async (sigma) => {
    const conductor = { id: "graphite", name: "Graphite", conductivity: sigma };
    const slab = {
      kind: "rectangle",
      id: "slab",
      medium: "graphite",
      x: 60,
      y: 0,
      width: 20,
      height: 4,
    } as const;
    const mesh = { cellMm: 0.25 };
    const places = { before: 40.125 };
    const band = { fromGHz: 1, toGHz: 6 };
    const at = { frequenciesGHz: [2, 4] };
    const changes = { mesh, band, sources: [{ kind: "line", id: "wire", x: 20.125, y: 2 }] } as const;
    const filled = await solve(
      temGuide(80, places, { ...changes, sources: [...changes.sources], media: [conductor], paint: [slab] }),
      at,
    );
    const empty = await solve(temGuide(80, places, { ...changes, sources: [...changes.sources] }), at);
    at.frequenciesGHz.forEach((frequency, index) => {
      const total = phasorOf(filled, "before", index);
      const incident = phasorOf(empty, "before", index);
      const norm = incident.re ** 2 + incident.im ** 2;
      const scattered = { re: total.re - incident.re, im: total.im - incident.im };
      const ratio = {
        re: (scattered.re * incident.re + scattered.im * incident.im) / norm,
        im: (scattered.im * incident.re - scattered.re * incident.im) / norm,
      };
      // Moved from the probe to the face, 19.875 mm there and back.
      const path = 2 * 2 * Math.PI * (frequency / 299.792458) * 19.875;
      const r = {
        re: ratio.re * Math.cos(path) - ratio.im * Math.sin(path),
        im: ratio.re * Math.sin(path) + ratio.im * Math.cos(path),
      };
      // η/η₀ = 1/√(1 − jσ/ωε₀).
      const loss = sigma / (2 * Math.PI * frequency * 1e9 * EPS0);
      const magnitude = (1 + loss * loss) ** -0.25;
      const angle = Math.atan(loss) / 2;
      const eta = { re: magnitude * Math.cos(angle), im: magnitude * Math.sin(angle) };
      const sum = { re: 1 + eta.re, im: eta.im };
      const difference = { re: 1 - eta.re, im: -eta.im };
      const sumNorm = sum.re ** 2 + sum.im ** 2;
      const want = {
        re: (difference.re * sum.re + difference.im * sum.im) / sumNorm,
        im: (difference.im * sum.re - difference.re * sum.im) / sumNorm,
      };
      measured(`half-space ${sigma} S/m ${frequency} GHz`, Math.hypot(r.re - want.re, r.im - want.im));
      expect(Math.hypot(r.re - want.re, r.im - want.im)).toBeLessThan(0.01);
    });
  });
});

/** Equal within a fifth, or within −130 dB of the incident wave, which is what the cut-off of the traces leaves. */
const agree = (dbInRun: number, dbComputed: number): boolean => {
  const [a, b] = [10 ** (dbInRun / 20), 10 ** (dbComputed / 20)];
  return Math.abs(a - b) < 0.2 * b + 3.2e-7;
};

describe("the absorbing edge", () => {
  // Reflection in a run: the same guide with the right edge near and far; what differs at a probe is what the near edge sent back.
  it("sends back under −80 dB at normal incidence, as computed from its coefficients", async () => {
    const near = await solve(temGuide(60, { p: 50.25 }, { stop: { maxTimeNs: 3, decayDb: 300 } }), {
      frequenciesGHz: FREQUENCIES,
    });
    const far = await solve(temGuide(700, { p: 50.25 }, { stop: { maxTimeNs: 3, decayDb: 300 } }), {
      frequenciesGHz: FREQUENCIES,
    });
    const lattice = buildLattice({
      polarization: "TEz",
      nx: 120,
      ny: 8,
      dx: 5e-4,
      dy: 5e-4,
      edges: EDGES,
      layerCells,
    });
    const layers = absorbingLayers(lattice, 1e9, undefined, GUIDE_GRADING);
    FREQUENCIES.forEach((frequency, index) => {
      const a = phasorOf(near, "p", index);
      const b = phasorOf(far, "p", index);
      const inRun = 20 * Math.log10(Math.hypot(a.re - b.re, a.im - b.im) / Math.hypot(b.re, b.im));
      const computed = layerReflectionDb(lattice, layers, { side: "right", hz: frequency * 1e9, degrees: 0 });
      measured(`edge in a run, dB`, inRun);
      measured(`edge computed, dB`, computed);
      expect(inRun).toBeLessThan(-80);
      expect(agree(inRun, computed)).toBe(true);
    });
    expect(near.quality.boundaryReflectionDb).toBeLessThan(-80);
  });

  it("sends back under −80 dB of the TE10 wave of a guide at 45°, as computed", async () => {
    // TMz between electric edges w apart: two plane waves at cos θ = λ/2w from the layer's face; 45° at f = √2·f_c.
    const w = 20;
    const f = (299.792458 / (2 * w)) * Math.SQRT2;
    const guide = (widthMm: number): Document => ({
      polarization: "TMz",
      section: { widthMm, heightMm: w },
      band: { fromGHz: 0.8 * f, toGHz: 1.2 * f },
      mesh: { cellMm: 1 },
      edges: EDGES,
      // A narrow pulse, so that nothing runs at the cut-off (0.707 f) for ever: 60 dB down there.
      sources: [
        {
          kind: "line",
          id: "wire",
          x: 20,
          y: w / 2,
          waveform: { kind: "pulse", centerGHz: f, widthGHz: 0.3 * f },
        },
      ],
      probes: [{ kind: "point", id: "p", x: 90, y: w / 2, field: "Ez" }],
      stop: { maxTimeNs: 6, decayDb: 300 },
    });
    const at = { frequenciesGHz: [f] };
    const near = await solve(guide(120), at);
    const far = await solve(guide(1100), at);
    expect(traceOf(near, "p").values).toHaveLength(traceOf(far, "p").values.length);
    const a = phasorOf(near, "p");
    const b = phasorOf(far, "p");
    const inRun = 20 * Math.log10(Math.hypot(a.re - b.re, a.im - b.im) / Math.hypot(b.re, b.im));
    const lattice = buildLattice({
      polarization: "TMz",
      nx: 120,
      ny: w,
      dx: 1e-3,
      dy: 1e-3,
      edges: EDGES,
      layerCells,
    });
    const layers = absorbingLayers(lattice, 0.8 * f * 1e9, undefined, GUIDE_GRADING);
    const computed = layerReflectionDb(lattice, layers, { side: "right", hz: f * 1e9, degrees: 45 });
    measured(`edge in a run, dB`, inRun);
    measured(`edge computed, dB`, computed);
    expect(inRun).toBeLessThan(-80);
    expect(agree(inRun, computed)).toBe(true);
  });

  // The bar for 12 cells: −80 dB to 45°, −65 dB at 60°, −40 dB at 75°, computed from the layer's own coefficients.
  it.each(["TMz", "TEz"] as const)(
    "sends back what the bar allows at every angle and mesh, %s",
    (polarization) => {
      const lattice = buildLattice({ polarization, nx: 60, ny: 60, dx: 1e-3, dy: 1e-3, edges: OPEN_SPACE });
      const cellHz = 299.792458e9;
      const layers = absorbingLayers(lattice, cellHz / 200);
      for (const side of ["left", "top"] as const)
        for (const cells of [20, 40, 80, 200])
          for (const [degrees, bar] of [
            [0, -80],
            [15, -80],
            [30, -80],
            [45, -80],
            [60, -65],
            [75, -40],
          ] as const)
            expect(layerReflectionDb(lattice, layers, { side, hz: cellHz / cells, degrees })).toBeLessThan(
              bar,
            );
    },
  );

  it("sends back an evanescent wave as computed, 1.5 times the free wave number along the edge", async () => {
    // A guide w wide at two thirds of its cut-off; at `gap` cells from the edge the answer has come twice as far. Painted walls, not
    // the section's edges, so that the layers are those of open sections.
    const [w, gap, tangential] = [20, 4, 1.5];
    const f = 299.792458 / (2 * w) / tangential;
    const guide = (widthMm: number): Document => ({
      polarization: "TMz",
      section: { widthMm, heightMm: w + 4 },
      band: { fromGHz: 0.8 * f, toGHz: 1.2 * f },
      mesh: { cellMm: 1 },
      edges: OPEN_SPACE,
      paint: [0, w + 2].map((y) => ({
        ...{ kind: "rectangle", id: `wall${y}`, medium: "pec" },
        ...{ x: 0, y, width: widthMm, height: 2 },
      })),
      sources: [
        {
          kind: "line",
          id: "wire",
          x: 20,
          y: w / 2 + 2,
          waveform: { kind: "pulse", centerGHz: f, widthGHz: 0.4 * f },
        },
      ],
      probes: [{ kind: "point", id: "p", x: 40 - gap, y: w / 2 + 2, field: "Ez" }],
      stop: { maxTimeNs: 20, decayDb: 120 },
    });
    const at = { frequenciesGHz: [f] };
    const near = await solve(guide(40), at);
    const far = await solve(guide(100), at);
    const a = phasorOf(near, "p");
    const b = phasorOf(far, "p");
    const lattice = buildLattice({
      polarization: "TMz",
      nx: 40,
      ny: w,
      dx: 1e-3,
      dy: 1e-3,
      edges: EDGES,
    });
    const layers = absorbingLayers(lattice, 0.8 * f * 1e9);
    const query = { side: "right", hz: f * 1e9, tangential } as const;
    const computed = evanescentReflectionDb(lattice, layers, query);
    const alpha = (Math.PI / w) * Math.sqrt(1 - 1 / tangential ** 2);
    const inRun =
      20 * Math.log10(Math.hypot(a.re - b.re, a.im - b.im) / Math.hypot(b.re, b.im)) +
      20 * Math.log10(Math.exp(2 * alpha * gap));
    measured("edge in a run, evanescent, dB", inRun);
    measured("edge computed, evanescent, dB", computed);
    expect(Math.abs(inRun - computed)).toBeLessThan(1);
  });
});
