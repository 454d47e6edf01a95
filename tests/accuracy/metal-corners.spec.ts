/**
 * Corners of metal that lie anywhere in their cells: a thick iris by mode matching (source in the entry) on meshes none of which has an
 * edge of the iris on its lines, raw, at the default stop. In TEz a slot between two plates against itself on a mesh eight times as fine.
 */
import { describe, expect, it } from "vitest";
import { z } from "zod";
import { distance } from "./support/extrapolation.js";
import { measured } from "./support/measured.js";
import { complexSchema, numberAt, referenceEntries } from "./support/reference.js";
import type { Document } from "./support/run.js";
import { scatteringOf, solve } from "./support/run.js";

const pieces = (x: number, thickness: number, heightMm: number, opening: number) => {
  const side = (heightMm - opening) / 2;
  const piece = (id: string, y: number) =>
    ({ kind: "rectangle", id, medium: "pec", x, y, width: thickness, height: side }) as const;
  return [piece("low", 0), piece("high", heightMm - side)];
};

describe("a thick iris off the mesh lines", () => {
  const entry = referenceEntries("h-plane").find(({ id }) => id === "hp-thickiris-wr90-9.906-1.524");
  if (!entry) throw new Error("The entry is missing.");
  const { geometry, expected } = entry;
  const [a, opening, thickness] = ["a_m", "opening_m", "thickness_m"].map(
    (key) => 1000 * numberAt(geometry, key),
  );
  const frequenciesGHz = z
    .array(z.number())
    .parse(expected.f_Hz)
    .map((hz) => hz / 1e9);
  const exact = z.array(complexSchema).parse(expected.S21);
  const port = { mode: 1, shiftMm: 10 } as const;
  const scene = (cellMm: number): Document => ({
    polarization: "TMz",
    section: { widthMm: 40 + thickness, heightMm: a },
    band: { fromGHz: 8.2, toGHz: 12.4 },
    mesh: { cellMm },
    edges: { left: "absorbing", right: "absorbing", bottom: "electric", top: "electric" },
    paint: pieces(20, thickness, a, opening),
    ports: [
      { id: "in", from: [10, 0], to: [10, a], inward: "+x", ...port, drive: true },
      { id: "out", from: [30 + thickness, 0], to: [30 + thickness, a], inward: "-x", ...port },
    ],
  });

  it.each([0.225, 0.215, 0.21, 0.2])("is transmitted within 0.001 on cells of %f mm", async (cellMm) => {
    const result = await solve(scene(cellMm), { frequenciesGHz });
    const worst = Math.max(...exact.map((s, n) => distance(scatteringOf(result, "out", "in", n), s)));
    measured(`thick iris, cells of ${cellMm} mm, worst |ΔS21|`, worst);
    expect(worst).toBeLessThan(1e-3);
  });
});

describe("a slot off the mesh lines in TEz", () => {
  const through = async (cellMm: number): Promise<number> => {
    const result = await solve(
      {
        polarization: "TEz",
        section: { widthMm: 48, heightMm: 15 },
        band: { fromGHz: 1, toGHz: 6 },
        mesh: { cellMm },
        edges: { left: "absorbing", right: "absorbing", bottom: "electric", top: "electric" },
        paint: pieces(21.1, 6.3, 15, 3.7),
        ports: [
          { id: "in", from: [6, 0], to: [6, 15], inward: "+x", mode: 0, drive: true },
          { id: "out", from: [42, 0], to: [42, 15], inward: "-x", mode: 0 },
        ],
      },
      { frequenciesGHz: [4] },
    );
    const { re, im } = scatteringOf(result, "out", "in", 0);
    return Math.hypot(re, im);
  };

  it("lets through the same within 0.01 on cells from 0.4 to 0.6 mm", { timeout: 60_000 }, async () => {
    const truth = await through(0.06);
    for (const cellMm of [0.4, 0.45, 0.49, 0.53, 0.6]) {
      const error = (await through(cellMm)) - truth;
      measured(`slot, cells of ${cellMm} mm, Δ|S21|`, error);
      expect(Math.abs(error)).toBeLessThan(0.01);
    }
  });
});
