import { afterEach, describe, expect, it } from "vitest";
import { buildLattice, ETA0 } from "../../lattice/index.js";
import type { Lattice } from "../../lattice/index.js";
import type { SectionMedia } from "../../media/index.js";
import { storedEnergy } from "../../observers/index.js";
import type { CoefficientSource, DrivePoint, Engine } from "../index.js";
import { loadKernel, ReferenceEngine, rowCoefficients, WasmEngine } from "../index.js";
import type { Case } from "../testing.js";
import {
  BOX,
  bytesOf,
  dispersive,
  edgesOf,
  empty,
  filmed,
  OPEN,
  run,
  setupOf,
  signalsFor,
  STEPS,
  uncoupled,
} from "../testing.js";

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

const largest = (values: ArrayLike<number>): number => {
  let scale = 0;
  for (let k = 0; k < values.length; k += 1) scale = Math.max(scale, Math.abs(values[k]));
  return scale;
};

const difference = (a: ArrayLike<number>, b: ArrayLike<number>): number => {
  let worst = 0;
  for (let k = 0; k < a.length; k += 1) worst = Math.max(worst, Math.abs(a[k] - b[k]));
  return worst;
};

/**
 * One rounding of a float32 is 2⁻²⁴ of a value at most and half of that on average; half a dozen are made in a step, and they add
 * up like a random walk, of which this is six deviations.
 */
const roundings = (steps: number): number => 6 * Math.sqrt(6 * steps) * 2 ** -25;

const FIELDS = ["f", "gx", "gy"] as const;

/** The largest value of a wave that is as strong as what the fields hold, in the units of each array. */
const waveScale = ({ lattice, fields }: Engine): Record<(typeof FIELDS)[number], number> => {
  const { dx, dy, polarization } = lattice;
  const admittance = polarization === "TMz" ? 1 / ETA0 : ETA0;
  const units = { f: 1, gx: admittance * dx, gy: admittance * dy };
  const strength = Math.max(...FIELDS.map((field) => largest(fields[field]) / units[field]));
  return { f: strength, gx: strength * units.gx, gy: strength * units.gy };
};

/**
 * Runs both and compares the fields every 30 steps. The measure is the strongest wave so far: what has left through an absorbing
 * edge leaves its roundings behind.
 */
const expectSame = (fast: Engine, slow: Engine, steps = STEPS): void => {
  let scale = waveScale(slow);
  for (let from = 0; from < steps; from += 30) {
    const [got, expected] = [run(fast, 30, from), run(slow, 30, from)];
    const now = waveScale(slow);
    if (now.f > scale.f) scale = now;
    for (const field of FIELDS) {
      expect(difference(fast.fields[field], slow.fields[field])).toBeLessThan(
        scale[field] * roundings(steps),
      );
    }
    expectRecords(got, expected, scale, roundings(steps));
  }
  expect(scale.f).toBeGreaterThan(0);
};

/** The taps of `setupOf`, with the weights they have there. */
const expectRecords = (
  got: Float64Array,
  expected: Float64Array,
  scale: Readonly<Record<"f" | "gx" | "gy", number>>,
  tolerance: number,
): void => {
  const limits = [scale.f, 2 * scale.gx, 3 * scale.gy];
  limits.forEach((limit, n) => {
    const of = (all: Float64Array): Float64Array => all.filter((_, index) => index % 3 === n);
    expect(difference(of(got), of(expected))).toBeLessThan(limit * tolerance);
  });
};

