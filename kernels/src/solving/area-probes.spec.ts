import { describe, expect, it, vi } from "vitest";
import type { LatticePolarization } from "../lattice/index.js";
import type { PowerSpectrum, Scene, SceneInput, SolveResult } from "../scene/index.js";
import { readScene, resultSchema } from "../scene/index.js";
import type { EngineName, SolveSession } from "./index.js";
import { openSession } from "./index.js";

vi.setConfig({ testTimeout: 60_000 });

const edges = (left: "electric" | "absorbing", others: "electric" | "magnetic" | "absorbing") => ({
  left,
  right: others,
  bottom: left,
  top: others,
});
const area = (id: string, quantity: "absorbed" | "energy", x = 0, y = 0, width = 60, height = 42) =>
  ({ kind: "area", id, x, y, width, height, quantity }) as const;

const scene = (polarization: LatticePolarization, changes: Partial<SceneInput> = {}): Scene => {
  const outcome = readScene(
    {
      format: "heddle-scene",
      version: 1,
      name: "Areas",
      polarization,
      section: { widthMm: 60, heightMm: 42 },
      band: { fromGHz: 2, toGHz: 6 },
      mesh: { cellMm: 2 },
      edges: edges("electric", "absorbing"),
      media: [
        { id: "lossy", name: "Lossy", relativePermittivity: 3, conductivity: 0.05 },
        { id: "ferrite", name: "Ferrite", relativePermeability: 2, magneticLoss: 400 },
      ],
      paint: [
        { kind: "ellipse", id: "rod", medium: "lossy", x: 36, y: 24, rx: 12, ry: 9 },
        { kind: "rectangle", id: "tile", medium: "ferrite", x: 12.3, y: 7.2, width: 9, height: 11 },
      ],
      sources: [{ kind: "line", id: "s", x: 13.2, y: 27.1 }],
      probes: [area("all", "absorbed")],
      stop: { maxTimeNs: 200, decayDb: 130 },
      ...changes,
    },
    { purpose: "run" },
  );
  if (!outcome.ok) throw new Error(outcome.problems.map(({ sentence }) => sentence).join("\n"));
  return outcome.scene;
};

const FREQUENCIES = [2, 3, 4, 5, 6];
const solve = async (document: Scene, engine: EngineName = "reference"): Promise<SolveResult> => {
  const session = await openSession(document, { engine, frequenciesGHz: FREQUENCIES });
  expect(session.advance(1e7).kind).toBe("ended");
  const result = session.result();
  expect(resultSchema.safeParse(result).error?.message).toBeUndefined();
  return result;
};
const spectrumOf = (result: SolveResult, id: string): PowerSpectrum => {
  const spectrum = result.probes.find((probe) => probe.id === id)?.spectrum;
  if (!spectrum || !("value" in spectrum)) throw new Error(`no power spectrum of ${id}`);
  return spectrum;
};
const numbers = (values: readonly (number | null)[] | undefined): number[] =>
  (values ?? []).map((value) => value ?? Number.NaN);
const worst = (values: readonly (number | null)[] | undefined): number =>
  Math.max(...numbers(values).map(Math.abs));

// The bar: what drives put in is what media absorb and edges take, within 1e-3 of it at every frequency.
describe.each(["TMz", "TEz"] as const)("the power balance of %s", (polarization) => {
  it.each<[string, Partial<SceneInput>]>([
    ["a lossy box with absorbing edges", {}],
    ["a lossy closed box", { edges: edges("electric", "electric") }],
    ["a lossy box between electric and magnetic edges", { edges: edges("electric", "magnetic") }],
    [
      "a plane wave in open space",
      {
        edges: edges("absorbing", "absorbing"),
        sources: [{ kind: "plane-wave", id: "s", angle: 33, insetMm: 4 }],
      },
    ],
  ])("holds within 1e-3 in %s", async (_, changes) => {
    const { balance } = await solve(scene(polarization, changes));
    expect(balance?.GHz).toEqual(FREQUENCIES);
    expect(worst(balance?.mismatch)).toBeLessThan(1e-3);
    expect(Math.min(...numbers(balance?.absorbed))).toBeGreaterThan(0);
  });

  it("holds in single precision too", async () => {
    const { balance } = await solve(scene(polarization, { stop: { maxTimeNs: 20, decayDb: 100 } }), "wasm");
    expect(worst(balance?.mismatch)).toBeLessThan(1e-3);
  });
});

