import { afterEach, describe, expect, it } from "vitest";
import { storedEnergy } from "../observers/index.js";
import type { Engine } from "../stepping/index.js";
import { loadKernel, WasmEngine } from "../stepping/index.js";
import type { Case } from "../stepping/testing.js";
import { BOX, bytesOf, filmed, OPEN, run, setupOf } from "../stepping/testing.js";
import { spawnHelper } from "./index.js";

const kernel = await loadKernel();
if (!("module" in kernel)) throw new Error(`These tests need ${kernel.missing}.`);
const { module } = kernel;

const open: Engine[] = [];
const keep = <T extends Engine>(engine: T): T => {
  open.push(engine);
  return engine;
};
afterEach(() => {
  for (const engine of open.splice(0)) engine.dispose();
});

describe.each([
  ["in constant media", undefined],
  ["in dispersive media with films", filmed],
] as const)("the bits of the wasm engine %s", (_, media) => {
  const one: Case = { polarization: "TEz", edges: OPEN, nx: 83, ny: 61, ...(media && { media }) };

  it.each([1, 2, 3, 4])("do not depend on the number of threads (%i)", (threads) => {
    const setup = setupOf(one);
    const alone = keep(new WasmEngine(module, setup));
    const expected = run(alone);
    for (const blockSteps of [undefined, 1, 3, 16]) {
      const engine = keep(
        new WasmEngine(module, setup, { threads, spawn: spawnHelper, ...(blockSteps && { blockSteps }) }),
      );
      expect(engine.threads).toBe(threads);
      expect(run(engine)).toEqual(expected);
      expect(bytesOf(engine) === bytesOf(alone)).toBe(true);
      expect(storedEnergy(engine)).toBe(storedEnergy(alone));
    }
  });

  it("do not depend on how steps are dealt out", () => {
    const setup = setupOf(one);
    const whole = keep(new WasmEngine(module, setup, { threads: 2, spawn: spawnHelper }));
    const dealt = keep(new WasmEngine(module, setup, { threads: 2, spawn: spawnHelper }));
    const records = run(whole, 600);
    const parts = [1, 2, 40, 300, 7, 250];
    let from = 0;
    for (const steps of parts) {
      expect(run(dealt, steps, from)).toEqual(records.subarray(3 * from, 3 * (from + steps)));
      from += steps;
    }
    expect(bytesOf(dealt) === bytesOf(whole)).toBe(true);
  });

  it("go on from a snapshot, and refuse one of another size", () => {
    const setup = setupOf(one);
    const whole = keep(new WasmEngine(module, setup));
    run(whole, 90);
    const saved = whole.save();
    run(whole, 90, 90);
    const other = keep(new WasmEngine(module, setup, { threads: 2, spawn: spawnHelper }));
    run(other, 13);
    other.load(saved);
    expect(other.step).toBe(90);
    run(other, 90, 90);
    expect(bytesOf(other) === bytesOf(whole)).toBe(true);
    const small = keep(new WasmEngine(module, setupOf({ ...one, nx: 20 })));
    expect(() => small.load(saved)).toThrow(/another lattice/);
  });

  it("survive many jobs of a few rows, where threads meet most often", () => {
    const setup = setupOf({ ...one, nx: 9, ny: 3, edges: BOX });
    const alone = keep(new WasmEngine(module, setup));
    const together = keep(new WasmEngine(module, setup, { threads: 3, spawn: spawnHelper, blockSteps: 1 }));
    for (let turn = 0; turn < 400; turn += 1) {
      run(alone, 9, turn);
      run(together, 9, turn);
    }
    expect(bytesOf(together) === bytesOf(alone)).toBe(true);
  });
});