const CASES: (Case & { name: string })[] = (["TMz", "TEz"] as const).flatMap((polarization) => [
  { name: "box of air", polarization, edges: BOX, nx: 37, ny: 23, media: empty },
  {
    name: "one cell",
    polarization,
    edges: edgesOf("magnetic", "absorbing", "magnetic", "magnetic"),
    nx: 1,
    ny: 1,
    media: empty,
  },
  { name: "painted box", polarization, edges: BOX, nx: 61, ny: 47 },
  { name: "wide painted box", polarization, edges: BOX, nx: 301, ny: 9 },
  {
    name: "magnetic edges",
    polarization,
    edges: edgesOf("magnetic", "electric", "magnetic", "magnetic"),
    nx: 35,
    ny: 64,
  },
  { name: "layer left", polarization, edges: { ...BOX, left: "absorbing" as const }, nx: 53, ny: 31 },
  { name: "layer right", polarization, edges: { ...BOX, right: "absorbing" as const }, nx: 54, ny: 31 },
  { name: "layer below", polarization, edges: { ...BOX, bottom: "absorbing" as const }, nx: 55, ny: 31 },
  { name: "layer above", polarization, edges: { ...BOX, top: "absorbing" as const }, nx: 56, ny: 31 },
  { name: "layers all round", polarization, edges: OPEN, nx: 67, ny: 43 },
  {
    name: "layers and magnetic",
    polarization,
    edges: edgesOf("absorbing", "magnetic", "magnetic", "absorbing"),
    nx: 30,
    ny: 7,
  },
  { name: "poles in a box", polarization, edges: BOX, nx: 61, ny: 47, media: dispersive },
  { name: "poles and layers all round", polarization, edges: OPEN, nx: 67, ny: 43, media: dispersive },
  {
    name: "poles, layers and magnetic",
    polarization,
    edges: edgesOf("magnetic", "absorbing", "absorbing", "magnetic"),
    nx: 41,
    ny: 19,
    media: dispersive,
  },
  { name: "films in a box", polarization, edges: BOX, nx: 61, ny: 47, media: filmed },
  { name: "films and layers all round", polarization, edges: OPEN, nx: 67, ny: 43, media: filmed },
  {
    name: "films, layers and magnetic",
    polarization,
    edges: edgesOf("magnetic", "absorbing", "absorbing", "magnetic"),
    nx: 41,
    ny: 19,
    media: filmed,
  },
  {
    name: "poles in conformal metal",
    polarization,
    edges: { ...BOX, left: "magnetic" as const },
    nx: 51,
    ny: 38,
    media: (lattice: Lattice): SectionMedia => ({ ...dispersive(lattice), metal: "conformal" }),
  },
]);

