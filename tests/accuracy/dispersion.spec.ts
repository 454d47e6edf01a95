/**
 * The lattice's dispersion, its stability limit and its guide, as formulas and at the edge of stability.
 * Source: A. Taflove and S. C. Hagness, Computational Electrodynamics, 3rd ed. (2005), ch. 4; values computed in the entries.
 * Tolerance: the entries' own, 1e-10 absolute in v/c and 1e-14 relative in Δt.
 */
import { C0, latticeWaveNumber, phaseVelocityError, stabilityLimit } from "@heddle/kernels/lattice";
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
