import { describe, expect, it, vi } from "vitest";
import type { SceneInput, SolveResult } from "../scene/index.js";
import { readScene, resultSchema } from "../scene/index.js";
import { openSession } from "./index.js";

vi.setConfig({ testTimeout: 60_000 });

const C0 = 299_792_458;
const EPS0 = 8.854_187_8128e-12;
const SIGMA = 0.002;

const solve = async (changes: Partial<SceneInput> = {}): Promise<SolveResult> => {
  const read = readScene({
    format: "heddle-scene",
    version: 1,
    name: "A lossy box",
    polarization: "TMz",
    section: { widthMm: 60, heightMm: 40 },
    band: { fromGHz: 4, toGHz: 8 },
    mesh: { cellMm: 1 },
    edges: { left: "electric", right: "electric", bottom: "electric", top: "electric" },
    media: [{ id: "lossy", name: "Lossy air", conductivity: SIGMA }],
    background: "lossy",
    sources: [{ kind: "line", id: "wire", x: 17, y: 13 }],
    probes: [
      { kind: "point", id: "p", x: 41, y: 22, field: "Ez" },
      { kind: "point", id: "h", x: 11, y: 29, field: "Hx" },
    ],
    ...changes,
  });
  if (!read.ok) throw new Error(read.problems.map(({ path, sentence }) => `${path}: ${sentence}`).join("\n"));
  const session = await openSession(read.scene);
  expect(session.advance(1e7)).toMatchObject({ kind: "ended" });
  const result = session.result();
  expect(resultSchema.safeParse(result).error?.message).toBeUndefined();
  return result;
};

/** Undamped frequencies of the box in GHz; σ alone gives α = σ/2ε and Q = ω/2α whatever the mode. */
const BOX_MODES = [
  [1, 1],
  [2, 1],
  [1, 2],
  [3, 1],
].map(([m, n]) => (C0 / 2e9) * Math.hypot(m / 0.06, n / 0.04));
const qAt = (GHz: number): number => (2e9 * Math.PI * GHz * EPS0) / SIGMA;
const inBand = BOX_MODES.filter((f) => f >= 4 && f <= 8).sort((a, b) => a - b);
const full: Partial<SceneInput> = { stop: { maxTimeNs: 200, decayDb: 60 } };

