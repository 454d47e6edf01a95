import { describe, expect, it } from "vitest";
import { absorbingLayers } from "../boundaries/index.js";
import type { Point } from "../geometry/index.js";
import type { LatticePolarization } from "../lattice/index.js";
import { buildLattice } from "../lattice/index.js";
import { storedEnergy } from "../observers/index.js";
import { ReferenceEngine } from "../stepping/index.js";
import type { Film } from "./index.js";
import { SectionCoefficients, VACUUM } from "./index.js";

const NX = 26;
const NY = 21;
const EDGES = { left: "electric", right: "magnetic", bottom: "electric", top: "magnetic" } as const;

function engineOf(polarization: LatticePolarization, films: readonly Film[]): ReferenceEngine {
  const lattice = buildLattice({ polarization, nx: NX, ny: NY, dx: 1e-3, dy: 1.2e-3, edges: EDGES });
  const coefficients = new SectionCoefficients(lattice, {
    media: [{ kind: "fill", properties: VACUUM }],
    areas: [],
    background: 0,
    walls: [],
    films,
    widthMm: NX,
    heightMm: 1.2 * NY,
    omega: 5e10,
  });
  return new ReferenceEngine({
    lattice,
    coefficients: coefficients.row,
    branches: coefficients.branches,
    layers: absorbingLayers(lattice, 1e9),
    drives: [],
    signals: 0,
    taps: [],
    records: 0,
  });
}

/** White noise in all fields that are stepped. */
function shake(engine: ReferenceEngine): void {
  const { lattice, fields } = engine;
  let state = 11;
  for (const values of [fields.f, fields.gx, fields.gy]) {
    const unit = values === fields.f ? 1 : lattice.polarization === "TMz" ? 2.6e-6 : 0.4;
    for (let k = 0; k < values.length; k += 1) {
      state = (state * 48271) % 2147483647;
      const [i, j] = [k % lattice.stride, Math.floor(k / lattice.stride)];
      const inside = i >= 1 && i <= lattice.columns && j >= 1 && j <= lattice.rows;
      values[k] = inside ? unit * (state / 2147483647 - 0.5) : 0;
    }
  }
}

const advance = (engine: ReferenceEngine, steps: number): void =>
  engine.advance(steps, new Float64Array(0), new Float64Array(0));

const tangle = (ohmsPerSquare: number): Film[] =>
  (
    [
      [
        [4.3, 0],
        [4.3, 25.2],
      ],
      [
        [0, 7.7],
        [26, 7.7],
      ],
      [
        [2, 3],
        [24.2, 19.6],
        [25.9, 4],
      ],
      [
        [13.5, 1.1],
        [13.5, 24],
        [9, 24],
        [9.01, 2],
      ],
    ] as Point[][]
  ).map((points) => ({ points, ohmsPerSquare }));

describe.each(["TMz", "TEz"] as const)("films in %s", (polarization) => {
  it.each([1e-3, 0.5, 20, 377, 1e5])(
    "of %d Ω only take energy, over 5,000 steps from white noise",
    (ohms) => {
      const engine = engineOf(polarization, tangle(ohms));
      shake(engine);
      advance(engine, 2);
      // The films' own inductances take a share and give it back, so the fields' energy is compared over long turns. What stays is a
      // magnetic field at rest, which films do not feel.
      const turns = Array.from({ length: 10 }, () => {
        let most = 0;
        for (let n = 0; n < 10; n += 1) {
          advance(engine, 50);
          most = Math.max(most, storedEnergy(engine));
        }
        return most;
      });
      for (let n = 1; n < turns.length; n += 1) expect(turns[n]).toBeLessThan(turns[n - 1] * (1 + 1e-12));
      expect(turns[turns.length - 1]).toBeLessThan(0.9 * turns[0]);
    },
  );

  it("of huge resistance are not there", () => {
    const [none, weak] = [engineOf(polarization, []), engineOf(polarization, tangle(1e12))];
    for (const engine of [none, weak]) {
      shake(engine);
      advance(engine, 300);
    }
    expect(Math.abs(storedEnergy(weak) / storedEnergy(none) - 1)).toBeLessThan(1e-6);
  });
});
