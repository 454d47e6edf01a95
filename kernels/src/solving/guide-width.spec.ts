/** Frequencies of E-plane parts in their guide. */
import { describe, expect, it } from "vitest";
import type { SceneInput, SolveResult } from "../scene/index.js";
import { readScene, resultSchema } from "../scene/index.js";
import { openSession } from "./index.js";

const C_MM_GHZ = 299.792458;
const [A, B] = [22.86, 10.16];

async function solve(changes: Partial<SceneInput>): Promise<SolveResult> {
  const port = { mode: 0, from: [8, 0], to: [8, B], drive: false } as const;
  const read = readScene(
    {
      format: "heddle-scene",
      version: 1,
      name: "E-plane part",
      polarization: "TEz",
      section: { widthMm: 46, heightMm: B },
      band: { fromGHz: 3, toGHz: 11 },
      mesh: { cellMm: B / 40 },
      outOfPlane: { kind: "guide-width", mm: A },
      edges: { left: "absorbing", right: "absorbing", bottom: "electric", top: "electric" },
      ports: [
        { ...port, id: "in", inward: "+x", drive: true },
        { ...port, id: "out", inward: "-x", from: [38, 0], to: [38, B] },
      ],
      stop: { maxTimeNs: 20, decayDb: 60 },
      ...changes,
    },
    { purpose: "run" },
  );
  if (!read.ok) throw new Error(read.problems.map(({ path, sentence }) => `${path}: ${sentence}`).join("\n"));
  const session = await openSession(read.scene, { engine: "wasm", frequenciesGHz: [3, 5, 7, 9, 11] });
  try {
    expect(session.advance(1e7)).toMatchObject({ kind: "ended" });
    return session.result();
  } finally {
    session.dispose();
  }
}

describe("the frequencies of a guide of a width", () => {
  // β = √(k² − (π/a)²): D. M. Pozar, Microwave Engineering, 4th ed., sec. 3.3.
  it.each([
    ["air", 1],
    ["board", 2.2],
  ])("are where 30 mm of it have the phase of TE10 in it: %s", async (background, permittivity) => {
    const media = [{ id: "board", name: "Board laminate", relativePermittivity: 2.2 }];
    const { ports, quality } = await solve({ background, media });
    expect(quality.warnings.join()).not.toContain("not given");
    expect(ports?.guideGHz).toHaveLength(5);
    const through = ports?.s.find(({ to }) => to === "out");
    ports?.guideGHz?.forEach((frequency, n) => {
      const beta = Math.sqrt(permittivity * ((2 * Math.PI * frequency) / C_MM_GHZ) ** 2 - (Math.PI / A) ** 2);
      const turned = Math.atan2(through?.im[n] ?? 0, through?.re[n] ?? 0) + beta * 30;
      // Of some 10 rad, (π/N)²/6 is the lattice's own at N = 72 cells a wavelength and more: 0.003.
      expect(Math.abs(turned - 2 * Math.PI * Math.round(turned / (2 * Math.PI)))).toBeLessThan(0.005);
    });
  });

  it("are not given where two media fill it, which the warnings say, nor where the section is no such part", async () => {
    const paint = [
      { kind: "rectangle", id: "b", medium: "board", x: 20, y: 0, width: 5, height: B },
    ] as const;
    const media = [{ id: "board", name: "Board laminate", relativePermittivity: 2.2 }];
    const mixed = await solve({ paint: [...paint], media });
    expect(resultSchema.safeParse(mixed).error?.message).toBeUndefined();
    expect(mixed.ports?.guideGHz).toBeUndefined();
    expect(mixed.quality.warnings.join()).toContain("The guide's frequencies are not given");
    const lossy = await solve({
      paint: [...paint],
      media: [{ id: "board", name: "Lossy air", conductivity: 0.01 }],
    });
    expect(lossy.ports?.guideGHz).toBeUndefined();
    const plain = await solve({ outOfPlane: { kind: "unbounded" } });
    expect(plain.ports?.guideGHz).toBeUndefined();
    expect(plain.quality.warnings.join()).not.toContain("not given");
  });
});
