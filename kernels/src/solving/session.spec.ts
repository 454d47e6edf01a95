import { describe, expect, it } from "vitest";
import type { Scene, SceneInput } from "../scene/index.js";
import { readScene, resultSchema, SceneError } from "../scene/index.js";
import type { SolveSession } from "./index.js";
import { openSession } from "./index.js";

const sceneOf = (changes: Partial<SceneInput> = {}): Scene => {
  const document: SceneInput = {
    format: "heddle-scene",
    version: 1,
    name: "A box",
    polarization: "TMz",
    section: { widthMm: 60, heightMm: 40 },
    band: { fromGHz: 2, toGHz: 6 },
    mesh: { cellMm: 1 },
    edges: { left: "electric", right: "electric", bottom: "electric", top: "electric" },
    media: [
      { id: "lossy", name: "Lossy air", conductivity: 0.02 },
      { id: "coal", name: "Coal", conductivity: 5 },
    ],
    background: "lossy",
    sources: [{ kind: "line", id: "wire", x: 20, y: 15 }],
    probes: [{ kind: "point", id: "p", x: 30, y: 20, field: "Ez" }],
    ...changes,
  };
  const read = readScene(document);
  if (!read.ok) throw new Error(read.problems.map(({ path, sentence }) => `${path}: ${sentence}`).join("\n"));
  return read.scene;
};

const OPEN = { left: "absorbing", right: "absorbing", bottom: "magnetic", top: "electric" } as const;
const tez = (changes: Partial<SceneInput> = {}): Scene =>
  sceneOf({
    polarization: "TEz",
    edges: OPEN,
    probes: [
      { kind: "point", id: "h", x: 30, y: 20, field: "Hz" },
      { kind: "point", id: "e", x: 31, y: 22, field: "Ex" },
    ],
    ...changes,
  });
const post = { kind: "ellipse", id: "post", medium: "pec", x: 40, y: 25, rx: 6, ry: 4 } as const;
/** Metal off the mesh lines from the start: the run has the time step that more of it needs. */
const pin = { ...post, id: "pin", x: 12, y: 30, rx: 1.3, ry: 1.2 } as const;

const valuesOf = (session: SolveSession): number[][] =>
  session.tracesSince(0).map(({ values }) => [...values]);

