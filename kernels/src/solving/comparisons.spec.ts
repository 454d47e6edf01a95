/** What is made of two runs: figures at zero cell size, and shielding. */
import { describe, expect, it } from "vitest";
import type { Scene, SceneInput, SolveResult } from "../scene/index.js";
import { meshPromise, readScene, resolveScene, resultSchema, SceneError } from "../scene/index.js";
import type { SessionOptions } from "./index.js";
import { comparedScenes, openSession } from "./index.js";
import { withShielding } from "./shielding.js";
import { refinedScene, withFinerMesh } from "./two-mesh.js";

const sceneOf = (changes: Partial<SceneInput>): Scene => {
  const read = readScene({
    format: "heddle-scene",
    version: 1,
    name: "A box",
    polarization: "TMz",
    section: { widthMm: 60, heightMm: 40 },
    band: { fromGHz: 4, toGHz: 8 },
    mesh: { cellMm: 2 },
    edges: { left: "electric", right: "electric", bottom: "electric", top: "electric" },
    sources: [{ kind: "line", id: "wire", x: 17, y: 13 }],
    probes: [{ kind: "point", id: "p", x: 41, y: 22, field: "Ez" }],
    stop: { maxTimeNs: 60, decayDb: 60 },
    ...changes,
  });
  if (!read.ok) throw new Error(read.problems.map(({ path, sentence }) => `${path}: ${sentence}`).join("\n"));
  return read.scene;
};

const solve = async (scene: Scene, options: SessionOptions = {}): Promise<SolveResult> => {
  const session = await openSession(scene, options);
  try {
    expect(session.advance(1e7)).toMatchObject({ kind: "ended" });
    return session.result();
  } finally {
    session.dispose();
  }
};

describe("two meshes", () => {
  // f = (c/2)√((m/a)² + (n/b)²): D. M. Pozar, Microwave Engineering, 4th ed., sec. 6.3, with nothing varying along z.
  it("give the frequency of a box to a twentieth of the coarse mesh's error, within the stated uncertainty", async () => {
    const scene = sceneOf({});
    const exact = 0.299_792_458 * 500 * Math.hypot(1 / 60, 1 / 40);
    const coarse = await solve(scene);
    const result = await solve(scene, { twoMesh: true });
    expect(resultSchema.safeParse(result).error?.message).toBeUndefined();
    expect(result.extrapolation).toMatchObject({ ratio: 2, order: 2, steady: true });
    const nearest = (list: readonly { GHz: number }[]): number =>
      list.reduce((best, { GHz }) => (Math.abs(GHz - exact) < Math.abs(best - exact) ? GHz : best), 0);
    const raw = Math.abs(nearest(coarse.resonances ?? []) - exact);
    const found = result.extrapolation?.resonances ?? [];
    const best = found.find(({ GHz }) => GHz === nearest(found));
    expect(raw / exact).toBeGreaterThan(1e-4);
    expect(Math.abs((best?.GHz ?? 0) - exact)).toBeLessThan(raw / 20);
    expect(best?.ghzUncertainty).toBeGreaterThan(Math.abs((best?.GHz ?? 0) - exact));
    // A resonance stays the same one where another probe shows it better on the finer mesh.
    const fine = await solve(refinedScene(scene));
    const elsewhere = (fine.resonances ?? []).map((one) => ({ ...one, probe: "other" }));
    const other = withFinerMesh(scene, coarse, { ...fine, resonances: elsewhere });
    expect(other.extrapolation?.resonances).toEqual(found.map((one) => ({ ...one, probe: "other" })));
  });

  it("take the order from the geometry", () => {
    const order = (changes: Partial<SceneInput>): number =>
      meshPromise(resolveScene(sceneOf(changes)), 30, 20).order;
    const area = { id: "a", x: 20, y: 10 };
    const post = { ...area, kind: "ellipse", rx: 4, ry: 4, medium: "pec" } as const;
    const block = { ...area, kind: "rectangle", width: 10, height: 10, medium: "pec" } as const;
    expect(order({ paint: [post] })).toBe(2);
    expect(order({ paint: [block] })).toBeCloseTo(4 / 3, 12);
    // A block over the whole height of the right end has no corner in the field.
    expect(order({ paint: [{ ...block, x: 50, y: 0, height: 40 }] })).toBe(2);
    expect(order({ paint: [{ ...block, medium: "air" }], background: "pec" })).toBe(2);
    expect(order({ paint: [post], mesh: { cellMm: 2, metal: "staircase" } })).toBe(1);
    const wall = (...points: [number, number][]) => ({ kind: "wall", id: "w", points }) as const;
    expect(order({ paint: [wall([30, 0], [30, 20])] })).toBeCloseTo(4 / 3, 12);
    expect(order({ paint: [wall([30, 0], [30, 40])] })).toBe(2);
    expect(order({ paint: [wall([30, 0], [30, 20], [40, 20])] })).toBe(1);
    const glass = [{ id: "glass", name: "Glass", relativePermittivity: 4 }];
    expect(order({ paint: [{ ...block, medium: "glass" }], media: glass })).toBe(2);
    const across = { polarization: "TEz", probes: [], media: glass } satisfies Partial<SceneInput>;
    expect(order({ ...across, paint: [{ ...block, medium: "glass" }] })).toBe(1.5);
  });
});

