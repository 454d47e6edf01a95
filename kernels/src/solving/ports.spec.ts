/** Ports through the session's door: what an empty guide, a short and a step tell of them. */
import { describe, expect, it } from "vitest";
import type { SceneInput, SolveResult } from "../scene/index.js";
import { readScene, resultSchema } from "../scene/index.js";
import type { SessionOptions, SolveSession } from "./index.js";
import { openSession } from "./index.js";

const C_MM_GHZ = 299.792458;
type Edges = SceneInput["edges"];
type Port = NonNullable<SceneInput["ports"]>[number];
type Point = [number, number];

const across = (edges: Partial<Edges> = {}): Edges => ({
  left: "absorbing",
  right: "absorbing",
  bottom: "electric",
  top: "electric",
  ...edges,
});

const guide = (changes: Partial<SceneInput> = {}): SceneInput => ({
  format: "heddle-scene",
  version: 1,
  name: "Guide",
  polarization: "TMz",
  section: { widthMm: 36, heightMm: 22.86 },
  band: { fromGHz: 8, toGHz: 12.5 },
  mesh: { cellMm: 22.86 / 24 },
  edges: across(),
  stop: { maxTimeNs: 40, decayDb: 100 },
  ...changes,
});
const port = (id: string, x: number, inward: "+x" | "-x", changes: Partial<Port> = {}): Port => ({
  id,
  from: [x, 0],
  to: [x, 22.86],
  inward,
  mode: 1,
  drive: true,
  ...changes,
});

async function open(document: SceneInput, options: SessionOptions = {}): Promise<SolveSession> {
  const read = readScene(document, { purpose: "run" });
  if (!read.ok) throw new Error(read.problems.map(({ path, sentence }) => `${path}: ${sentence}`).join("\n"));
  return openSession(read.scene, options);
}

async function solve(document: SceneInput, options: SessionOptions = {}): Promise<SolveResult> {
  const session = await open(document, options);
  const outcome = session.advance(1e8);
  if (outcome.kind !== "ended") throw new Error(`The run did not end: ${JSON.stringify(outcome)}`);
  const result = session.result();
  session.dispose();
  return result;
}

/** S from port to port at every frequency, as [re, im]. */
function sOf(result: SolveResult, to: string, from: string): [number, number][] {
  const entry = result.ports?.s.find((one) => one.to === to && one.from === from);
  if (!entry) throw new Error(`no S from ${from} to ${to}`);
  return entry.re.map((re, n) => [re ?? Number.NaN, entry.im[n] ?? Number.NaN]);
}
const dB = ([re, im]: [number, number]): number => 20 * Math.log10(Math.hypot(re, im));
const apart = (a: [number, number], b: [number, number]): number => Math.hypot(a[0] - b[0], a[1] - b[1]);
const worst = (values: readonly number[]): number => Math.max(...values);
const turned = (degrees: number): [number, number] => [
  Math.cos((degrees * Math.PI) / 180),
  Math.sin((degrees * Math.PI) / 180),
];

/** Above 1.1 times the cut-off at 6.557 GHz. */
const FREQUENCIES = [7.22, 8, 9, 10, 11, 12.5];
const CASES = [
  { polarization: "TMz", mode: 1 },
  { polarization: "TEz", mode: 1 },
  { polarization: "TEz", mode: 0 },
] as const;

