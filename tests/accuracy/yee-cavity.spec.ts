/**
 * The discrete Yee cavity against its closed form, at the kernel's door in float64: the exact discrete eigenpattern as initial
 * field, then every step compared with cos(ωnΔt), or with the complex z per step where there is loss.
 * Source: dispersion relation with k = mπ/(NΔ), A. Taflove and S. C. Hagness, Computational Electrodynamics, 3rd ed. (2005),
 * sec. 4.2; loss: [ε(z−1)/Δt + σ(z+1)/2][μ(z−1)/Δt + σ*(z+1)/2] = −K²z. Tolerance 1e-10, that of the entries.
 */
import type { Lattice, LatticePolarization } from "@heddle/kernels/lattice";
import { buildLattice, EPS0, latticeFrequency, MU0 } from "@heddle/kernels/lattice";
import { absorbingLayers } from "@heddle/kernels/boundaries";
import { propertiesOf, SectionCoefficients } from "@heddle/kernels/media";
import { ReferenceEngine } from "@heddle/kernels/stepping";
import { describe, expect, it } from "vitest";
import { measured } from "./support/measured.js";
import { z } from "zod";
import { ELECTRIC_BOX } from "./support/run.js";
import { complexSchema, numberAt, referenceEntries } from "./support/reference.js";

const TOLERANCE = 1e-10;

interface Filling {
  epsR: number;
  muR: number;
  sigma: number;
  sigmaM: number;
}
const AIR: Filling = { epsR: 1, muR: 1, sigma: 0, sigmaM: 0 };

function cavity(
  polarization: LatticePolarization,
  geometry: Record<string, unknown>,
  courant: number,
  filling: Filling,
) {
  const [nx, ny] = [numberAt(geometry, "Nx"), numberAt(geometry, "Ny")];
  const [dx, dy] = [numberAt(geometry, "dx_m"), numberAt(geometry, "dy_m")];
  const lattice = buildLattice({ polarization, nx, ny, dx, dy, edges: ELECTRIC_BOX, courant });
  const properties = propertiesOf({
    relativePermittivity: filling.epsR,
    relativePermeability: filling.muR,
    conductivity: filling.sigma,
    magneticLoss: filling.sigmaM,
  });
  const coefficients = new SectionCoefficients(lattice, {
    media: [{ kind: "fill", properties }],
    areas: [],
    background: 0,
    walls: [],
    widthMm: nx * dx * 1000,
    heightMm: ny * dy * 1000,
    omega: 1e10,
  });
  const engine = new ReferenceEngine({
    lattice,
    coefficients: coefficients.row,
    layers: absorbingLayers(lattice, 1e9),
    drives: [],
    signals: 0,
    taps: [],
    records: 0,
  });
  return { lattice, engine };
}

/** The pattern of mode (m, n) on F's points. */
function pattern(lattice: Lattice, m: number, n: number): Float64Array {
  const values = new Float64Array(lattice.size);
  for (let j = 1; j <= lattice.rows; j += 1) {
    for (let i = 1; i <= lattice.columns; i += 1) {
      const x = (Math.PI * m * (i - 1 + lattice.offset)) / lattice.nx;
      const y = (Math.PI * n * (j - 1 + lattice.offset)) / lattice.ny;
      values[j * lattice.stride + i] =
        lattice.polarization === "TMz" ? Math.sin(x) * Math.sin(y) : Math.cos(x) * Math.cos(y);
    }
  }
  return values;
}

/** G of the pattern's differences: gx = −scale·(Δx/Δy)·(F above − F), gy = scale·(Δy/Δx)·(F right − F). */
function setG(engine: ReferenceEngine, values: Float64Array, scale: number): void {
  const { lattice, fields } = engine;
  const { stride, dx, dy, rows, columns } = lattice;
  for (let j = 1; j <= rows; j += 1) {
    for (let i = 1; i <= columns; i += 1) {
      const k = j * stride + i;
      fields.gx[k] = j < rows ? -scale * (dx / dy) * (values[k + stride] - values[k]) : 0;
      fields.gy[k] = i < columns ? scale * (dy / dx) * (values[k + 1] - values[k]) : 0;
    }
  }
}

const largestDifference = (a: ArrayLike<number>, b: ArrayLike<number>, factor: number): number => {
  let worst = 0;
  for (let k = 0; k < b.length; k += 1) worst = Math.max(worst, Math.abs(a[k] - factor * b[k]));
  return worst;
};

