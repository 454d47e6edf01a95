import { describe, expect, it } from "vitest";
import type { Scene, SceneInput } from "../scene/index.js";
import { readScene } from "../scene/index.js";
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
    media: [{ id: "lossy", name: "Lossy air", conductivity: 0.02 }],
    background: "lossy",
    sources: [{ kind: "line", id: "wire", x: 20, y: 15 }],
    probes: [{ kind: "point", id: "p", x: 30, y: 20, field: "Ez" }],
    ...changes,
  };
  const read = readScene(document, { purpose: "run" });
  if (!read.ok) throw new Error(read.problems.map(({ path, sentence }) => `${path}: ${sentence}`).join("\n"));
  return read.scene;
};

const run = async (scene: Scene) => {
  const session = await openSession(scene);
  const outcome = session.advance(1e7);
  return { session, outcome };
};

describe("a session", () => {
  it("runs a lossy box until its energy has decayed and gives a spectrum per unit source", async () => {
    const { session, outcome } = await run(sceneOf());
    expect(outcome).toEqual({ kind: "ended", reason: "decay" });
    expect(session.decayDb).toBeLessThanOrEqual(-60);
    const result = session.result();
    const spectrum = result.probes[0].spectrum;
    if (!spectrum || !("re" in spectrum)) throw new Error("no complex spectrum");
    expect(spectrum.GHz).toHaveLength(401);
    // 3 GHz, point (30, 20): −601.35 − 5838.67j V/m per A; modal sum of the rectangle's Green function.
    const index = spectrum.GHz.findIndex((frequency) => Math.abs(frequency - 3) < 1e-9);
    const re = spectrum.re[index] ?? Number.NaN;
    const im = spectrum.im[index] ?? Number.NaN;
    expect(Math.hypot(re + 601.3476635413447, im + 5838.668692590273) / 5869.5).toBeLessThan(0.01);
  });
});
