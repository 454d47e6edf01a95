/**
 * Layers by the stack calculator against independently computed reflection and transmission: half-spaces, slabs, absorbers over metal,
 * resistive screens, Brewster angles, surface impedances, shielding of sheets. Sources stand in each entry (transfer
 * matrices after M. Born and E. Wolf, S. A. Schelkunoff's A + R + M, and others named there). Tolerance: 1e-9 absolute on complex coefficients
 * (the entries' own uncertainty is 1e-12), 1e-6 dB on shielding.
 */
import type { FillMedium } from "@heddle/kernels/scene";
import { AIR } from "@heddle/kernels/scene";
import type { Stack, StackElement } from "@heddle/kernels/stack";
import { stackResponse } from "@heddle/kernels/stack";
import { describe, expect, it } from "vitest";
import { z } from "zod";
import { measured } from "./support/measured.js";
import { complexSchema, referenceEntries } from "./support/reference.js";

const TOLERANCE = 1e-9;

const mediumSchema = z.object({
  eps_r: z.number(),
  mu_r: z.number(),
  sigma: z.number(),
  sigma_m: z.number(),
});
const layerSchema = z.union([
  z.object({ sheet_ohm_per_sq: z.number() }),
  mediumSchema.extend({ thickness_m: z.number() }),
]);
const geometrySchema = z.object({
  layers: z.array(layerSchema),
  backing: z.union([z.literal("air"), z.literal("pec"), mediumSchema]),
});
const casesSchema = z.array(
  z.object({
    pol: z.enum(["TMz", "TEz"]),
    theta_deg: z.number(),
    f_Hz: z.array(z.number()),
    R: z.array(complexSchema),
    T: z.array(complexSchema).optional(),
    T_into_halfspace: z.array(complexSchema).optional(),
    absorbed_fraction: z.array(z.number()).optional(),
  }),
);

const mediumOf = (entry: z.output<typeof mediumSchema>): FillMedium => ({
  ...AIR,
  relativePermittivity: entry.eps_r,
  relativePermeability: entry.mu_r,
  conductivity: entry.sigma,
  magneticLoss: entry.sigma_m,
});
const elementOf = (layer: z.output<typeof layerSchema>): StackElement =>
  "sheet_ohm_per_sq" in layer
    ? { kind: "film", ohmsPerSquare: layer.sheet_ohm_per_sq }
    : { kind: "layer", medium: mediumOf(layer), thicknessMm: layer.thickness_m * 1000 };
const stackOf = (geometry: unknown): Stack => {
  const { layers, backing } = geometrySchema.parse(geometry);
  return {
    elements: layers.map(elementOf),
    backing: backing === "air" ? AIR : backing === "pec" ? "metal" : mediumOf(backing),
  };
};

const entries = referenceEntries("slabs");

describe("reflection and transmission of layers", () => {
  const layered = entries.filter(({ expected }) => expected.cases !== undefined);
  it("covers every layered entry", () => {
    expect(layered.length).toBe(19);
  });
  it.each(layered)("$id: every polarization, angle and frequency to 1e-9", ({ id, geometry, expected }) => {
    const stack = stackOf(geometry);
    let worst = 0;
    for (const { pol, theta_deg, f_Hz, ...values } of casesSchema.parse(expected.cases)) {
      f_Hz.forEach((f, n) => {
        const found = stackResponse(stack, {
          polarization: pol,
          angleDeg: theta_deg,
          frequencyGHz: f / 1e9,
        });
        const off = (
          a: { re: number; im: number } | null,
          b: { re: number; im: number } | undefined,
        ): void => {
          if (b === undefined) return;
          worst = Math.max(worst, a === null ? Infinity : Math.hypot(a.re - b.re, a.im - b.im));
        };
        off(found.fieldReflection, values.R[n]);
        off(found.fieldTransmission, (values.T ?? values.T_into_halfspace)?.[n]);
        const kept = values.absorbed_fraction?.[n];
        if (kept !== undefined) worst = Math.max(worst, Math.abs(found.absorbed - kept));
      });
    }
    measured(`stack ${id}`, worst);
    expect(worst).toBeLessThan(TOLERANCE);
  });
});

describe("conductors", () => {
  const rowsSchema = z.array(
    z.object({
      sigma: z.number(),
      eps_r: z.number(),
      mu_r: z.number(),
      f_Hz: z.number(),
      surface_impedance_exact_ohm: complexSchema,
    }),
  );
  it("skin-depth-table-open: surface impedances to 1e-9 of their size", () => {
    const table = entries.find(({ id }) => id === "skin-depth-table-open");
    const rows = rowsSchema.parse(table?.expected.rows);
    expect(rows.length).toBeGreaterThan(5);
    for (const row of rows) {
      const backing = mediumOf({ ...row, sigma_m: 0 });
      const wave = { polarization: "TMz", angleDeg: 0, frequencyGHz: row.f_Hz / 1e9 } as const;
      const { re, im } = stackResponse({ elements: [], backing }, wave).surfaceImpedanceOhm;
      const exact = row.surface_impedance_exact_ohm;
      const error = Math.hypot(re - exact.re, im - exact.im) / Math.hypot(exact.re, exact.im);
      expect(error).toBeLessThan(TOLERANCE);
    }
  });

  const sheets = entries.filter(({ id }) => id.startsWith("se-sheet"));
  it.each(sheets)("$id: shielding to 1e-6 dB", ({ id, geometry, expected }) => {
    const sheet = z.object({ sigma: z.number(), thickness_m: z.number(), eps_r: z.number() }).parse(geometry);
    const medium = mediumOf({ ...sheet, mu_r: 1, sigma_m: 0 });
    const stack: Stack = {
      elements: [{ kind: "layer", medium, thicknessMm: sheet.thickness_m * 1000 }],
      backing: AIR,
    };
    const rows = z.array(z.object({ f_Hz: z.number(), SE_dB: z.number() })).parse(expected.rows);
    expect(rows.length).toBeGreaterThan(2);
    for (const { f_Hz, SE_dB } of rows) {
      const { transmission } = stackResponse(stack, {
        polarization: "TEz",
        angleDeg: 0,
        frequencyGHz: f_Hz / 1e9,
      });
      const found = transmission ? -20 * Math.log10(Math.hypot(transmission.re, transmission.im)) : NaN;
      measured(`stack ${id} dB`, found - SE_dB);
      expect(Math.abs(found - SE_dB)).toBeLessThan(1e-6);
    }
  });
});