describe("resonances of a run", () => {
  it("are the modes of a lossy box, each once, with Q = ωε/σ and no other", async () => {
    const { resonances = [] } = await solve(full);
    expect(resonances).toHaveLength(inBand.length);
    resonances.forEach(({ GHz, q, qUncertainty, levelDb }, index) => {
      // The mesh of 1 mm shifts them by its dispersion.
      expect(Math.abs(GHz / inBand[index] - 1)).toBeLessThan(2e-3);
      expect(Math.abs((q ?? 0) / qAt(GHz) - 1)).toBeLessThan(1e-3);
      expect((qUncertainty ?? 1) / qAt(GHz)).toBeLessThan(1e-3);
      expect(levelDb).not.toBeNull();
    });
  });

  it("are all the modes of a lossless box over a wide band, each once, and no other", async () => {
    const { resonances = [] } = await solve({
      section: { widthMm: 300, heightMm: 200 },
      band: { fromGHz: 0.5, toGHz: 3 },
      mesh: { cellMm: 2 },
      background: "air",
      sources: [{ kind: "line", id: "wire", x: 110, y: 70 }],
      probes: [
        { kind: "point", id: "middle", x: 150, y: 100, field: "Ez" },
        { kind: "point", id: "corner", x: 250, y: 160, field: "Ez" },
        { kind: "point", id: "quarter", x: 80, y: 60, field: "Ez" },
      ],
      stop: { maxTimeNs: 100, decayDb: 60 },
    });
    const modes = [1, 2, 3, 4, 5, 6]
      .flatMap((m) => [1, 2, 3, 4].map((n) => (C0 / 2e9) * Math.hypot(m / 0.3, n / 0.2)))
      .filter((f) => f < 3)
      .sort((a, b) => a - b);
    expect(modes).toHaveLength(13);
    expect(resonances).toHaveLength(13);
    resonances.forEach(({ GHz }, index) => {
      expect(Math.abs(GHz / modes[index] - 1)).toBeLessThan(5e-3);
    });
  });

  it("are not looked for with a tone, and not invented in open space", async () => {
    const tone = await solve({
      sources: [{ kind: "line", id: "wire", x: 17, y: 13, waveform: { kind: "tone", GHz: 5 } }],
      stop: { maxTimeNs: 5, decayDb: 60 },
    });
    expect(tone.resonances).toBeUndefined();
    const open = await solve({
      background: "air",
      edges: { left: "absorbing", right: "absorbing", bottom: "absorbing", top: "absorbing" },
      stop: { maxTimeNs: 10, decayDb: 200 },
    });
    expect(open.resonances).toEqual([]);
  });

  it("complete a run that was stopped early to the spectrum of a whole one, and limits are judged on it", async () => {
    const limits: SceneInput["limits"] = [
      {
        id: "l",
        name: "Leak",
        sense: "below",
        points: [
          [4, 120],
          [8, 120],
        ],
        of: { probe: "p" },
      },
      { id: "q", name: "Ringing", sense: "below", value: 300, of: { q: "highest" } },
    ];
    const whole = await solve({ ...full, limits });
    const cut = await solve({ stop: { maxTimeNs: 12, decayDb: 300 }, limits });
    const [long, short] = [whole, cut].map(({ probes }) => {
      const { spectrum } = probes[0];
      if (!spectrum || !("re" in spectrum)) throw new Error("no complex spectrum");
      return spectrum;
    });
    expect(long.completed).toBeUndefined();
    expect(short.completed).toBe(true);
    let off = 0;
    let largest = 0;
    long.re.forEach((re, n) => {
      off = Math.max(off, Math.hypot((re ?? 0) - (short.re[n] ?? 0), (long.im[n] ?? 0) - (short.im[n] ?? 0)));
      largest = Math.max(largest, Math.hypot(re ?? 0, long.im[n] ?? 0));
    });
    expect(off / largest).toBeLessThan(0.01);
    expect(cut.quality.warnings.join(" ")).not.toMatch(/had fallen by/);
    const judged = cut.limits?.find(({ id }) => id === "l");
    expect(judged?.margin ?? 0).toBeCloseTo(whole.limits?.find(({ id }) => id === "l")?.margin ?? 1, 1);
    const highest = Math.max(...(whole.resonances ?? []).map(({ q }) => q ?? 0));
    expect(whole.limits?.find(({ id }) => id === "q")).toMatchObject({ holds: true, margin: 300 - highest });
  });

  it("take the loss of plates above and below into Q and its limit", async () => {
    const wallConductivity = 1e4;
    const { resonances = [], limits } = await solve({
      ...full,
      outOfPlane: { kind: "height", mm: 10 },
      wallConductivity,
      limits: [{ id: "q", name: "Sharpness", sense: "above", value: 50, of: { q: "highest" } }],
    });
    expect(resonances).toHaveLength(inBand.length);
    for (const { GHz, q, qWithPlates } of resonances) {
      const skinDepth = Math.sqrt(2 / (2e9 * Math.PI * GHz * 4e-7 * Math.PI * wallConductivity));
      expect(1 / (qWithPlates ?? 1) - 1 / (q ?? 1)).toBeCloseTo(skinDepth / 0.01, 8);
    }
    const highest = Math.max(...resonances.map(({ qWithPlates }) => qWithPlates ?? 0));
    expect(limits?.[0]).toMatchObject({ id: "q", holds: highest >= 50, margin: highest - 50 });
  });

  it("have no Q where the box has no loss, and no limit is judged on one", async () => {
    const { resonances = [], limits } = await solve({
      background: "air",
      stop: { maxTimeNs: 60, decayDb: 60 },
      limits: [{ id: "q", name: "Ringing", sense: "below", value: 300, of: { q: "highest" } }],
    });
    expect(resonances.map(({ q }) => q)).toEqual(inBand.map(() => null));
    expect(limits?.[0]).toMatchObject({ holds: null, margin: null });
  });
});