describe("an error bar of two meshes", () => {
  // An iris whose corners lie off the lines of both meshes, and of the third that stands for the truth.
  it("covers a mesh of a third of the cell, at every frequency", { timeout: 60_000 }, async () => {
    const post = (id: string, y: number) =>
      ({
        kind: "rectangle",
        id,
        x: 20.3,
        y,
        width: 2.1,
        height: 7.3,
        medium: "pec",
      }) as const;
    const iris = (cellMm: number): Scene =>
      sceneOf({
        section: { widthMm: 43, heightMm: 22.86 },
        band: { fromGHz: 8.2, toGHz: 12.4 },
        mesh: { cellMm },
        edges: { left: "absorbing", right: "absorbing", bottom: "electric", top: "electric" },
        paint: [post("low", 0), post("high", 15.56)],
        sources: [],
        probes: [],
        ports: [
          { id: "in", from: [8, 0], to: [8, 22.86], inward: "+x", mode: 1, drive: true },
          { id: "out", from: [35, 0], to: [35, 22.86], inward: "-x", mode: 1 },
        ],
        stop: { maxTimeNs: 6, decayDb: 80 },
      });
    const scene = iris(0.6);
    const result = await solve(scene, { twoMesh: true });
    const truth = await solve(iris(0.2));
    expect(result.extrapolation?.steady).toBe(false);
    let widestBar = 0;
    for (const { to, re, im, uncertainty } of result.extrapolation?.s ?? []) {
      const finer = truth.ports?.s.find((one) => one.to === to);
      re.forEach((value, n) => {
        const off = Math.hypot((value ?? 9) - (finer?.re[n] ?? 0), (im[n] ?? 9) - (finer?.im[n] ?? 0));
        expect(off).toBeLessThan(uncertainty[n] ?? 0);
        widestBar = Math.max(widestBar, uncertainty[n] ?? 9);
      });
    }
    expect(result.extrapolation?.s).toHaveLength(2);
    expect(widestBar).toBeLessThan(0.03);
  });
});

