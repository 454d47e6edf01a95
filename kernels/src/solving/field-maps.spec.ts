/** Whole maps: phasors against a probe's spectrum and a standing wave in closed form, and the envelope against a trace. */
import { describe, expect, it } from "vitest";
import type { MapQuantity, MapRequest } from "../frames/index.js";
import type { Scene, SceneInput, SolveResult } from "../scene/index.js";
import { readScene } from "../scene/index.js";
import type { SessionOptions, SolveSession } from "./index.js";
import { openSession } from "./index.js";

const GHZ = 3;
const [NX, NY] = [60, 12];

/**
 * A guide 12 mm high between electric walls, closed on the right: below 12.5 GHz only the wave without variation across travels (TEz), so
 * that it stands before the wall at x = 60 mm.
 */
const sceneOf = (changes: Partial<SceneInput> = {}): Scene => {
  const read = readScene({
    format: "heddle-scene",
    version: 1,
    name: "Standing wave",
    polarization: "TEz",
    section: { widthMm: NX, heightMm: NY },
    band: { fromGHz: 1, toGHz: 6 },
    mesh: { cellMm: 1 },
    edges: { left: "absorbing", right: "electric", bottom: "electric", top: "electric" },
    sources: [{ kind: "line", id: "wire", x: 5.5, y: 6 }],
    // Probes on cell centres, where the maps are.
    probes: [
      { kind: "point", id: "h", x: 33.5, y: 4.5, field: "Hz" },
      { kind: "point", id: "e", x: 33.5, y: 4.5, field: "Ey" },
    ],
    stop: { maxTimeNs: 20, decayDb: 120 },
    ...changes,
  });
  if (!read.ok) throw new Error(read.problems.map(({ sentence }) => sentence).join("\n"));
  return read.scene;
};

const options: SessionOptions = { mapsGHz: [2, GHZ], envelope: true, frequenciesGHz: [2, GHZ] };
const run = async (scene: Scene, more: SessionOptions = {}, steps = [1e7]): Promise<SolveSession> => {
  const session = await openSession(scene, { ...options, ...more });
  for (const count of steps) session.advance(count);
  return session;
};
const mapOf = (
  session: SolveSession,
  quantity: MapQuantity,
  part: MapRequest["part"],
  GHz = GHZ,
): Float32Array => {
  const sample = session.sampleMap?.({ quantity, part, GHz, width: NX, height: NY });
  if (!sample) throw new Error("no map");
  expect([sample.width, sample.height, sample.quantity]).toEqual([NX, NY, quantity]);
  return sample.values;
};
const spectrumAt = (result: SolveResult, id: string, n: number): [number, number] => {
  const spectrum = result.probes.find((probe) => probe.id === id)?.spectrum;
  if (!spectrum || !("re" in spectrum)) throw new Error("no spectrum");
  return [spectrum.re[n] ?? Number.NaN, spectrum.im[n] ?? Number.NaN];
};
const at = (x: number, y: number): number => Math.floor(y) * NX + Math.floor(x);

describe.each(["reference", "wasm"] as const)("a map of the %s engine", (engine) => {
  it("is the spectrum of a probe at the same place, real and imaginary part", async () => {
    const session = await run(sceneOf(), { engine });
    const result = session.result();
    for (const [n, GHz] of [2, GHZ].entries())
      for (const [id, quantity] of [
        ["h", "Hz"],
        ["e", "Ey"],
      ] as const) {
        const [re, im] = spectrumAt(result, id, n);
        const size = Math.hypot(re, im);
        const k = at(33.5, 4.5);
        // Frames are decimated as far as what was driven allows; rounding of float32 samples.
        expect(Math.abs(mapOf(session, quantity, "real", GHz)[k] - re) / size).toBeLessThan(1e-4);
        expect(Math.abs(mapOf(session, quantity, "imaginary", GHz)[k] - im) / size).toBeLessThan(1e-4);
        expect(Math.abs(mapOf(session, quantity, "magnitude", GHz)[k] / size - 1)).toBeLessThan(1e-4);
      }
  });

  it("is a standing wave before a wall: |cos| of H, |sin| of E, their ratio the impedance of space", async () => {
    const session = await run(sceneOf(), { engine });
    const h = mapOf(session, "Hz", "magnitude");
    const e = mapOf(session, "absE", "magnitude");
    // H = H₀cos k(60 − x), E = η₀H₀ sin k(60 − x), by the boundary condition E = 0 on the wall; k of 100 cells per wavelength is that of
    // space to 1e-4, and means over a cell are short by (kΔ)²/8 = 5e-4.
    const k = (2 * Math.PI * GHZ) / 299.792458;
    const h0 = h[at(59.5, 6)] / Math.cos(k * 0.5);
    for (let x = 20.5; x < NX; x += 1) {
      expect(Math.abs(h[at(x, 6)] / h0 - Math.abs(Math.cos(k * (NX - x))))).toBeLessThan(2e-3);
      expect(Math.abs(e[at(x, 6)] / h0 / 376.730313668 - Math.abs(Math.sin(k * (NX - x))))).toBeLessThan(
        2e-3,
      );
    }
  });
});