describe("the wasm engine against the reference", () => {
  it.each(CASES)("$polarization, $name", (one) => {
    const setup = setupOf(one);
    for (const precision of ["f64", "f32"] as const) {
      const fast = keep(new WasmEngine(module, setup));
      const slow = new ReferenceEngine(setup, precision);
      expectSame(fast, slow);
      expect(fast.step).toBe(STEPS);
      const [own, other] = [rowCoefficients(setup.lattice.stride), rowCoefficients(setup.lattice.stride)];
      fast.readCoefficients(1, own);
      slow.readCoefficients(1, other);
      expect(difference(own.bGx, other.bGx)).toBeLessThan(largest(other.bGx) * 2 ** -23);
    }
  });

  it.each(["TMz", "TEz"] as const)("has the same energy (%s)", (polarization) => {
    const setup = setupOf({ polarization, edges: OPEN, nx: 77, ny: 150 });
    const fast = keep(new WasmEngine(module, setup));
    const slow = new ReferenceEngine(setup, "f64");
    run(fast, 60);
    run(slow, 60);
    expect(Math.abs(storedEnergy(fast) / storedEnergy(slow) - 1)).toBeLessThan(2 * roundings(60));
  });

  it.each(["TMz", "TEz"] as const)("on coefficients of no order at all (%s)", (polarization) => {
    const setup = setupOf({ polarization, edges: OPEN, nx: 45, ny: 33 });
    let state = 7;
    const random = (): number => {
      state = (state * 48271) % 2147483647;
      return state / 2147483647;
    };
    const { coefficients, lattice } = setup;
    const rows = Array.from({ length: lattice.rows + 2 }, (_, j) => {
      const row = rowCoefficients(lattice.stride);
      coefficients(j, row);
      for (const values of [row.aF, row.aGx, row.aGy])
        values.forEach((a, i) => (values[i] = a * (1 - 0.1 * random())));
      for (const values of [row.bF, row.bGx, row.bGy])
        values.forEach((b, i) => (values[i] = b * (1 - 0.3 * random())));
      return row;
    });
    const source: CoefficientSource = (j, out) => {
      for (const name of ["aF", "bF", "aGx", "bGx", "aGy", "bGy"] as const) out[name].set(rows[j][name]);
    };
    const fast = keep(new WasmEngine(module, { ...setup, coefficients: source }));
    const slow = new ReferenceEngine({ ...setup, coefficients: source }, "f32");
    expectSame(fast, slow, 60);
    const [a, b] = [rowCoefficients(lattice.stride), rowCoefficients(lattice.stride)];
    for (let j = 0; j <= lattice.rows; j += 1) {
      fast.readCoefficients(j, a);
      slow.readCoefficients(j, b);
      if (j === 0) for (const values of [b.aF, b.bF]) values.fill(0);
      for (const values of [b.aF, b.bF]) values[0] = 0;
      expect(a).toEqual(b);
    }
  });

  it.each(["TMz", "TEz"] as const)("on drives of gx and gy in and between media (%s)", (polarization) => {
    const setup = setupOf({ polarization, edges: OPEN, nx: 50, ny: 41 });
    const { rows, columns, dx, dy } = setup.lattice;
    const strength = polarization === "TMz" ? 1 : 1e-3;
    const drives: DrivePoint[] = [];
    for (let n = 14; n < 46; n += 1) {
      drives.push({ field: "gy", row: n, column: 22, weight: strength * dy, signal: 0 });
      drives.push({ field: "gx", row: 25, column: n, weight: -strength * dx, signal: 1 });
      drives.push({ row: n, column: 23, weight: 0.01, signal: 1 });
    }
    const fast = keep(new WasmEngine(module, { ...setup, drives }));
    expectSame(fast, new ReferenceEngine({ ...setup, drives }, "f64"));
    for (const [row, column] of [
      [3, 30],
      [rows - 2, 30],
      [30, 12],
      [30, columns - 3],
    ] as const) {
      const inLayer: DrivePoint = { field: "gy", row, column, weight: 1, signal: 0 };
      expect(() => fast.setDrives([inLayer], 2)).toThrow(/absorbing layer/);
    }
  });

  it("after edits of some rows and drives, again and again", () => {
    const one: Case = { polarization: "TMz", edges: OPEN, nx: 50, ny: 41 };
    const setup = setupOf(one);
    const plain = setupOf({ ...one, media: empty });
    const fast = keep(new WasmEngine(module, setup));
    const slow = new ReferenceEngine(setup, "f64");
    let scale = 0;
    for (let turn = 0; turn < 12; turn += 1) {
      for (const engine of [fast, slow]) {
        run(engine, 20, 20 * turn);
        engine.setRows(5 + turn, 40 + turn, turn % 2 === 0 ? plain.coefficients : setup.coefficients);
        engine.setDrives(setup.drives.slice(turn % 3), 2);
      }
      scale = Math.max(scale, largest(slow.fields.f));
      expect(difference(fast.fields.f, slow.fields.f) / scale).toBeLessThan(roundings(STEPS));
    }
    expect(scale).toBeGreaterThan(0);
  });
});

describe("memories of media and films", () => {
  const one: Case = { polarization: "TEz", edges: OPEN, nx: 50, ny: 41, media: filmed };

  it.each(["wasm", "reference"] as const)("outlive an edit that does not touch them (%s)", (name) => {
    const setup = setupOf(one);
    const make = (): Engine =>
      name === "wasm" ? keep(new WasmEngine(module, setup)) : new ReferenceEngine(setup, "f64");
    const [edited, alone] = [make(), make()];
    for (const engine of [edited, alone]) run(engine, 90);
    edited.setRows(0, setup.lattice.rows + 1, setup.coefficients);
    edited.setBranches(structuredClone(setup.branches ?? []));
    for (const engine of [edited, alone]) run(engine, 90, 90);
    for (const field of FIELDS) expect(difference(edited.fields[field], alone.fields[field])).toBe(0);
  });

  it("start anew where an edit changes them, alike in both engines", () => {
    const setup = setupOf(one);
    const constant = setupOf({ ...one, media: empty });
    const fast = keep(new WasmEngine(module, setup));
    const slow = new ReferenceEngine(setup, "f64");
    let scale = 0;
    for (let turn = 0; turn < 10; turn += 1) {
      for (const engine of [fast, slow]) {
        run(engine, 20, 20 * turn);
        const source = turn % 2 === 0 ? constant.coefficients : setup.coefficients;
        engine.setRows(20 + turn, 40 + turn, source);
        engine.setBranches((setup.branches ?? []).slice(turn));
      }
      scale = Math.max(scale, largest(slow.fields.f));
      expect(difference(fast.fields.f, slow.fields.f) / scale).toBeLessThan(roundings(STEPS));
    }
    expect(scale).toBeGreaterThan(0);
  });

  it("go on from a snapshot in the reference engine", () => {
    const setup = setupOf(one);
    const [whole, other] = [new ReferenceEngine(setup), new ReferenceEngine(setup)];
    run(whole, 90);
    other.load(whole.save());
    for (const engine of [whole, other]) run(engine, 90, 90);
    expect(bytesOf(other) === bytesOf(whole)).toBe(true);
    const plain = new ReferenceEngine(setupOf({ ...one, media: empty }));
    expect(() => plain.load(whole.save())).toThrow(/another lattice/);
  });
});