describe("shielding", () => {
  it("is the field without the marked patches over that with them", async () => {
    const lid = {
      kind: "rectangle",
      id: "lid",
      x: 30,
      y: 0,
      width: 4,
      height: 30,
      medium: "pec",
      shield: true,
    } as const;
    const kept = { name: "Shielding", of: { shielding: "p" } } as const;
    const scene = sceneOf({
      paint: [lid],
      // Between the cut-offs at 3.75 and 7.5 GHz, where an open guide would ring without end.
      band: { fromGHz: 5, toGHz: 7 },
      edges: { left: "absorbing", right: "absorbing", bottom: "electric", top: "electric" },
      limits: [
        {
          ...kept,
          id: "much",
          sense: "above",
          points: [
            [5, 200],
            [7, 200],
          ],
        },
        { ...kept, id: "some", sense: "above", points: [[6, 3]] },
      ],
    });
    const [bare] = comparedScenes(scene, { shielding: true });
    expect(bare.paint).toEqual([]);
    const [within, without] = [await solve(scene), await solve(bare)];
    const unjudged = { holds: null, margin: null, atGHz: null, uncertainty: null };
    expect(within.limits).toEqual([
      { id: "much", ...unjudged },
      { id: "some", ...unjudged },
    ]);
    const warned = ({ quality }: SolveResult): boolean => quality.warnings.join().includes("--shielding");
    expect(warned(within)).toBe(true);
    const result = await solve(scene, { shielding: true });
    expect(warned(result)).toBe(false);
    expect(resultSchema.safeParse(result).error?.message).toBeUndefined();
    const [{ probe, GHz, dB }] = result.shielding ?? [];
    expect([probe, GHz.length, dB.length]).toEqual(["p", 401, 401]);
    const level = ({ probes }: SolveResult, n: number): number => {
      const spectrum = probes[0].spectrum;
      if (!spectrum || !("re" in spectrum)) throw new Error("There is no spectrum.");
      return 20 * Math.log10(Math.hypot(spectrum.re[n] ?? 0, spectrum.im[n] ?? 0));
    };
    expect(dB[200]).toBeCloseTo(level(without, 200) - level(within, 200), 9);
    expect(dB[200]).toBeGreaterThan(3);
    const least = Math.min(...dB.map((value) => value ?? Number.NaN));
    expect(result.limits).toEqual([
      { id: "much", holds: false, margin: least - 200, atGHz: GHz[dB.indexOf(least)], uncertainty: null },
      { id: "some", holds: true, margin: (dB[200] ?? 0) - 3, atGHz: 6, uncertainty: null },
    ]);
    // Nothing is judged on a spectrum that its run was too short for.
    const cut = {
      ...without,
      probes: without.probes.map((one) => ({
        ...one,
        spectrum: one.spectrum && { ...one.spectrum, unfinished: true },
      })),
    };
    expect(withShielding(scene, within, cut).limits).toEqual(within.limits);
    await expect(openSession(bare, { shielding: true })).rejects.toThrow(SceneError);
  });
});

describe("a run that is compared with others", () => {
  const shield = {
    kind: "rectangle",
    id: "lid",
    x: 30,
    y: 0,
    width: 4,
    height: 30,
    medium: "pec",
    shield: true,
  } as const;
  const scene = sceneOf({ paint: [shield], stop: { maxTimeNs: 3, decayDb: 60 } });
  /** All but what says how the figures came about. */
  const figuresOf = (result: SolveResult) => ({ ...result, timing: null, quality: null });

  it("keeps its own figures and traces, whatever it is compared with", async () => {
    const alone = await solve(scene);
    const session = await openSession(scene, { twoMesh: true, shielding: true });
    expect(session.advance(alone.grid.steps + 100)).toEqual({ kind: "running" });
    const [trace] = session.tracesSince(0);
    expect(Array.from(trace.values)).toEqual(alone.probes[0].trace.values);
    const [later] = session.tracesSince(alone.grid.steps);
    expect([later.from, later.values.length]).toEqual([alone.grid.steps, 0]);
    expect(session.edit(scene)).toMatchObject({ kind: "refused" });
    const look = { quantity: "Ez", width: 8, height: 8 } as const;
    const field = session.sampleField(look);
    expect(field.step).toBe(alone.grid.steps);
    const saved = session.snapshot();
    expect(session.advance(1e7)).toMatchObject({ kind: "ended", reason: "time" });
    const result = session.result();
    const { extrapolation, shielding, ...rest } = figuresOf(result);
    expect(rest).toEqual(figuresOf(alone));
    expect(extrapolation?.probes).toHaveLength(1);
    expect(shielding).toHaveLength(1);
    // The field stays that of the scene itself.
    expect(session.sampleField(look)).toEqual(field);
    session.restore(saved);
    expect(session.sampleField(look)).toEqual(field);
    session.advance(1e7);
    expect(figuresOf(session.result())).toEqual(figuresOf(result));
    session.dispose();
  });

  it("says so where it was stopped before it was compared", async () => {
    const session = await openSession(scene, { twoMesh: true });
    session.advance(session.grid.maxSteps / 2);
    session.cancel();
    expect(session.advance(1)).toEqual({ kind: "ended", reason: "cancelled" });
    const result = session.result();
    expect(result.extrapolation).toBeUndefined();
    expect(result.stopped.reason).toBe("time");
    expect(result.quality.warnings.join(" ")).toMatch(/stopped before its finer mesh was done/);
    session.dispose();
  });
});