describe("an envelope", () => {
  it("is the largest value of a trace at the same place, short of it by at most what falls between looks", async () => {
    const session = await run(sceneOf());
    const { values } = session.sampleEnvelope?.({ quantity: "absH", width: NX, height: NY }) ?? {
      values: [],
    };
    const peak = Math.max(...session.tracesSince(0)[0].values.map(Math.abs));
    expect(values[at(33.5, 4.5)]).toBeLessThanOrEqual(peak * (1 + 1e-6));
    expect(values[at(33.5, 4.5)]).toBeGreaterThan(peak * Math.cos(Math.PI / 20));
  });
});

describe("a run that keeps maps", () => {
  it("goes on from a snapshot to the same maps, however it is cut", async () => {
    const whole = await run(sceneOf());
    const first = await run(sceneOf(), {}, [211]);
    const second = await openSession(sceneOf(), options);
    second.restore(structuredClone(first.snapshot()));
    for (const count of [77, 1e7]) second.advance(count);
    expect(mapOf(second, "Ey", "imaginary")).toEqual(mapOf(whole, "Ey", "imaginary"));
    const envelope = (session: SolveSession) =>
      session.sampleEnvelope?.({ quantity: "absE", width: 20, height: 4 });
    expect(envelope(second)).toEqual(envelope(whole));
  });

  it("keeps those of the port that drives", async () => {
    const line = {
      from: [10, 0] as [number, number],
      to: [10, NY] as [number, number],
      mode: 0,
      drive: true,
    } as const;
    const ports: SceneInput["ports"] = [
      { id: "one", ...line, inward: "+x" },
      { id: "two", ...line, from: [50, 0], to: [50, NY], inward: "-x" },
    ];
    const edges = { left: "absorbing", right: "absorbing", bottom: "electric", top: "electric" } as const;
    const session = await run(sceneOf({ sources: [], ports, edges }));
    // The second port has driven last: its wave has passed x = 5, none has turned back at x = 55.
    const h = mapOf(session, "Hz", "magnitude");
    expect(h[at(5, 6)]).toBeGreaterThan(100 * h[at(55, 6)]);
  });

  it("refuses what it does not keep", async () => {
    const session = await run(sceneOf(), {}, [10]);
    const request = { quantity: "Hz", part: "real", GHz: GHZ, width: 4, height: 4 } as const;
    expect(() => session.sampleMap?.({ ...request, GHz: 4 })).toThrow("no map at 4 GHz");
    expect(() => session.sampleMap?.({ ...request, quantity: "Ez" })).toThrow("TEz has no Ez");
    expect(() => session.sampleMap?.({ ...request, quantity: "absE" })).toThrow("absE has no real part");
    const bare = await openSession(sceneOf());
    expect(() => bare.sampleMap?.(request)).toThrow(RangeError);
    expect(() => bare.sampleEnvelope?.({ quantity: "absE", width: 4, height: 4 })).toThrow(RangeError);
    await expect(openSession(sceneOf(), { mapsGHz: [-1] })).rejects.toThrow("positive number of GHz");
    const many = Array.from({ length: 20_000 }, (_, n) => 1 + n / 1e4);
    await expect(openSession(sceneOf(), { mapsGHz: many })).rejects.toThrow("fewer frequencies");
  });
});