describe("an empty guide", () => {
  it.each(CASES)(
    "reflects at most -50 dB and delays by its phase constant: $polarization, mode $mode",
    async (of) => {
      const { polarization, mode } = of;
      const ports = [port("in", 8, "+x", { mode }), port("out", 27.3, "-x", { mode })];
      // A band from near the cut-off, and time for its slow waves to leave.
      const document = guide({
        polarization,
        ports,
        band: { fromGHz: 7, toGHz: 13 },
        stop: { maxTimeNs: 80 },
      });
      const result = await solve(document, { engine: "wasm", frequenciesGHz: FREQUENCIES });
      expect(resultSchema.safeParse(result).success).toBe(true);
      for (const id of ["in", "out"]) {
        expect(worst(sOf(result, id, id).map(dB))).toBeLessThan(-50);
        expect(worst(sOf(result, id, id).map(dB))).toBeGreaterThan(-200);
      }
      const delays =
        result.ports?.s.find(({ to, from }) => to === "out" && from === "in")?.groupDelayNs ?? [];
      sOf(result, "out", "in").forEach((value, n) => {
        const f = FREQUENCIES[n];
        const root = Math.sqrt(f ** 2 - ((mode * C_MM_GHZ) / 2 / 22.86) ** 2);
        // 0.3° of phase velocity in these cells.
        expect(apart(value, turned((-360 * 19.3 * root) / C_MM_GHZ))).toBeLessThan(0.012);
        // d(βL)/dω = L·f/(c·√(f² − f_c²))
        expect(delays[n]).toBeCloseTo((19.3 * f) / C_MM_GHZ / root, 2);
      });
      expect(result.ports?.passivity.worst).toBeCloseTo(1, 2);
    },
  );

  it("works alike along y, from either side, with its line drawn either way, and between painted walls off the mesh", async () => {
    const walls = [
      { kind: "rectangle", id: "l", medium: "pec", x: 0, y: 0, width: 3.3, height: 40 },
      { kind: "rectangle", id: "r", medium: "pec", x: 26.16, y: 0, width: 4, height: 40 },
    ] as const;
    const line = (y: number): { from: Point; to: Point } => ({ from: [3.3, y], to: [26.16, y] });
    for (const { polarization, mode } of CASES) {
      const result = await solve(
        guide({
          polarization,
          section: { widthMm: 30, heightMm: 40 },
          edges: { left: "electric", right: "electric", bottom: "absorbing", top: "absorbing" },
          paint: [...walls],
          ports: [
            { id: "low", ...line(10), inward: "+y", mode, drive: true },
            { id: "high", from: line(28).to, to: line(28).from, inward: "-y", mode, drive: true },
          ],
        }),
        { engine: "wasm", frequenciesGHz: FREQUENCIES.slice(1) },
      );
      for (const id of ["low", "high"]) expect(worst(sOf(result, id, id).map(dB))).toBeLessThan(-50);
      const odd = polarization === "TMz" ? 1 : mode;
      // Drawn the other way the line turns E and, in TEz, the sign of odd modes once more.
      const sign = polarization === "TMz" || odd === 1 ? 1 : -1;
      sOf(result, "high", "low").forEach(([re, im], n) => {
        const f = FREQUENCIES[n + 1];
        const root = Math.sqrt(f ** 2 - ((mode * C_MM_GHZ) / 2 / 22.86) ** 2);
        expect(apart([sign * re, sign * im], turned((-360 * 18 * root) / C_MM_GHZ))).toBeLessThan(0.02);
      });
    }
  });
});

describe("a filled guide", () => {
  it("runs on unchanged through the layers, with its ports on the section's own edges", async () => {
    const fill = {
      kind: "rectangle",
      id: "r",
      medium: "fill",
      x: 0,
      y: 0,
      width: 36,
      height: 22.86,
    } as const;
    const result = await solve(
      guide({
        band: { fromGHz: 5, toGHz: 8 },
        media: [{ id: "fill", name: "Fill", relativePermittivity: 2.5 }],
        paint: [fill],
        ports: [port("in", 0, "+x"), port("out", 36, "-x", { drive: false })],
      }),
      // 1.1 times its cut-off is 4.562 GHz.
      { engine: "wasm", frequenciesGHz: [5, 6.5, 8] },
    );
    expect(worst(sOf(result, "in", "in").map(dB))).toBeLessThan(-50);
    sOf(result, "out", "in").forEach((value, n) => {
      const f = [5, 6.5, 8][n];
      const root = Math.sqrt(2.5 * f ** 2 - (C_MM_GHZ / 2 / 22.86) ** 2);
      expect(apart(value, turned((-360 * 36 * root) / C_MM_GHZ))).toBeLessThan(0.02);
    });
  });
});

describe("a short at the port's line", () => {
  it.each(CASES)(
    "gives -1, and is turned by shiftMm: $polarization, mode $mode",
    async ({ polarization, mode }) => {
      const document = (shiftMm: number, x: number): SceneInput =>
        guide({
          polarization,
          section: { widthMm: 24 * (22.86 / 24), heightMm: 22.86 },
          edges: across({ right: "electric" }),
          ports: [port("in", x, "+x", { mode, shiftMm })],
        });
      const options = { engine: "reference", frequenciesGHz: [8.5, 10, 12] } as const;
      const atWall = await solve(document(0, 22.86), options);
      for (const value of sOf(atWall, "in", "in")) expect(apart(value, [-1, 0])).toBeLessThan(1e-5);
      // The port stands off the mesh lines; its reference plane lies on the wall again.
      const shifted = await solve(document(9.3, 22.86 - 9.3), options);
      for (const value of sOf(shifted, "in", "in")) expect(apart(value, [-1, 0])).toBeLessThan(1e-5);
      const unshifted = await solve(document(0, 22.86 - 9.3), options);
      sOf(unshifted, "in", "in").forEach((value, n) => {
        const f = options.frequenciesGHz[n];
        const root = Math.sqrt(f ** 2 - ((mode * C_MM_GHZ) / 2 / 22.86) ** 2);
        const [re, im] = turned((-720 * 9.3 * root) / C_MM_GHZ);
        expect(apart(value, [-re, -im])).toBeLessThan(0.02);
      });
    },
  );
});