describe("a session", () => {
  it("runs a lossy box until its energy has decayed and gives a spectrum per unit source", async () => {
    const session = await openSession(sceneOf());
    expect(session.advance(1e7)).toEqual({ kind: "ended", reason: "decay" });
    expect(session.decayDb).toBeLessThanOrEqual(-60);
    const result = session.result();
    expect(resultSchema.safeParse(result).success).toBe(true);
    const spectrum = result.probes[0].spectrum;
    if (!spectrum || !("re" in spectrum)) throw new Error("no complex spectrum");
    expect(spectrum.GHz).toHaveLength(401);
    // 3 GHz at (30, 20): −601.35 − 5838.67j V/m per A, the modal sum of the rectangle's Green function (R. E. Collin, Field
    // Theory of Guided Waves, 2nd ed. (1991), sec. 2.6).
    const index = spectrum.GHz.findIndex((frequency) => Math.abs(frequency - 3) < 1e-9);
    const re = spectrum.re[index] ?? Number.NaN;
    const im = spectrum.im[index] ?? Number.NaN;
    expect(Math.hypot(re + 601.3476635413447, im + 5838.668692590273) / 5869.5).toBeLessThan(0.01);
  });

  it("does not depend on how its steps are dealt out", async () => {
    const one = await openSession(tez());
    const many = await openSession(tez());
    one.advance(300);
    for (const steps of [1, 7, 64, 100, 128]) many.advance(steps);
    expect(valuesOf(many)).toEqual(valuesOf(one));
  });

  it.each([{ engine: "wasm" }, { precision: "f64" }, { engine: "reference", precision: "f32" }] as const)(
    "goes on bit for bit from a snapshot, layers and edits included (%j)",
    async (options) => {
      const whole = await openSession(tez({ paint: [post] }), options);
      whole.advance(150);
      whole.edit(tez({ paint: [post, { ...post, id: "coal", medium: "coal", x: 20 }] }));
      whole.advance(50);
      const snapshot = structuredClone(whole.snapshot());
      whole.advance(200);
      const other = await openSession(tez({ paint: [post] }), options);
      other.restore(snapshot);
      expect(other.step).toBe(200);
      expect(other.edits).toEqual(whole.edits);
      other.advance(200);
      expect(valuesOf(other)).toEqual(valuesOf(whole));
      expect(other.decayDb).toBe(whole.decayDb);
    },
  );

  it("refuses a snapshot of another scene, of another precision, and a damaged one", async () => {
    const session = await openSession(sceneOf());
    session.advance(10);
    const snapshot = session.snapshot();
    const other = await openSession(sceneOf({ name: "Another" }));
    expect(() => other.restore(snapshot)).toThrow(/another scene/);
    const double = await openSession(sceneOf(), { precision: "f64" });
    expect(() => double.restore(snapshot)).toThrow(/precision/);
    const single = await openSession(sceneOf(), { engine: "reference", precision: "f32" });
    expect(() => single.restore(snapshot)).toThrow(/engine/);
    expect(() => session.restore({ ...snapshot, bytes: snapshot.bytes.slice(0, 500) })).toThrow(RangeError);
  });

  it("takes an edit that paints as if the paint had always been there, where nothing has arrived yet", async () => {
    const painted = tez({ paint: [pin, post] });
    const edited = await openSession(tez({ paint: [pin] }));
    expect(edited.edit(painted)).toEqual({ kind: "applied", step: 0 });
    edited.advance(300);
    const clean = await openSession(painted);
    clean.advance(300);
    expect(valuesOf(edited)).toEqual(valuesOf(clean));
    // And back: removing it restores every coefficient.
    const back = await openSession(painted);
    back.edit(tez({ paint: [pin] }));
    back.advance(300);
    const plain = await openSession(tez({ paint: [pin] }));
    plain.advance(300);
    expect(valuesOf(back)).toEqual(valuesOf(plain));
  });

  it("takes an edit whose cut metal would have a smaller time step in a new run, and stays stable", async () => {
    const session = await openSession(tez());
    expect(session.edit(tez({ paint: [post] }))).toEqual({ kind: "applied", step: 0 });
    expect(session.grid.courant).toBe(0.99);
    const plain = await openSession(tez());
    const largest = (of: SolveSession): number => {
      expect(of.advance(6_000).kind).not.toBe("failed");
      return Math.max(...of.tracesSince(0).flatMap(({ values }) => Array.from(values, Math.abs)));
    };
    expect(largest(session)).toBeLessThan(10 * largest(plain));
  });

  it("says when metal asked for a smaller time step", async () => {
    const warningsOf = async (scene: Scene): Promise<string> => {
      const session = await openSession(scene);
      session.advance(10);
      session.cancel();
      return session.result().quality.warnings.join(" ");
    };
    expect(await warningsOf(tez({ paint: [post] }))).toMatch(/0\.82 of the stability limit/);
    expect(await warningsOf(tez())).not.toMatch(/stability limit/);
  });

  it("lets painted absorber draw the field down, and an edited run has no spectra", async () => {
    const tone = { kind: "tone", GHz: 4 } as const;
    const driven = { sources: [{ kind: "line", id: "wire", x: 10, y: 20, waveform: tone }] } as const;
    const scene = (paint: SceneInput["paint"]): Scene =>
      sceneOf({
        background: "air",
        sources: [...driven.sources],
        paint,
        edges: { ...OPEN, bottom: "electric" },
      });
    const session = await openSession(scene([]));
    session.advance(2000);
    const before = Math.max(...session.tracesSince(1800)[0].values.map(Math.abs));
    const wall = { kind: "rectangle", id: "w", medium: "coal", x: 18, y: 0, width: 8, height: 40 } as const;
    expect(session.edit(scene([wall])).kind).toBe("applied");
    session.advance(1000);
    const after = Math.max(...session.tracesSince(2800)[0].values.map(Math.abs));
    expect(after).toBeLessThan(0.2 * before);
    session.cancel();
    const result = session.result();
    expect(result.stopped.reason).toBe("cancelled");
    expect(result.edits).toHaveLength(1);
    expect(result.probes[0].spectrum).toBeNull();
    expect(result.quality.warnings.join(" ")).toMatch(/edited/);
  });

  it("refuses an edit of what a run keeps, with the path", async () => {
    const session = await openSession(sceneOf());
    const outcome = session.edit(sceneOf({ section: { widthMm: 61, heightMm: 40 }, mesh: { cellMm: 0.5 } }));
    if (outcome.kind !== "refused") throw new Error("the edit was applied");
    expect(outcome.problems.map(({ path }) => path)).toEqual(["section", "mesh"]);
    expect(session.edits).toHaveLength(0);
  });

  it("judges a limit on a probe's level, and none on a trace that was cut off", async () => {
    const limits = (value: number): SceneInput["limits"] => [
      {
        id: "l",
        name: "Leak",
        sense: "below",
        points: [
          [2, value],
          [6, value],
        ],
        of: { probe: "p" },
      },
    ];
    const judge = async (value: number, maxTimeNs: number) => {
      const session = await openSession(sceneOf({ limits: limits(value), stop: { maxTimeNs, decayDb: 60 } }));
      session.advance(1e6);
      return session.result();
    };
    const kept = await judge(120, 100);
    expect(kept.limits?.[0]).toMatchObject({ id: "l", holds: true });
    const margin = kept.limits?.[0].margin ?? Number.NaN;
    const broken = await judge(120 - margin - 1, 100);
    expect(broken.limits?.[0].holds).toBe(false);
    expect(broken.limits?.[0].margin).toBeCloseTo(-1, 9);
    const cut = await judge(120, 1.5);
    expect(cut.limits?.[0]).toMatchObject({ holds: null, margin: null });
    expect(cut.quality.warnings.join(" ")).toMatch(/Run longer/);
  });

  it("says so where a scene cannot be run, with every problem", async () => {
    const scene = sceneOf({ sources: [] });
    await expect(openSession(scene)).rejects.toThrow(SceneError);
  });

  it("ends as failed, naming the source, where a field passes every bound", async () => {
    const loud = { kind: "samples" as const, stepNs: 0.01, values: [0, 1e300, -1e300, 1e300] };
    const scene = sceneOf({
      sources: [{ kind: "line", id: "wire", x: 20, y: 15, amplitude: 1e12, waveform: loud }],
    });
    const session = await openSession(scene);
    const outcome = session.advance(1000);
    if (outcome.kind !== "failed") throw new Error(`it ended as ${outcome.kind}`);
    expect(outcome.failure.sentence).toContain('"wire"');
  });

  it("samples every quantity that it offers, never finer than its lattice", async () => {
    for (const scene of [sceneOf({ paint: [post] }), tez({ paint: [post] })]) {
      const session = await openSession(scene);
      session.advance(200);
      for (const quantity of session.quantities) {
        const small = session.sampleField({ quantity, width: 17, height: 13 });
        const full = session.sampleField({ quantity, width: 1000, height: 1000 });
        expect([full.width, full.height]).toEqual([60, 40]);
        const mean = (values: Float32Array): number =>
          values.reduce((sum, value) => sum + value, 0) / values.length;
        const scale = full.values.reduce((largest, value) => Math.max(largest, Math.abs(value)), 0);
        expect(scale).toBeGreaterThan(0);
        expect(Math.abs(mean(small.values) - mean(full.values)) / scale).toBeLessThan(1e-5);
      }
    }
  });

  it("reads a tone's phasor at its own frequency, the same as a pulse's spectrum there", async () => {
    const tone = await openSession(
      sceneOf({
        sources: [{ kind: "line", id: "wire", x: 20, y: 15, waveform: { kind: "tone", GHz: 3 } }],
        stop: { maxTimeNs: 14, decayDb: 60 },
      }),
    );
    expect(tone.advance(1e6)).toEqual({ kind: "ended", reason: "time" });
    const pulse = await openSession(sceneOf({ stop: { maxTimeNs: 100, decayDb: 80 } }), {
      frequenciesGHz: [3],
    });
    pulse.advance(1e6);
    const read = (session: SolveSession): [number, number] => {
      const spectrum = session.result().probes[0].spectrum;
      if (!spectrum || !("re" in spectrum)) throw new Error("no complex spectrum");
      expect(spectrum.GHz).toEqual([3]);
      return [spectrum.re[0] ?? Number.NaN, spectrum.im[0] ?? Number.NaN];
    };
    const [a, b] = [read(tone), read(pulse)];
    expect(Math.hypot(a[0] - b[0], a[1] - b[1]) / Math.hypot(...b)).toBeLessThan(2e-4);
  }, 20_000);
});