const resonances: SceneInput["media"] = [
  {
    id: "water",
    name: "Water",
    relativePermittivity: 4,
    conductivity: 0.01,
    electricPoles: [{ kind: "debye", delta: 6, tauNs: 0.03 }],
  },
  {
    id: "ferrite",
    name: "Ferrite",
    relativePermeability: 1.5,
    relativePermittivity: 2,
    magneticPoles: [{ kind: "lorentz", delta: 0.8, resonanceGHz: 4.2, dampingGHz: 1.5 }],
    electricPoles: [{ kind: "lorentz", delta: 0.5, resonanceGHz: 3.1, dampingGHz: 2 }],
  },
];
const shell: NonNullable<SceneInput["paint"]> = [
  {
    kind: "film",
    id: "shell",
    points: [
      [8, 31],
      [25, 38.4],
      [52.3, 21],
      [40, 7.7],
    ],
    ohmsPerSquare: 150,
  },
];

describe.each(["TMz", "TEz"] as const)("the power balance with poles and films of %s", (polarization) => {
  const document = (changes: Partial<SceneInput> = {}): Scene =>
    scene(polarization, {
      media: resonances,
      paint: [
        { kind: "ellipse", id: "rod", medium: "water", x: 36, y: 24, rx: 12, ry: 9 },
        { kind: "rectangle", id: "tile", medium: "ferrite", x: 12.3, y: 7.2, width: 9, height: 11 },
      ],
      ...changes,
    });
  it.each<[string, Partial<SceneInput>]>([
    ["poles, electric and magnetic", {}],
    ["poles in a closed box", { edges: edges("electric", "electric") }],
    ["a film at every slant", { media: [], paint: shell }],
    [
      "films and poles",
      {
        paint: [{ kind: "ellipse", id: "rod", medium: "water", x: 36, y: 24, rx: 12, ry: 9 }, ...shell],
        edges: edges("electric", "magnetic"),
      },
    ],
  ])("holds within 1e-3: %s", async (_, changes) => {
    const result = await solve(document(changes));
    expect(result.balance?.GHz).toEqual(FREQUENCIES);
    expect(worst(result.balance?.mismatch)).toBeLessThan(1e-3);
    // Without them the books would be open: they take much.
    const shares = numbers(result.balance?.absorbed).map(
      (value, n) => value / numbers(result.balance?.input)[n],
    );
    expect(Math.min(...shares)).toBeGreaterThan(0.02);
    // The area that holds everything absorbs what the balance says.
    const { value } = spectrumOf(result, "all");
    numbers(value).forEach((absorbed, n) =>
      expect(absorbed / numbers(result.balance?.absorbed)[n]).toBeCloseTo(1, 6),
    );
    expect(result.quality.warnings.join(" ")).not.toContain("balance");
  });

  it("tells electric from magnetic losses, in single precision too", async () => {
    const result = await solve(
      document({ probes: [area("tile", "absorbed", 10, 5, 13, 15), area("all", "absorbed")] }),
      "wasm",
    );
    const { electric, magnetic } = spectrumOf(result, "tile");
    expect(Math.min(...numbers(electric))).toBeGreaterThan(0);
    expect(Math.min(...numbers(magnetic))).toBeGreaterThan(0);
    expect(worst(result.balance?.mismatch)).toBeLessThan(1e-3);
  });
});

