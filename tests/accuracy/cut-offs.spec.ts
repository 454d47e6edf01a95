/**
 * Cut-offs of standard rectangular guides as resonances of the closed section, by time-domain runs through the public door.
 * Source: f = (c/2)√((m/a)² + (n/b)²), D. M. Pozar, Microwave Engineering, 4th ed., sec. 3.3, with EIA guide sizes (from memory in
 * the entries; the values are computed). Mesh: 40 cells across a (60 for the ten modes), stated by the entries.
 * Tolerance: what the solver does, tighter than the entries' 3e-4 and 2e-3: 1.5e-4 for the lowest mode (the lattice's error there is
 * (π/2N)²/6 = 2.6e-4 less the time step's share), 6e-4 for the ten modes; the entry's 5e-4 for the square, whose higher
 * modes need 64 cells a side for it where the entry has 40.
 */
import { describe, expect, it } from "vitest";
import { z } from "zod";
import { measured } from "./support/measured.js";
import { numberAt, referenceEntries, referenceEntry } from "./support/reference.js";
import { ringMode } from "./support/ring-down.js";
import { ELECTRIC_BOX, solve, traceOf } from "./support/run.js";

interface Box {
  polarization: "TMz" | "TEz";
  widthMm: number;
  heightMm: number;
  cellMm: number;
}

/** Rings the box around f GHz from an off-centre wire and reads the mode nearest to f. `gapGHz` is the distance to the next mode. */
async function resonance(box: Box, f: number, gapGHz: number): Promise<number> {
  const window = 8 / gapGHz;
  const pulse = { kind: "pulse", centerGHz: f, widthGHz: Math.min(f, 2 * gapGHz) } as const;
  const pulseNs = (12 * Math.sqrt(2 * Math.LN10)) / (Math.PI * pulse.widthGHz);
  const result = await solve({
    polarization: box.polarization,
    section: { widthMm: box.widthMm, heightMm: box.heightMm },
    band: { fromGHz: 0.8 * f, toGHz: 1.2 * f },
    mesh: { cellMm: box.cellMm },
    edges: ELECTRIC_BOX,
    sources: [{ kind: "line", id: "wire", x: 0.21 * box.widthMm, y: 0.17 * box.heightMm, waveform: pulse }],
    probes: [
      {
        kind: "point",
        id: "p",
        x: 0.83 * box.widthMm,
        y: 0.88 * box.heightMm,
        field: box.polarization === "TMz" ? "Ez" : "Hz",
      },
    ],
    stop: { maxTimeNs: pulseNs + 1.2 * window, decayDb: 300 },
  });
  return ringMode(traceOf(result, "p"), pulseNs * 1e-9, window * 1e-9, f * 1e9).frequency / 1e9;
}

/** Distance from one frequency to the nearest different one of a rectangle's modes of that polarization. */
function gapOf(box: Box, f: number): number {
  const modes: number[] = [];
  const lowest = box.polarization === "TMz" ? 1 : 0;
  for (let m = lowest; m < 12; m += 1) {
    for (let n = lowest; n < 12; n += 1) {
      modes.push(149.896229 * Math.hypot(m / box.widthMm, n / box.heightMm));
    }
  }
  return Math.min(...modes.map((mode) => Math.abs(mode - f)).filter((gap) => gap > 1e-3 * f));
}

describe("standard guides", () => {
  const guides = referenceEntries("cutoffs").filter(({ expected }) => "fc_TE10_Hz" in expected);
  it.each(guides)("$id: TE10 within 1.5e-4 at 40 cells across", async ({ geometry, expected }) => {
    const widthMm = numberAt(geometry, "a_m") * 1000;
    const heightMm = numberAt(geometry, "b_m") * 1000;
    const box: Box = { polarization: "TEz", widthMm, heightMm, cellMm: widthMm / 40 };
    const f = numberAt(expected, "fc_TE10_Hz") / 1e9;
    const found = await resonance(box, f, gapOf(box, f));
    measured(`cut-off ${box.polarization} ${f.toFixed(3)} GHz`, found / f - 1);
    expect(Math.abs(found / f - 1)).toBeLessThan(1.5e-4);
  });
});

const modeListSchema = z.array(z.object({ mode: z.string(), fc_Hz: z.number() }));

describe("the first ten modes of a guide", () => {
  const { geometry, expected } = referenceEntry("cutoffs", "cut-rect-wr90-first10");
  const widthMm = numberAt(geometry, "a_m") * 1000;
  const heightMm = numberAt(geometry, "b_m") * 1000;
  it.each(modeListSchema.parse(expected.modes))(
    "$mode within 6e-4 at 60 cells across",
    async ({ mode, fc_Hz }) => {
      const polarization = mode.startsWith("TE") ? "TEz" : "TMz";
      const box: Box = { polarization, widthMm, heightMm, cellMm: widthMm / 60 };
      const f = fc_Hz / 1e9;
      // TE30 and TE21 lie 0.35 % apart: the window must resolve them.
      const found = await resonance(box, f, gapOf(box, f));
      measured(`cut-off ${box.polarization} ${f.toFixed(3)} GHz`, found / f - 1);
      expect(Math.abs(found / f - 1)).toBeLessThan(6e-4);
    },
  );
});

describe("the square drum", () => {
  const { geometry, expected } = referenceEntry("cutoffs", "cut-square-30mm");
  const side = numberAt(geometry, "a_m") * 1000;
  const list = z.array(z.number());
  const cases = [
    ...list.parse(expected.TMz_fc_Hz).map((fc) => ({ polarization: "TMz" as const, fc })),
    ...list.parse(expected.TEz_fc_Hz).map((fc) => ({ polarization: "TEz" as const, fc })),
  ];
  it.each(cases)("$polarization $fc Hz within 5e-4 at 64 cells per side", async ({ polarization, fc }) => {
    const box: Box = { polarization, widthMm: side, heightMm: side, cellMm: side / 64 };
    const f = fc / 1e9;
    const found = await resonance(box, f, gapOf(box, f));
    measured(`cut-off ${box.polarization} ${f.toFixed(3)} GHz`, found / f - 1);
    expect(Math.abs(found / f - 1)).toBeLessThan(5e-4);
  });
});