const modesSchema = z.array(
  z.object({ m: z.number(), n: z.number(), pol: z.string(), f_discrete_Hz: z.number() }),
);

const cavities = referenceEntries("yee-cavities");

describe("the lossless Yee cavity", () => {
  for (const entry of cavities.filter(({ id }) => id.startsWith("num-cavity"))) {
    const modes = modesSchema.parse(entry.expected.modes);
    for (const polarization of ["TMz", "TEz"] as const) {
      const own = modes.filter(({ pol }) => polarization === "TEz" || pol !== "TEz only");
      it.each(own)(
        `${entry.id} ${polarization} ($m, $n) follows cos(ωnΔt) for 1000 steps`,
        ({ m, n, f_discrete_Hz }) => {
          const { lattice, engine } = cavity(
            polarization,
            entry.geometry,
            numberAt(entry.geometry, "cfl_fraction"),
            AIR,
          );
          expect(Math.abs(lattice.dt / numberAt(entry.geometry, "dt_s") - 1)).toBeLessThan(1e-12);
          const own = latticeFrequency(
            lattice,
            1 / Math.sqrt(EPS0 * MU0),
            (Math.PI * m) / (lattice.nx * lattice.dx),
            (Math.PI * n) / (lattice.ny * lattice.dy),
          );
          expect(Math.abs(own / (2 * Math.PI * f_discrete_Hz) - 1)).toBeLessThan(TOLERANCE);
          const start = pattern(lattice, m, n);
          engine.fields.f.set(start);
          // F = cos(ωnΔt) is even in time: G half a step before is minus half of its first change.
          setG(engine, start, (-0.5 * lattice.dt) / (polarization === "TMz" ? MU0 : EPS0));
          let worst = 0;
          for (let step = 1; step <= 1000; step += 1) {
            engine.advance(1, new Float64Array(0), new Float64Array(0));
            const factor = Math.cos(2 * Math.PI * f_discrete_Hz * step * lattice.dt);
            worst = Math.max(worst, largestDifference(engine.fields.f, start, factor));
          }
          measured(`${entry.id} ${polarization}`, worst);
          expect(worst).toBeLessThan(TOLERANCE);
        },
      );
    }
  }
});

describe("the lossy Yee cavity", () => {
  for (const entry of cavities.filter(({ id }) => id.startsWith("num-lossy"))) {
    for (const polarization of ["TMz", "TEz"] as const) {
      it(`${entry.id} ${polarization} turns and shrinks by the closed form's z per step`, () => {
        const { geometry } = entry;
        const filling = {
          epsR: numberAt(geometry, "eps_r"),
          muR: numberAt(geometry, "mu_r"),
          sigma: numberAt(geometry, "sigma"),
          sigmaM: numberAt(geometry, "sigma_m"),
        };
        const limit =
          1 / (299792458 * Math.hypot(1 / numberAt(geometry, "dx_m"), 1 / numberAt(geometry, "dy_m")));
        const dt = numberAt(geometry, "dt_s");
        const { lattice, engine } = cavity(polarization, geometry, dt / limit, filling);
        const expected = complexSchema.parse(entry.expected.z_per_step);
        const start = pattern(lattice, numberAt(geometry, "m"), numberAt(geometry, "n"));
        // F and G's amplitude g obey g ← aG·g + bG·F, F ← aF·F − (K²…)·g; start on any state and use the recurrence
        // F[n+1] = 2Re(z)·F[n] − |z|²·F[n−1], which every superposition of z and z* obeys.
        engine.fields.f.set(start);
        const history: Float64Array[] = [Float64Array.from(engine.fields.f)];
        let worst = 0;
        for (let step = 1; step <= 1000; step += 1) {
          engine.advance(1, new Float64Array(0), new Float64Array(0));
          history.push(Float64Array.from(engine.fields.f));
          if (history.length > 3) history.shift();
          if (history.length === 3) {
            const [older, old, now] = history;
            const square = expected.re ** 2 + expected.im ** 2;
            const scale = now.reduce((largest, value) => Math.max(largest, Math.abs(value)), 1e-3);
            for (let k = 0; k < now.length; k += 1) {
              const predicted = 2 * expected.re * old[k] - square * older[k];
              worst = Math.max(worst, Math.abs(now[k] - predicted) / scale);
            }
          }
        }
        measured(`${entry.id} ${polarization}`, worst);
        expect(worst).toBeLessThan(TOLERANCE);
      });
    }
  }
});
