/**
 * The lattice's dispersion, its stability limit and its guide, as formulas and at the edge of stability.
 * Source: A. Taflove and S. C. Hagness, Computational Electrodynamics, 3rd ed. (2005), ch. 4; values computed in the entries.
 * Tolerance: the entries' own, 1e-10 absolute in v/c and 1e-14 relative in Δt.
 */
import { absorbingLayers, layerReflectionDb } from "@heddle/kernels/boundaries";
import {
  buildLattice,
  C0,
  latticeWaveNumber,
  phaseVelocityError,
  stabilityLimit,
} from "@heddle/kernels/lattice";
import { describe, expect, it } from "vitest";
import { z } from "zod";
import { numberAt, referenceEntries } from "./support/reference.js";

const entries = referenceEntries("yee-cavities");
const rowsSchema = z.array(
  z.object({ cells_per_wavelength_dx: z.number(), angle_deg: z.number(), vp_over_c_minus_1: z.number() }),
);

describe("the phase velocity of lattice waves", () => {
  it.each(entries.filter(({ id }) => id.startsWith("num-dispersion")))("$id", ({ geometry, expected }) => {
    const dx = 1e-3;
    const mesh = { dx, dy: dx * numberAt(geometry, "dy_over_dx"), dt: (numberAt(geometry, "S") * dx) / C0 };
    for (const row of rowsSchema.parse(expected.rows)) {
      const omega = (2 * Math.PI * C0) / (row.cells_per_wavelength_dx * dx);
      const error = phaseVelocityError(mesh, C0, omega, (row.angle_deg * Math.PI) / 180);
      expect(Math.abs(error - row.vp_over_c_minus_1)).toBeLessThan(1e-10);
    }
  });
});

describe("the stability limit", () => {
  it.each(entries.filter(({ id }) => id.startsWith("num-cfl")))("$id", ({ geometry, expected }) => {
    const limit = stabilityLimit(numberAt(geometry, "dx_m"), numberAt(geometry, "dy_m"));
    expect(Math.abs(limit / numberAt(expected, "dt_max_s") - 1)).toBeLessThan(1e-14);
  });
});

describe("at the stability limit", () => {
  const [magic] = referenceEntries("numerics").filter(({ id }) => id === "num-diagonal-magic");

  it("waves along the diagonal of square cells have no dispersion", () => {
    const dx = 1e-3;
    const mesh = { dx, dy: dx, dt: (numberAt(magic.geometry, "S") * dx) / C0 };
    const angle = (numberAt(magic.geometry, "angle_deg") * Math.PI) / 180;
    // From the entry's three cells per wavelength on.
    for (const cells of [3, 5, 10, 40]) {
      const error = phaseVelocityError(mesh, C0, (2 * Math.PI * C0) / (cells * dx), angle);
      expect(Math.abs(1 + error - numberAt(magic.expected, "vp_over_c"))).toBeLessThan(1e-12);
    }
  });
});

describe("a graded layer in the continuum", () => {
  // J.-P. Berenger, J. Comput. Phys. 114 (1994) 185: R = exp(−2η₀σ_max·d·cos θ/(m + 1)).
  const rows = z.array(
    z.object({
      cells: z.number(),
      sigma_max_S_per_m: z.number(),
      R_theory: z.record(z.string(), z.number()),
    }),
  );

  it.each(referenceEntries("numerics").filter(({ id }) => id.startsWith("num-pml")))(
    "$id: σ absorbs by the formula; a layer of 10 cells and more on the lattice does what the entry demands",
    ({ geometry, expected }) => {
      const [m, dx] = [numberAt(geometry, "order_m"), numberAt(geometry, "dx_m")];
      const eta0 = 376.730313668;
      expect((0.8 * (m + 1)) / (eta0 * dx) / numberAt(expected, "sigma_opt_S_per_m")).toBeCloseTo(1, 9);
      for (const { cells, sigma_max_S_per_m, R_theory } of rows.parse(expected.rows)) {
        const path = (2 * eta0 * sigma_max_S_per_m * cells * dx) / (m + 1);
        for (const [degrees, r] of Object.entries(R_theory))
          expect(Math.exp(-path * Math.cos((Number(degrees) * Math.PI) / 180)) / r).toBeCloseTo(1, 8);
        if (cells < 10) continue;
        const edges = {
          left: "absorbing",
          right: "absorbing",
          bottom: "absorbing",
          top: "absorbing",
        } as const;
        const lattice = buildLattice({
          polarization: "TMz",
          nx: 20,
          ny: 20,
          dx,
          dy: dx,
          edges,
          layerCells: cells,
        });
        const layers = absorbingLayers(lattice, C0 / (200 * dx));
        for (const [degrees, bar] of [
          [0, -60],
          [45, -60],
          [75, -40],
        ] as const)
          expect(
            layerReflectionDb(lattice, layers, { side: "right", hz: C0 / (20 * dx), degrees }),
          ).toBeLessThan(bar);
      }
    },
  );
});

const guideRows = z.array(z.object({ f_Hz: z.number(), beta_discrete_rad_per_m: z.number() }));

describe("a guide on the lattice", () => {
  it.each(entries.filter(({ id }) => id.startsWith("num-guide")))(
    "$id: propagation constants to 1e-9",
    ({ geometry, expected }) => {
      const dx = numberAt(geometry, "dx_m");
      const mesh = { dx, dy: dx, dt: numberAt(geometry, "dt_s") };
      const ky = Math.PI / numberAt(geometry, "a_m");
      for (const { f_Hz, beta_discrete_rad_per_m } of guideRows.parse(expected.rows)) {
        // The wave of the mode travels at the angle whose lattice wave number has ky across the guide.
        let low = 0;
        let high = Math.PI / 2;
        for (let i = 0; i < 100; i += 1) {
          const middle = (low + high) / 2;
          if (latticeWaveNumber(mesh, C0, 2 * Math.PI * f_Hz, middle) * Math.sin(middle) < ky) low = middle;
          else high = middle;
        }
        const beta = latticeWaveNumber(mesh, C0, 2 * Math.PI * f_Hz, low) * Math.cos(low);
        expect(Math.abs(beta / beta_discrete_rad_per_m - 1)).toBeLessThan(1e-9);
      }
    },
  );
});