/** An asymmetric step with a lossless post behind it: reciprocal, lossless, unlike at its two ports. */
const step = (changes: Partial<SceneInput> = {}): SceneInput =>
  guide({
    section: { widthMm: 50, heightMm: 22.86 },
    media: [{ id: "glass", name: "Glass", relativePermittivity: 2.5 }],
    paint: [
      { kind: "rectangle", id: "step", medium: "pec", x: 24, y: 18.3, width: 26, height: 4.56 },
      { kind: "ellipse", id: "post", medium: "glass", x: 20, y: 9, rx: 3, ry: 3 },
    ],
    ports: [port("a", 9, "+x"), port("b", 41, "-x", { from: [41, 18.3], to: [41, 0] })],
    probes: [
      { kind: "point", id: "p", x: 30, y: 8, field: "Ez" },
      { kind: "line", id: "flow", from: [33, 18.3], to: [33, 0], quantity: "power" },
    ],
    limits: [
      {
        id: "back",
        name: "Return",
        sense: "below",
        points: [
          [8.5, -1],
          [12, -1],
        ],
        of: { s: ["a", "a"] },
      },
      {
        id: "through",
        name: "Through",
        sense: "above",
        points: [
          [8.5, -60],
          [12, -60],
        ],
        of: { s: ["b", "a"] },
      },
      {
        id: "level",
        name: "Level",
        sense: "below",
        points: [
          [8.5, 200],
          [12, 200],
        ],
        of: { probe: "p" },
      },
    ],
    ...changes,
  });

describe("three driven ports along both axes", () => {
  // TEz's mode 1 would also lose power to its mode 0.
  it.each([CASES[0], CASES[2]])(
    "are reciprocal and lossless on unequal cells: $polarization, mode $mode",
    async (of) => {
      const { polarization, mode } = of;
      // A tee of two guides 20 mm wide; its cells are 1 mm by 0.87 mm.
      const result = await solve(
        guide({
          polarization,
          section: { widthMm: 60, heightMm: 46.98 },
          band: { fromGHz: mode === 0 ? 2 : 9, toGHz: mode === 0 ? 6 : 13 },
          mesh: { cellMm: 1 },
          edges: across({ top: "absorbing" }),
          paint: [
            { kind: "rectangle", id: "l", medium: "pec", x: 0, y: 20, width: 20, height: 40 },
            { kind: "rectangle", id: "r", medium: "pec", x: 40, y: 20, width: 20, height: 40 },
          ],
          ports: [
            port("a", 8, "+x", { mode, to: [8, 20] }),
            port("b", 52, "-x", { mode, to: [52, 20] }),
            { id: "c", from: [20, 38], to: [40, 38], inward: "-y", mode, drive: true },
          ],
        }),
        { frequenciesGHz: mode === 0 ? [2.5, 4, 5.5] : [9.5, 11, 12.5] },
      );
      for (const [to, from] of [
        ["a", "b"],
        ["a", "c"],
        ["b", "c"],
      ] as const) {
        const back = sOf(result, from, to);
        sOf(result, to, from).forEach((value, n) => expect(apart(value, back[n])).toBeLessThan(5e-5));
      }
      for (const from of ["a", "b", "c"]) {
        const powers = ["a", "b", "c"].map((to) =>
          sOf(result, to, from).map(([re, im]) => re ** 2 + im ** 2),
        );
        powers[0].forEach((power, n) => expect(power + powers[1][n] + powers[2][n]).toBeCloseTo(1, 3));
        for (const power of powers.flat()) expect(power).toBeGreaterThan(1e-3);
      }
      expect(result.ports?.passivity.worst).toBeCloseTo(1, 3);
    },
  );
});