describe("an absorbed power", () => {
  it("is what flows in through a closed line around it", async () => {
    const line = (id: string, from: [number, number], to: [number, number]) =>
      ({ kind: "line", id, from, to, quantity: "power" }) as const;
    // Half way between field points, where the discrete flux lives; the left of each line is inside.
    const [l, r, b, t] = [21, 51, 11, 37];
    const result = await solve(
      scene("TMz", {
        paint: [{ kind: "ellipse", id: "rod", medium: "lossy", x: 36, y: 24, rx: 12, ry: 9 }],
        probes: [
          area("rod", "absorbed", 20, 10, 32, 28),
          line("bottom", [l, b], [r, b]),
          line("right", [r, b], [r, t]),
          line("top", [r, t], [l, t]),
          line("left", [l, t], [l, b]),
        ],
      }),
    );
    const inward = FREQUENCIES.map((_, n) =>
      ["bottom", "right", "top", "left"].reduce(
        (sum, id) => sum + numbers(spectrumOf(result, id).value)[n],
        0,
      ),
    );
    const { value, electric, magnetic } = spectrumOf(result, "rod");
    // 25 cells per wavelength at 6 GHz: a line probe is bilinear between field points, off by (kΔ)²/8 at most.
    numbers(value).forEach((absorbed, n) => {
      const k = (2 * Math.PI * FREQUENCIES[n]) / 299.8;
      expect(Math.abs(absorbed / inward[n] - 1)).toBeLessThan((2 * k) ** 2 / 8);
    });
    expect(numbers(magnetic)).toEqual([0, 0, 0, 0, 0]);
    expect(electric).toEqual(value);
  });

  it("adds up over parts, electric and magnetic apart, with the field beside it", async () => {
    const halves = [area("one", "absorbed", 0, 0, 31, 42), area("two", "absorbed", 31, 0, 29, 42)];
    const result = await solve(scene("TEz", { probes: [area("all", "absorbed"), ...halves] }));
    for (const part of ["value", "electric", "magnetic"] as const) {
      const [all, one, two] = ["all", "one", "two"].map((id) => numbers(spectrumOf(result, id)[part]));
      all.forEach((value, n) => expect((one[n] + two[n]) / value).toBeCloseTo(1, 10));
    }
    const { meanField, worstField } = spectrumOf(result, "all");
    numbers(meanField).forEach((mean, n) => expect(mean).toBeLessThan(numbers(worstField)[n]));
    const trace = result.probes[0].trace;
    expect(Math.min(...trace.values)).toBeGreaterThanOrEqual(0);
    expect(trace.stepNs / (result.grid.stepPs / 1e3)).toBeGreaterThan(1);
  });

  it("is judged by its share of the input", async () => {
    const limit = (sense: "above" | "below") =>
      ({ id: sense, name: sense, sense, value: 0.05, of: { absorbedShare: "all" } }) as const;
    const result = await solve(scene("TMz", { limits: [limit("above"), limit("below")] }));
    const shares = numbers(spectrumOf(result, "all").value).map(
      (value, n) => value / numbers(result.balance?.input)[n],
    );
    expect(result.limits?.[0]).toMatchObject({ id: "above", holds: Math.min(...shares) > 0.05 });
    expect(result.limits?.[1].margin).toBeCloseTo(0.05 - Math.max(...shares), 12);
  });
});

describe("a stored energy", () => {
  it("stays in a lossless closed box once the source is over", async () => {
    const closed = { edges: edges("electric", "electric"), paint: [], probes: [area("all", "energy")] };
    const result = await solve(scene("TMz", { ...closed, stop: { maxTimeNs: 6, decayDb: 100 } }));
    const { values } = result.probes[0].trace;
    const rest = values.slice(-20);
    // E and H are half a step apart: their sum swings by the share of a step in a period.
    expect(Math.max(...rest) / Math.min(...rest)).toBeLessThan(1.2);
    expect(Math.min(...rest)).toBeGreaterThan(0);
    // Nothing falls: the spectrum stands with a warning.
    expect(result.quality.warnings.join(" ")).toContain('"all"');
  });
});

describe("a run that looks at frames", () => {
  const until = async (steps: number[], from?: SolveSession): Promise<SolveSession> => {
    const session = await openSession(scene("TMz"), { frequenciesGHz: FREQUENCIES });
    if (from) session.restore(from.snapshot());
    for (const count of steps) session.advance(count);
    return session;
  };

  it("does not depend on how it is cut, and goes on from a snapshot", async () => {
    const whole = await until([1e6]);
    const first = await until([101]);
    const second = await until([37, 1e6], first);
    const bare = (result: SolveResult) => ({ ...result, timing: null });
    expect(bare(second.result())).toEqual(bare(whole.result()));
    expect(second.tracesSince(100)).toEqual(whole.tracesSince(100));
  });

  it("tells no average of a tone, and says so", async () => {
    const tone = { kind: "tone", GHz: 4, rampCycles: 5 } as const;
    const result = await solve(
      scene("TMz", {
        sources: [{ kind: "line", id: "s", x: 13.2, y: 27.1, waveform: tone }],
        stop: { maxTimeNs: 5, decayDb: 60 },
      }),
    );
    expect(result.probes[0].spectrum).toBeNull();
    expect(result.balance).toBeUndefined();
    expect(result.quality.warnings.join(" ")).toContain(
      "probes of power and energy have a trace but no average",
    );
  });
});
