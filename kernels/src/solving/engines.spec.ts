import { describe, expect, it } from "vitest";
import { spawnHelper } from "../threads/index.js";
import type { Scene } from "../scene/index.js";
import { readScene } from "../scene/index.js";
import { openSession } from "./index.js";

const sceneOf = (size: number): Scene => {
  const read = readScene({
    format: "heddle-scene",
    version: 1,
    name: "A box with a post",
    polarization: "TMz",
    section: { widthMm: size, heightMm: size },
    band: { fromGHz: 2, toGHz: 8 },
    mesh: { cellMm: 1 },
    edges: { left: "absorbing", right: "electric", bottom: "magnetic", top: "absorbing" },
    media: [{ id: "wet", name: "Wet wood", relativePermittivity: 4, conductivity: 0.1 }],
    paint: [
      {
        kind: "ellipse",
        id: "post",
        medium: "wet",
        x: 0.6 * size,
        y: 0.5 * size,
        rx: 0.2 * size,
        ry: 0.1 * size,
      },
    ],
    sources: [{ kind: "line", id: "wire", x: 0.3 * size, y: 0.4 * size }],
    probes: [{ kind: "point", id: "p", x: 0.8 * size, y: 0.6 * size, field: "Ez" }],
  });
  if (!read.ok) throw new Error(read.problems.map(({ path, sentence }) => `${path}: ${sentence}`).join("\n"));
  return read.scene;
};

const without = { kernel: () => Promise.resolve({ missing: "shared memory" }) };

describe("the engine of a session", () => {
  it("is the wasm engine, and the reference engine where float64 is asked for", async () => {
    const [usual, exact] = [
      await openSession(sceneOf(20)),
      await openSession(sceneOf(20), { precision: "f64" }),
    ];
    expect(usual.result().solver).toMatchObject({ engine: "wasm", precision: "f32" });
    expect(exact.result().solver).toMatchObject({ engine: "reference", precision: "f64" });
    await expect(openSession(sceneOf(20), { engine: "wasm", precision: "f64" })).rejects.toThrow(/f32/);
  });

  it("is the reference engine where the platform lacks something, said once", async () => {
    const heard: string[] = [];
    const log = (sentence: string): void => void heard.push(sentence);
    for (let n = 0; n < 2; n += 1) {
      const session = await openSession(sceneOf(20), { ...without, log });
      expect(session.result().solver).toMatchObject({ engine: "reference", precision: "f64" });
    }
    expect(heard).toEqual([expect.stringMatching(/lacks shared memory.*reference engine/)]);
    await expect(openSession(sceneOf(20), { ...without, engine: "wasm" })).rejects.toThrow(/shared memory/);
  });

  it("gives the same document, but for its timing, with any number of threads", async () => {
    const documents: string[] = [];
    for (const threads of [1, 2, 3]) {
      const session = await openSession(sceneOf(280), { threads, spawnHelper });
      session.advance(700);
      session.cancel();
      const { timing, ...rest } = session.result();
      expect(timing.threads).toBe(threads);
      documents.push(JSON.stringify(rest));
      session.dispose();
    }
    expect(documents[1]).toBe(documents[0]);
    expect(documents[2]).toBe(documents[0]);
  });

  it("gives the reference engine's traces and energy to single precision", async () => {
    const fast = await openSession(sceneOf(120));
    const exact = await openSession(sceneOf(120), { engine: "reference" });
    for (const session of [fast, exact]) session.advance(640);
    const [a, b] = [fast, exact].map((session) => session.tracesSince(0)[0].values);
    const largest = b.reduce((most, value) => Math.max(most, Math.abs(value)), 0);
    const worst = a.reduce((most, value, n) => Math.max(most, Math.abs(value - b[n])), 0);
    expect(largest).toBeGreaterThan(0);
    expect(worst / largest).toBeLessThan(1e-5);
    expect(fast.decayDb).toBeCloseTo(exact.decayDb, 4);
  });
});
