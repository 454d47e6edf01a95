import { describe, expect, it, vi } from "vitest";
import type { LatticePolarization } from "../lattice/index.js";
import { C0, ETA0, latticeWaveNumber } from "../lattice/index.js";
import type { Scene, SceneInput, SolveResult } from "../scene/index.js";
import { readScene, SceneError } from "../scene/index.js";
import type { EngineName } from "./index.js";
import { openSession } from "./index.js";

vi.setConfig({ testTimeout: 60_000 });

type Place = readonly [x: number, y: number, component: "Ez" | "Hz" | "Hx" | "Hy" | "Ex" | "Ey"];
type Wave = Partial<Extract<NonNullable<SceneInput["sources"]>[number], { kind: "plane-wave" }>>;

const CELL = 1.5;
const [WIDTH, HEIGHT] = [60, 48];
const OPEN = { left: "absorbing", right: "absorbing", bottom: "absorbing", top: "absorbing" } as const;
const at = (id: string, x: number, y: number, field: "Ez" | "Hz" | "Hx" | "Hy" | "Ex" | "Ey") =>
  ({ kind: "point", id, x, y, field }) as const;

/** Places that are field points of their components. */
const insideOf = (polarization: LatticePolarization): Record<"near" | "far" | "x" | "y", Place> =>
  polarization === "TMz"
    ? { near: [12, 15, "Ez"], far: [45, 33, "Ez"], x: [30, 24.75, "Hx"], y: [30.75, 24, "Hy"] }
    : {
        near: [12.75, 15.75, "Hz"],
        far: [45.75, 33.75, "Hz"],
        x: [30.75, 24, "Ex"],
        y: [30, 24.75, "Ey"],
      };

/** 20 cells per wavelength at 10 GHz; the box is 6 mm inside, the probes outside lie all along it. */
const wave = (polarization: LatticePolarization, source: Wave, changes: Partial<SceneInput> = {}): Scene => {
  const field = polarization === "TMz" ? "Ez" : "Hz";
  const around = Array.from({ length: 12 }, (_, n) => (n + 0.5) / 12).flatMap((share, n) => [
    at(`left-${n}`, 3, share * HEIGHT, field),
    at(`right-${n}`, WIDTH - 3, share * HEIGHT, field),
    at(`bottom-${n}`, share * WIDTH, 3, field),
    at(`top-${n}`, share * WIDTH, HEIGHT - 3, field),
  ]);
  const inside = Object.entries(insideOf(polarization)).map(([id, [x, y, component]]) =>
    at(id, x, y, component),
  );
  const outcome = readScene(
    {
      format: "heddle-scene",
      version: 1,
      name: "Plane wave",
      polarization,
      section: { widthMm: WIDTH, heightMm: HEIGHT },
      band: { fromGHz: 2, toGHz: 10 },
      mesh: { cellMm: CELL },
      edges: OPEN,
      sources: [{ kind: "plane-wave", id: "w", angle: 0, ...source }],
      probes: [...inside, ...around],
      stop: { maxTimeNs: 2, decayDb: 120 },
      ...changes,
    },
    { purpose: "run" },
  );
  if (!outcome.ok) throw new SceneError(outcome.problems);
  return outcome.scene;
};

const solve = async (scene: Scene, engine: EngineName): Promise<SolveResult> => {
  const session = await openSession(scene, { engine, frequenciesGHz: [2, 6, 10] });
  expect(session.advance(1e6)).toMatchObject({ kind: "ended" });
  return session.result();
};

const largest = (result: SolveResult, which: RegExp): number =>
  Math.max(
    ...result.probes.filter(({ id }) => which.test(id)).flatMap(({ trace }) => trace.values.map(Math.abs)),
  );
const leakageDb = (result: SolveResult): number =>
  20 * Math.log10(largest(result, /-/) / largest(result, /near|far/));

describe.each(["reference", "wasm"] as const)("a plane wave on the %s engine", (engine) => {
  describe.each(["TMz", "TEz"] as const)("%s", (polarization) => {
    it.each([0, 90, 180, 270])(
      "leaks at most −90 dB out of its box along the axes, at %d°",
      async (angle) => {
        expect(leakageDb(await solve(wave(polarization, { angle }), engine))).toBeLessThan(-90);
      },
    );

    it.each([3, 30, 45, 117, 206.5, 300])("leaks at most −60 dB at %d°", async (angle) => {
      expect(leakageDb(await solve(wave(polarization, { angle }), engine))).toBeLessThan(-60);
    });
  });

  it.each<[string, Wave]>([
    ["a tone", { waveform: { kind: "tone", GHz: 8, rampCycles: 5 } }],
    ["samples that jump", { waveform: { kind: "samples", stepNs: 0.2, values: [1, 1, -0.5] } }],
  ])("leaks as little where the waveform is %s", async (_, source) => {
    for (const angle of [0, 61, 180])
      expect(leakageDb(await solve(wave("TEz", { angle, ...source }), engine))).toBeLessThan(
        angle % 90 === 0 ? -90 : -60,
      );
  });
});