describe("two driven ports", () => {
  const frequenciesGHz = [8.8, 9.5, 10.5, 11.5];

  it("are reciprocal and lossless, alike on both engines, and judged", async () => {
    // The post rings long near the narrow guide's cut-off.
    const document = step({ stop: { maxTimeNs: 120, decayDb: 100 } });
    const [wasm, reference] = await Promise.all([
      solve(document, { engine: "wasm", frequenciesGHz }),
      solve(document, { engine: "reference", frequenciesGHz }),
    ]);
    for (const result of [wasm, reference]) {
      const [through, back] = [sOf(result, "b", "a"), sOf(result, "a", "b")];
      // What reciprocity leaves is the rounding of f32.
      through.forEach((value, n) => expect(apart(value, back[n])).toBeLessThan(2e-5));
      sOf(result, "a", "a").forEach(([re, im], n) => {
        expect(re ** 2 + im ** 2 + through[n][0] ** 2 + through[n][1] ** 2).toBeCloseTo(1, 3);
        expect(Math.hypot(re, im)).toBeGreaterThan(0.05);
      });
      expect(Math.abs((result.ports?.passivity.worst ?? 0) - 1)).toBeLessThan(1e-4);
      expect(result.limits?.map(({ id, holds }) => [id, holds])).toEqual([
        ["back", true],
        ["through", true],
        ["level", true],
      ]);
    }
    for (const [to, from] of [
      ["a", "a"],
      ["b", "a"],
      ["b", "b"],
    ] as const) {
      const other = sOf(reference, to, from);
      sOf(wasm, to, from).forEach((value, n) => expect(apart(value, other[n])).toBeLessThan(1e-5));
    }
  });

  it("give each probe once a drive, per unit of the wave sent in", async () => {
    const result = await solve(step(), { engine: "wasm", frequenciesGHz });
    expect(result.probes.map(({ id, drive }) => [id, drive])).toEqual([
      ["p", "a"],
      ["flow", "a"],
      ["p", "b"],
      ["flow", "b"],
    ]);
    const flows = result.probes.filter(({ id }) => id === "flow").map(({ spectrum }) => spectrum);
    const [forward, backward] = flows.map((spectrum) =>
      spectrum && "value" in spectrum ? spectrum.value : [],
    );
    sOf(result, "b", "a").forEach(([re, im], n) => {
      const through = re ** 2 + im ** 2;
      const [sr, si] = sOf(result, "b", "b")[n];
      // Toward +x is to the left of a line drawn downward.
      expect(forward[n]).toBeCloseTo(through, 2);
      expect(backward[n]).toBeCloseTo(sr ** 2 + si ** 2 - 1, 2);
    });
  });

  it("count steps and samples on from the one run to the other, whatever the turns", async () => {
    const document = step({ stop: { maxTimeNs: 1.5, decayDb: 200 } });
    const whole = await open(document);
    expect(whole.advance(1e8)).toEqual({ kind: "ended", reason: "time" });
    expect(whole.step).toBe(whole.grid.maxSteps);
    const parts = await open(document);
    const got: number[] = [];
    let last = -1;
    for (;;) {
      const outcome = parts.advance(97);
      expect(parts.step).toBeGreaterThan(last);
      last = parts.step;
      const [trace] = parts.tracesSince(got.length);
      expect(trace.from).toBe(got.length);
      got.push(...trace.values);
      if (outcome.kind === "ended") break;
    }
    expect(got).toEqual([...whole.tracesSince(0)[0].values]);
    const timeless = (result: SolveResult): unknown => ({ ...result, timing: null });
    expect(timeless(parts.result())).toEqual(timeless(whole.result()));
  });

  it.each([0.4, 1.4])("go on from a snapshot to the same result: at %s of a leg", async (share) => {
    const document = step({ stop: { maxTimeNs: 1.5, decayDb: 200 } });
    const whole = await open(document);
    const at = Math.floor((share * whole.grid.maxSteps) / 2);
    whole.advance(at);
    const snapshot = structuredClone(whole.snapshot());
    whole.advance(1e8);
    const other = await open(document);
    other.restore(snapshot);
    expect(other.step).toBe(at);
    other.advance(1e8);
    const timeless = (result: SolveResult): unknown => ({ ...result, timing: null });
    expect(timeless(other.result())).toEqual(timeless(whole.result()));
    expect(() => other.restore({ ...snapshot, bytes: snapshot.bytes.slice(0, 300) })).toThrow(RangeError);
  });

  it("end with the leg in which they are cancelled or edited", async () => {
    const session = await open(step());
    session.advance(300);
    session.cancel();
    expect(session.advance(10)).toEqual({ kind: "ended", reason: "cancelled" });
    const result = session.result();
    expect(result.ports?.s.map(({ from }) => from)).toEqual(["a", "a"]);
    expect(result.limits?.find(({ id }) => id === "back")?.holds).toBeNull();
    const paint = [
      { kind: "rectangle", id: "r", medium: "glass", x: 20, y: 2, width: 4, height: 4 },
    ] as const;
    const edited = await open(step());
    edited.advance(100);
    const read = readScene(step({ paint: [...(step().paint ?? []), ...paint] }));
    if (!read.ok) throw new Error("the edited scene was refused");
    expect(edited.edit(read.scene)).toEqual({ kind: "applied", step: 100 });
    expect(edited.advance(1e8).kind).toBe("ended");
    const { ports, edits, probes } = edited.result();
    expect([ports, edits?.length, probes.map(({ drive }) => drive)]).toEqual([undefined, 1, ["a", "a"]]);
  });
});
