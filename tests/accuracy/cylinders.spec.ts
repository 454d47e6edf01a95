/**
 * Circular cylinders in a plane wave: the total field at twelve points within and around each, metal and penetrable, lossless and
 * lossy, electric and magnetic. Sources: C. A. Balanis, Advanced Engineering Electromagnetics (1989), sec. 11.5;
 * R. F. Harrington, Time-Harmonic Electromagnetic Fields (1961), sec. 5-9; the series are summed in the entries.
 * Tolerance, rms over the largest value, raw: 1.5 % for metal and 1 % for media at 40 cells per wavelength in the densest medium
 * (the entries allow 3 % and 2 %); absorption width: 1 %.
 */
import { latticeWaveNumber } from "@heddle/kernels/lattice";
import { describe, expect, it } from "vitest";
import { z } from "zod";
import { measured } from "./support/measured.js";
import type { ReferenceEntry } from "./support/reference.js";
import { complexSchema, numberAt, referenceEntries, referenceEntry } from "./support/reference.js";
import { OPEN_SPACE, phasorOf, solve } from "./support/run.js";

const C0 = 299_792_458;
const ETA0 = 376.730313668;
const CELLS_PER_WAVELENGTH = 40;
/** Cells between the farthest point and the section's edge: the wave's box and a little room. */
const MARGIN_CELLS = 8;

const geometrySchema = z.object({
  pol: z.enum(["TMz", "TEz"]),
  f_Hz: z.number(),
  radius_m: z.number(),
  material: z.union([
    z.literal("PEC"),
    z.object({ eps_r: z.number(), mu_r: z.number(), sigma: z.number(), sigma_m: z.number() }),
  ]),
});
const pointsSchema = z.array(
  z.object({ r_m: z.number(), phi_deg: z.number(), u_total: complexSchema, abs: z.number() }),
);

interface Outcome {
  /** Rms over the largest value. */
  error: number;
  /** Power absorbed over that of the wave through a line of one metre, in m; null without loss. */
  absorptionWidth: number | null;
}

/** What a run makes of an entry's points within `reach` radii, and of its absorption, on cells of `cell` mm. */
async function runOf(
  { geometry, expected }: ReferenceEntry,
  cell: number,
  reach = Number.POSITIVE_INFINITY,
): Promise<Outcome> {
  const { pol, f_Hz, radius_m, material } = geometrySchema.parse(geometry);
  const points = pointsSchema.parse(expected.points).filter(({ r_m }) => r_m <= reach * radius_m);
  const GHz = f_Hz / 1e9;
  const farthest = Math.max(...points.map(({ r_m }) => r_m * 1000));
  const half = (Math.ceil(farthest / cell) + MARGIN_CELLS) * cell;
  const radius = radius_m * 1000;
  const isMetal = material === "PEC";
  const lossy = material !== "PEC" && material.sigma + material.sigma_m > 0;
  const around = {
    x: half - 1.1 * radius,
    y: half - 1.1 * radius,
    width: 2.2 * radius,
    height: 2.2 * radius,
  };
  const media = isMetal
    ? []
    : [
        {
          id: "rod",
          name: "Rod",
          relativePermittivity: material.eps_r,
          relativePermeability: material.mu_r,
          conductivity: material.sigma,
          magneticLoss: material.sigma_m,
        },
      ];
  const result = await solve(
    {
      polarization: pol,
      section: { widthMm: 2 * half, heightMm: 2 * half },
      band: { fromGHz: 0.7 * GHz, toGHz: 1.3 * GHz },
      mesh: { cellMm: cell },
      edges: OPEN_SPACE,
      media,
      paint: [
        {
          kind: "ellipse",
          id: "cylinder",
          medium: isMetal ? "pec" : "rod",
          x: half,
          y: half,
          rx: radius,
          ry: radius,
        },
      ],
      sources: [{ kind: "plane-wave", id: "wave", angle: 0 }],
      probes: [
        ...points.map(
          ({ r_m, phi_deg }, index) =>
            ({
              kind: "point",
              id: `p${index}`,
              x: half + r_m * 1000 * Math.cos((phi_deg * Math.PI) / 180),
              y: half + r_m * 1000 * Math.sin((phi_deg * Math.PI) / 180),
              field: pol === "TMz" ? "Ez" : "Hz",
            }) as const,
        ),
        ...(lossy ? [{ kind: "area", id: "absorbed", ...around, quantity: "absorbed" } as const] : []),
      ],
      stop: { maxTimeNs: 60, decayDb: 80 },
    },
    { frequenciesGHz: [GHz] },
  );
  // The entry's phase is 0 at the middle; the wave's is 0 at the section's corner, and it travels as the lattice lets it.
  const mesh = {
    dx: result.grid.dxMm / 1e3,
    dy: result.grid.dyMm / 1e3,
    dt: result.grid.stepPs * 1e-12,
  };
  const phase = (latticeWaveNumber(mesh, C0, 2 * Math.PI * f_Hz, 0) * half) / 1e3;
  const unit = pol === "TMz" ? 1 : ETA0;
  const squares = points.map(({ u_total }, index) => {
    const { re, im } = phasorOf(result, `p${index}`);
    const real = unit * (re * Math.cos(phase) - im * Math.sin(phase));
    const imaginary = unit * (re * Math.sin(phase) + im * Math.cos(phase));
    return (real - u_total.re) ** 2 + (imaginary - u_total.im) ** 2;
  });
  const rms = Math.sqrt(squares.reduce((sum, square) => sum + square, 0) / squares.length);
  const absorbed = result.probes.find(({ id }) => id === "absorbed")?.spectrum;
  const width = absorbed && "value" in absorbed ? (absorbed.value[0] ?? Number.NaN) * 2 * ETA0 : null;
  return { error: rms / Math.max(...points.map(({ abs }) => abs)), absorptionWidth: width };
}

