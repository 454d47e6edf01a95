/**
 * Resistive films off the mesh lines in a plane wave at normal incidence, against the layer calculator: free-standing and a quarter of a
 * wavelength before metal (an absorber), along x and along y, both polarizations. Bar: 0.002 in S for a film a third of a cell off its
 * mesh line, raw, at 25 cells per wavelength.
 */
import { AIR } from "@heddle/kernels/scene";
import { buildLattice, latticeWaveNumber } from "@heddle/kernels/lattice";
import { stackResponse } from "@heddle/kernels/stack";
import { describe, expect, it } from "vitest";
import { measured } from "./support/measured.js";
import type { Document } from "./support/run.js";
import { ELECTRIC_BOX, phasorOf, solve } from "./support/run.js";

type Wave = "TMz" | "TEz";
type Axis = "x" | "y";
interface Complex {
  re: number;
  im: number;
}
const over = (a: Complex, b: Complex): Complex => {
  const norm = b.re * b.re + b.im * b.im;
  return { re: (a.re * b.re + a.im * b.im) / norm, im: (a.im * b.re - a.re * b.im) / norm };
};
const minus = (a: Complex, b: Complex): Complex => ({ re: a.re - b.re, im: a.im - b.im });
const size = (a: Complex): number => Math.hypot(a.re, a.im);
const turned = (a: Complex, angle: number): Complex => ({
  re: a.re * Math.cos(angle) - a.im * Math.sin(angle),
  im: a.re * Math.sin(angle) + a.im * Math.cos(angle),
});

/** The band's middle: 25 cells of 1 mm per wavelength. */
const GHZ = 299.792458 / 25;
const LENGTH = 120;
const SOURCE = 20;
const PROBE = 40;

/** A strip along `axis` with a film at `film` mm and metal or an absorbing edge at its end. */
function strip(wave: Wave, axis: Axis, film: number | null, ohms: number, metal: boolean): Document {
  const beside = wave === "TEz" ? ("electric" as const) : ("magnetic" as const);
  const half = wave === "TEz" ? 0.5 : 0;
  const end = metal ? ("electric" as const) : ("absorbing" as const);
  const turn = (along: number, across: number): [number, number] =>
    axis === "x" ? [along, across] : [across, along];
  const [width, height] = turn(LENGTH, 4);
  const [sx, sy] = turn(SOURCE + half, 2 + half);
  const probes = [
    { id: "before", at: PROBE },
    { id: "behind", at: 100 },
  ].map(({ id, at }) => {
    const [x, y] = turn(at + half, 2 + half);
    return { kind: "point" as const, id, x, y, field: wave === "TEz" ? ("Hz" as const) : ("Ez" as const) };
  });
  return {
    polarization: wave,
    section: { widthMm: width, heightMm: height },
    band: { fromGHz: GHZ - 4, toGHz: GHZ + 4 },
    mesh: { cellMm: 1 },
    edges:
      axis === "x"
        ? { left: "absorbing", right: end, bottom: beside, top: beside }
        : { bottom: "absorbing", top: end, left: beside, right: beside },
    paint:
      film === null
        ? []
        : [{ kind: "film", id: "film", points: [turn(film, 0), turn(film, 4)], ohmsPerSquare: ohms }],
    sources: [{ kind: "line", id: "wire", x: sx, y: sy }],
    probes,
    stop: { maxTimeNs: 20, decayDb: 90 },
  };
}

/** R at the film and T at it, as ratios of the field along z. */
async function response(wave: Wave, axis: Axis, film: number, ohms: number, metal: boolean, ghz: number) {
  const options = { frequenciesGHz: [ghz] };
  const filled = await solve(strip(wave, axis, film, ohms, metal), options);
  const empty = await solve(strip(wave, axis, null, ohms, false), options);
  const probe = PROBE + (wave === "TEz" ? 0.5 : 0);
  // The mesh's own wave number over the way to the film, which is not the film's error.
  const { dt } = buildLattice({ polarization: wave, nx: 1, ny: 1, dx: 1e-3, dy: 1e-3, edges: ELECTRIC_BOX });
  const k = latticeWaveNumber({ dx: 1e-3, dy: 1e-3, dt }, 299_792_458, 2e9 * Math.PI * ghz, 0) / 1000;
  const incident = phasorOf(empty, "before");
  const reflected = over(minus(phasorOf(filled, "before"), incident), incident);
  return {
    r: turned(reflected, 2 * k * (film - probe)),
    t: over(phasorOf(filled, "behind"), phasorOf(empty, "behind")),
  };
}

describe.each(["TMz", "TEz"] as const)("a film in %s", (wave) => {
  describe.each(["x", "y"] as const)("across a strip along %s", (axis) => {
    it.each([
      [377, 1 / 3],
      [377, 2 / 3],
      [120, 1 / 3],
      [1000, 1 / 3],
      [30, 1 / 3],
      [377, 0.5],
      [377, 0],
    ])("free-standing, %d Ω, %d of a cell off", async (ohms, alpha) => {
      const got = await response(wave, axis, 70 + alpha, ohms, false, GHZ);
      const exact = stackResponse(
        { elements: [{ kind: "film", ohmsPerSquare: ohms }], backing: AIR },
        { polarization: wave, angleDeg: 0, frequencyGHz: GHZ },
      );
      const errors = [
        size(minus(got.r, exact.fieldReflection)),
        size(minus(got.t, exact.fieldTransmission ?? { re: NaN, im: NaN })),
      ];
      measured(`film ${wave} ${axis} ${ohms} ${alpha}`, Math.max(...errors));
      expect(Math.max(...errors)).toBeLessThan(0.002);
    });

    it.each([377, 200, 600])("a quarter of a wavelength before metal, %d Ω", async (ohms) => {
      const distance = 25 / 4 + 1 / 12;
      const got = await response(wave, axis, LENGTH - distance, ohms, true, GHZ);
      const stack = {
        elements: [
          { kind: "film" as const, ohmsPerSquare: ohms },
          { kind: "layer" as const, medium: AIR, thicknessMm: distance },
        ],
        backing: "metal" as const,
      };
      const exact = stackResponse(stack, { polarization: wave, angleDeg: 0, frequencyGHz: GHZ });
      measured(`absorber ${wave} ${axis} ${ohms}`, size(minus(got.r, exact.fieldReflection)));
      expect(size(minus(got.r, exact.fieldReflection))).toBeLessThan(0.002);
    });
  });
});
