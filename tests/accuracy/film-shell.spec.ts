/**
 * A resistive shell, a circle drawn as a film of many short pieces at every slant, in a plane wave: the field at its middle. Closed form of
 * the order n = 0, the only one that is not zero there: with x = ka and Z = η/R,
 *
 *   TMz  Ez/Ez0 = 1/(1 + Z(πx/2)J0(x)H0(x)),    TEz  Hz/Hz0 = 1/(1 + Z(πx/2)J1(x)H1(x)),    H = J − jY,
 *
 * from the continuity of tangential E and the jump E/R of tangential H on r = a, and the Wronskian 2/(πx)
 * (cf. R. F. Harrington, Time-Harmonic Electromagnetic Fields (1961), sec. 5-9; derived here). Bar: 0.005 of the incident field, what slabs
 * are held to, raw, at 30 and 60 cells per wavelength.
 */
import { describe, expect, it } from "vitest";
import { measured } from "./support/measured.js";
import { OPEN_SPACE, phasorOf, solve } from "./support/run.js";

const ETA0 = 376.730313668;
const EULER = 0.5772156649015329;

/** J and Y of orders 0 and 1 by their power series (M. Abramowitz and I. A. Stegun, 9.1.10 to 9.1.13), for x below 8. */
function bessel(x: number): { j0: number; y0: number; j1: number; y1: number } {
  const q = (-x * x) / 4;
  let [j0, j1, sum0, sum1] = [0, 0, 0, 0];
  let [term0, term1, harmonic] = [1, x / 2, 0];
  for (let n = 0; n < 60; n += 1) {
    j0 += term0;
    j1 += term1;
    sum0 += term0 * harmonic;
    sum1 += term1 * (2 * harmonic + 1 / (n + 1));
    harmonic += 1 / (n + 1);
    term0 *= q / (n + 1) ** 2;
    term1 *= q / ((n + 1) * (n + 2));
  }
  const log = Math.log(x / 2) + EULER;
  return {
    j0,
    j1,
    y0: (2 / Math.PI) * (log * j0 - sum0),
    y1: (2 / Math.PI) * (log * j1 - 1 / x - sum1 / 2),
  };
}

const RADIUS = 20;
const GHZ = 5;

function exact(wave: "TMz" | "TEz", ohms: number): { re: number; im: number } {
  const x = (2 * Math.PI * GHZ * RADIUS) / 299.792458;
  const { j0, y0, j1, y1 } = bessel(x);
  const scale = ((ETA0 / ohms) * Math.PI * x) / 2;
  const under =
    wave === "TMz"
      ? { re: 1 + scale * j0 * j0, im: -scale * j0 * y0 }
      : { re: 1 + scale * j1 * j1, im: -scale * j1 * y1 };
  const norm = under.re ** 2 + under.im ** 2;
  return { re: under.re / norm, im: -under.im / norm };
}

async function middle(wave: "TMz" | "TEz", ohms: number | null, cellMm: number) {
  const half = 32;
  const circle = Array.from({ length: 361 }, (_, n): [number, number] => [
    half + RADIUS * Math.cos((n * Math.PI) / 180),
    half + RADIUS * Math.sin((n * Math.PI) / 180),
  ]);
  const result = await solve(
    {
      polarization: wave,
      section: { widthMm: 2 * half, heightMm: 2 * half },
      band: { fromGHz: 3.5, toGHz: 6.5 },
      mesh: { cellMm },
      edges: OPEN_SPACE,
      paint: ohms === null ? [] : [{ kind: "film", id: "shell", points: circle, ohmsPerSquare: ohms }],
      sources: [{ kind: "plane-wave", id: "wave", angle: 0 }],
      probes: [{ kind: "point", id: "p", x: half, y: half, field: wave === "TMz" ? "Ez" : "Hz" }],
      stop: { maxTimeNs: 40, decayDb: 80 },
    },
    { frequenciesGHz: [GHZ] },
  );
  return phasorOf(result, "p");
}

describe.each(["TMz", "TEz"] as const)("a resistive shell, %s", (wave) => {
  it.each([50, 377])("of %d Ω lets in what the closed form says", async (ohms) => {
    const want = exact(wave, ohms);
    for (const cell of [2, 1]) {
      const [filled, empty] = [await middle(wave, ohms, cell), await middle(wave, null, cell)];
      const norm = empty.re ** 2 + empty.im ** 2;
      const got = {
        re: (filled.re * empty.re + filled.im * empty.im) / norm,
        im: (filled.im * empty.re - filled.re * empty.im) / norm,
      };
      const error = Math.hypot(got.re - want.re, got.im - want.im);
      measured(`shell ${wave} ${ohms} Ω ${cell} mm of ${Math.hypot(want.re, want.im).toFixed(3)}`, error);
      expect(error).toBeLessThan(0.005);
    }
  });
});