describe("near field of cylinders in a plane wave", () => {
  it.each(referenceEntries("cylinders"))("$id", async (entry) => {
    const { f_Hz, material } = geometrySchema.parse(entry.geometry);
    const index = material === "PEC" ? 1 : Math.sqrt(material.eps_r * material.mu_r);
    const cell = (C0 / f_Hz / index / CELLS_PER_WAVELENGTH) * 1000;
    const { error, absorptionWidth } = await runOf(entry, cell);
    measured(`${entry.id}, ${cell.toPrecision(3)} mm, rms over the largest value, %`, 100 * error);
    expect(error).toBeLessThan(material === "PEC" ? 0.015 : 0.01);
    // A lossy cylinder absorbs what the optical theorem and its own series say.
    const width = numberAt(entry.expected, "absorption_width_m");
    if (absorptionWidth === null) expect(width).toBeLessThan(1e-15);
    else {
      measured(`${entry.id}, absorption width, relative`, absorptionWidth / width - 1);
      expect(Math.abs(absorptionWidth / width - 1)).toBeLessThan(0.01);
    }
  });
});

/** Slope of log error over log cell. */
function orderOf(cells: readonly number[], errors: readonly number[]): number {
  const mean = (values: readonly number[]): number =>
    values.reduce((sum, value) => sum + value, 0) / values.length;
  const [xs, ys] = [cells.map(Math.log), errors.map(Math.log)];
  const [x, y] = [mean(xs), mean(ys)];
  const covariance = xs.reduce((sum, value, n) => sum + (value - x) * (ys[n] - y), 0);
  return covariance / xs.reduce((sum, value) => sum + (value - x) ** 2, 0);
}

describe("order of the near field over four meshes that double", () => {
  // Cells that the radius is no multiple of, 8.25 to 66 in it. Bars, raw; second order is what the lattice itself has.
  it.each([
    ["cyl-tmz-5", 1.9],
    ["cyl-tez-6", 1.5],
    ["cyl-tmz-1", 1.9],
    ["cyl-tez-2", 1.9],
  ])("%s: at least %d", async (id, bar) => {
    const entry = referenceEntry("cylinders", id);
    const cells = [8.25, 16.5, 33, 66].map((count) => (numberAt(entry.geometry, "radius_m") * 1000) / count);
    const errors: number[] = [];
    for (const cell of cells) errors.push((await runOf(entry, cell, 1.6)).error);
    const order = orderOf(cells, errors);
    measured(
      `${id}, errors in % ${errors.map((error) => (100 * error).toPrecision(3)).join(", ")}; order`,
      order,
    );
    expect(order).toBeGreaterThan(bar);
  });
});