// Source: contract of the field in the lattice, F = exp(−jk(x cosφ + y sinφ)) with the lattice's own k (see `lattice`), H = E/η.
describe.each([0, 40, 200])("inside its box a plane wave at %d°", (angle) => {
  it.each(["TMz", "TEz"] as const)(
    "has phase 0 at the origin, its angle's k and its η, %s",
    async (polarization) => {
      const result = await solve(wave(polarization, { angle, amplitude: 1 }), "reference");
      const radians = (angle * Math.PI) / 180;
      const [c, s] = [Math.cos(radians), Math.sin(radians)];
      const mesh = { dx: CELL / 1e3, dy: CELL / 1e3, dt: result.grid.stepPs * 1e-12 };
      const [impedance, unit] = polarization === "TMz" ? [1 / ETA0, 1] : [-ETA0, 1 / ETA0];
      // In the lattice H/E is 1/η within (kΔ)²/24 alone.
      const expected = {
        near: { amplitude: unit, within: 1e-6 },
        far: { amplitude: unit, within: 1e-6 },
        x: { amplitude: unit * impedance * s, within: 0.005 },
        y: { amplitude: -unit * impedance * c, within: 0.005 },
      };
      for (const [index, GHz] of [2, 6, 10].entries()) {
        const k = latticeWaveNumber(mesh, C0, 2 * Math.PI * GHz * 1e9, radians);
        for (const id of ["near", "far", "x", "y"] as const) {
          const [x, y] = insideOf(polarization)[id];
          const { amplitude, within } = expected[id];
          const spectrum = result.probes.find((probe) => probe.id === id)?.spectrum;
          if (!spectrum || !("re" in spectrum)) throw new Error("no spectrum");
          const phase = (-k * (x * c + y * s)) / 1e3;
          const [re, im] = [spectrum.re[index] ?? Number.NaN, spectrum.im[index] ?? Number.NaN];
          const error = Math.hypot(re - amplitude * Math.cos(phase), im - amplitude * Math.sin(phase));
          expect(error).toBeLessThan(within * unit * (id === "x" || id === "y" ? Math.abs(impedance) : 1));
        }
      }
    },
  );
});

describe("a plane wave's time", () => {
  it("starts before 0 where the wave meets its box before the origin, and at the first step elsewhere", async () => {
    const startOf = async (angle: number): Promise<number> => {
      const session = await openSession(wave("TMz", { angle }), { engine: "reference" });
      return session.tracesSince(0)[0].startNs;
    };
    // From the right the wave comes 54 mm before the origin.
    expect(await startOf(180)).toBeLessThan(-54 / 299.8);
    expect(await startOf(0)).toBeGreaterThan(0);
  });

  it("goes on from a snapshot bit for bit", async () => {
    const scene = wave("TEz", { angle: 200 });
    const first = await openSession(scene);
    first.advance(100);
    const snapshot = first.snapshot();
    first.advance(200);
    const second = await openSession(scene);
    second.restore(snapshot);
    second.advance(200);
    expect(second.tracesSince(0)).toEqual(first.tracesSince(0));
    expect(second.timeNs).toBe(first.timeNs);
  });
});

describe("a plane wave's box", () => {
  const media = [{ id: "glass", name: "Glass", relativePermittivity: 4 }];
  const patch = (x: number, y: number, size: number) => ({
    media,
    paint: [{ kind: "rectangle", id: "p", medium: "glass", x, y, width: size, height: size } as const],
  });

  it("may hold paint but not cross it, however small that is", async () => {
    await expect(openSession(wave("TMz", {}, patch(20, 20, 10)))).resolves.toBeDefined();
    expect(() => wave("TMz", {}, patch(0, 20, 10))).toThrow("must run through");
    await expect(openSession(wave("TMz", {}, patch(5.9, 20.2, 0.4)))).rejects.toThrow(
      "paint touches its line",
    );
  });

  it("needs absorbing edges and a lossless background", () => {
    expect(() => wave("TMz", {}, { edges: { ...OPEN, left: "electric" } })).toThrow("left edge is electric");
    const lossy = [{ id: "soil", name: "Soil", conductivity: 0.01 }];
    expect(() => wave("TMz", {}, { media: lossy, background: "soil" })).toThrow("lossless");
  });
});