describe("small numbers in the wasm engine", () => {
  const LEAST_NORMAL = 2 ** -126;
  const subnormal = (engine: Engine): number =>
    FIELDS.reduce(
      (count, field) =>
        count +
        (engine.fields[field] as Float32Array).filter((v) => v !== 0 && Math.abs(v) < LEAST_NORMAL).length,
      0,
    );

  it.each(["TMz", "TEz"] as const)("are zero before they make a processor slow (%s)", (polarization) => {
    const setup = setupOf({ polarization, edges: OPEN, nx: 340, ny: 330, media: uncoupled });
    const fast = keep(new WasmEngine(module, setup));
    const slow = new ReferenceEngine(setup, "f32");
    let found = 0;
    for (let from = 0; from < 272; from += 34) {
      run(fast, 34, from);
      run(slow, 34, from);
      expect(subnormal(fast)).toBe(0);
      found += subnormal(slow);
    }
    expect(found).toBeGreaterThan(1000);
  });

  it("are those far below every wave, whatever its amplitude", () => {
    const setup = setupOf({ polarization: "TMz", edges: OPEN, nx: 60, ny: 50 });
    const [loud, quiet] = [keep(new WasmEngine(module, setup)), keep(new WasmEngine(module, setup))];
    const signals = signalsFor(200);
    const faint = signals.map((value) => value * 2 ** -60);
    loud.advance(200, signals, new Float64Array(600));
    quiet.advance(200, faint, new Float64Array(600));
    const scaled = (quiet.fields.f as Float32Array).map((value) => value * 2 ** 60);
    expect(largest(loud.fields.f)).toBeGreaterThan(0);
    expect(difference(loud.fields.f, scaled)).toBeLessThan(1e-6 * largest(loud.fields.f));
  });

  it("do not hide a field that is no number", () => {
    const engine = keep(new WasmEngine(module, setupOf({ polarization: "TMz", edges: BOX, nx: 20, ny: 20 })));
    run(engine, 20);
    engine.fields.f[10 * engine.lattice.stride + 10] = Number.NaN;
    run(engine, 40, 20);
    expect(engine.fields.f.filter((value) => Number.isNaN(value)).length).toBeGreaterThan(10);
    expect(storedEnergy(engine)).toBeNaN();
  });
});

describe("the memory of the wasm engine", () => {
  it("stays below 40 bytes a cell whatever is painted", () => {
    const lattice = buildLattice({ polarization: "TMz", nx: 400, ny: 400, dx: 1e-3, dy: 1e-3, edges: BOX });
    const setup = setupOf({ polarization: "TMz", edges: BOX, nx: 400, ny: 400, media: empty });
    const varied: CoefficientSource = (j, out) => {
      for (const values of Object.values(out) as Float64Array[])
        values.forEach((_, i) => (values[i] = 0.5 + 1e-4 * ((i * 7 + j) % 11)));
    };
    const worst = keep(new WasmEngine(module, { ...setup, lattice, coefficients: varied }));
    expect(worst.bytes / 400 ** 2).toBeLessThan(40);
    const plain = keep(new WasmEngine(module, setup));
    expect(plain.bytes / 400 ** 2).toBeLessThan(16);
  });
});
