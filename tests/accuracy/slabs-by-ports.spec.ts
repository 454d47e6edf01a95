/**
 * Layers across a guide by ports against the transfer matrix (sources stand in each entry): at right angles by the TEM mode between two
 * electric edges, at an angle θ by mode 1 of a guide of width λ/(2 sin θ), which is a pair of plane waves at θ from its axis. S follows
 * the transverse E, so that S11 is the reflection of Ez in TMz and turned in sign the reflection of Hz in TEz.
 *
 * Two meshes of the default engine, the coarser with at least 20 cells per shortest wavelength of its band (finer where that puts
 * faces on its lines), extrapolated with order 2. Bars: 0.005 in |R| and |T|, 1° in phase where they are above 0.1. Left
 * out: angles above 60°, and at angles every other frequency and those below 6 GHz, where guides are wide.
 */
import { describe, expect, it } from "vitest";
import { z } from "zod";
import type { Complex } from "./support/extrapolation.js";
import { distance, extrapolated, phaseBetween, sizeOf } from "./support/extrapolation.js";
import { measured } from "./support/measured.js";
import { complexSchema, referenceEntries } from "./support/reference.js";
import type { Document } from "./support/run.js";
import { scatteringOf, solve } from "./support/run.js";

const SIZE_BAR = 0.005;
const PHASE_BAR = 1;
const PHASE_FROM = 0.1;
const CELLS_PER_WAVELENGTH = 20;
const LIGHT_MM_GHZ = 299.792458;

const mediumSchema = z.object({
  eps_r: z.number(),
  mu_r: z.number(),
  sigma: z.number(),
  sigma_m: z.number(),
});
type LayerMedium = z.output<typeof mediumSchema>;
const layerSchema = mediumSchema.extend({ thickness_m: z.number() });
const geometrySchema = z.object({
  /** Sheets of no thickness among them. */
  layers: z.array(z.union([layerSchema, z.object({ sheet_ohm_per_sq: z.number() })])),
  backing: z.union([z.literal("air"), z.literal("pec"), mediumSchema]),
});
type Geometry = z.output<typeof geometrySchema>;
const caseSchema = z.object({
  pol: z.enum(["TMz", "TEz"]),
  theta_deg: z.number(),
  f_Hz: z.array(z.number()),
  R: z.array(complexSchema),
  T: z.array(complexSchema).optional(),
});
type Case = z.output<typeof caseSchema>;

const entries = referenceEntries("slabs").flatMap(({ id, geometry, expected }) => {
  const layered = geometrySchema.safeParse(geometry);
  if (!layered.success || expected.cases === undefined) return [];
  return [{ id, geometry: layered.data, cases: z.array(caseSchema).parse(expected.cases) }];
});

/** Cells of guide before the first port, between ports and layers, and of half-space before the edge. */
const GUIDE_CELLS = 6;
const BACKING_CELLS = 24;
/** Cells across a TEM guide. */
const ACROSS = 2;

const solid = ({ layers }: Geometry): z.output<typeof layerSchema>[] =>
  layers.flatMap((layer) => ("thickness_m" in layer ? [layer] : []));

const mediaOf = (geometry: Geometry): LayerMedium[] => [
  ...solid(geometry),
  ...(typeof geometry.backing === "string" ? [] : [geometry.backing]),
];

/** The largest cell of at most `most` mm that puts all faces on its lines; the first layer alone where no such cell is near. */
function cellOf(geometry: Geometry, most: number): number {
  const thicknesses = solid(geometry).map(({ thickness_m }) => 1000 * thickness_m);
  const first = thicknesses.at(0);
  if (first === undefined) return most;
  const fits = (cell: number): boolean =>
    thicknesses.every((t) => Math.abs(t / cell - Math.round(t / cell)) < 1e-6);
  const start = Math.max(1, Math.ceil(first / most));
  for (let count = start; count < 2 * start + 8; count += 1) if (fits(first / count)) return first / count;
  return first / start;
}

type Patch = NonNullable<Document["paint"]>[number];
type PaintedArea = Extract<Patch, { kind: "rectangle" }>;
type Film = Extract<Patch, { kind: "film" }>;

interface Guide {
  polarization: "TMz" | "TEz";
  mode: 0 | 1;
  /** mm; for the TEM mode any. */
  width: number | null;
  band: { fromGHz: number; toGHz: number };
}

function sceneOf(geometry: Geometry, guide: Guide, refinement: number): Document {
  const { layers, backing } = geometry;
  const slowest = Math.max(1, ...mediaOf(geometry).map(({ eps_r, mu_r }) => Math.sqrt(eps_r * mu_r)));
  const most = LIGHT_MM_GHZ / guide.band.toGHz / slowest / CELLS_PER_WAVELENGTH;
  const coarse = cellOf(geometry, most);
  const cell = coarse / refinement;
  const height = guide.width ?? ACROSS * coarse;
  const gap = GUIDE_CELLS * coarse;
  const face = 2 * gap;
  const thickness = solid(geometry).reduce((sum, { thickness_m }) => sum + 1000 * thickness_m, 0);
  const behind = backing === "pec" ? 0 : backing === "air" ? 2 * gap : BACKING_CELLS * coarse;
  // The cells are those asked for where the section is a whole number of them.
  const widthMm =
    backing === "pec" ? face + thickness : cell * Math.ceil((face + thickness + behind) / cell - 1e-9);
  let x = face;
  let painted = 0;
  const area = (width: number): PaintedArea => {
    const patch = {
      kind: "rectangle",
      id: `layer-${painted}`,
      medium: `m-${painted}`,
      x,
      y: 0,
      width,
      height,
    } as const;
    x += width;
    painted += 1;
    return patch;
  };
  const paint = layers.map((layer, n): PaintedArea | Film =>
    "thickness_m" in layer
      ? area(1000 * layer.thickness_m)
      : {
          kind: "film",
          id: `sheet-${n}`,
          points: [
            [x, 0],
            [x, height],
          ],
          ohmsPerSquare: layer.sheet_ohm_per_sq,
        },
  );
  if (typeof backing !== "string") paint.push(area(widthMm - x));
  const port = { mode: guide.mode, shiftMm: gap };
  return {
    polarization: guide.polarization,
    section: { widthMm, heightMm: height },
    band: guide.band,
    mesh: { cellMm: cell },
    edges: {
      left: "absorbing",
      right: backing === "pec" ? "electric" : "absorbing",
      bottom: "electric",
      top: "electric",
    },
    media: mediaOf(geometry).map((medium, n) => ({
      id: `m-${n}`,
      name: `Layer ${n}`,
      relativePermittivity: medium.eps_r,
      relativePermeability: medium.mu_r,
      conductivity: medium.sigma,
      magneticLoss: medium.sigma_m,
    })),
    paint,
    ports: [
      { id: "one", from: [gap, 0], to: [gap, height], inward: "+x", ...port, drive: true },
      ...(backing === "air"
        ? [
            {
              id: "two",
              from: [face + thickness + gap, 0] as [number, number],
              to: [face + thickness + gap, height] as [number, number],
              inward: "-x" as const,
              ...port,
            },
          ]
        : []),
    ],
  };
}

interface Worst {
  size: number;
  phase: number;
  /** |difference| at both meshes and extrapolated. */
  raw: [number, number];
  value: number;
}
const nothing = (): Worst => ({ size: 0, phase: 0, raw: [0, 0], value: 0 });

function take(worst: Worst, exact: Complex, meshes: readonly [Complex, Complex]): void {
  const value = extrapolated(meshes[0], meshes[1], 2);
  worst.size = Math.max(worst.size, Math.abs(sizeOf(value) - sizeOf(exact)));
  if (sizeOf(exact) >= PHASE_FROM) worst.phase = Math.max(worst.phase, phaseBetween(value, exact));
  worst.raw[0] = Math.max(worst.raw[0], distance(meshes[0], exact));
  worst.raw[1] = Math.max(worst.raw[1], distance(meshes[1], exact));
  worst.value = Math.max(worst.value, distance(value, exact));
}

const turned = ({ re, im }: Complex, sign: number): Complex => ({ re: sign * re, im: sign * im });

/** Runs one guide on both meshes and holds S against every case at the frequencies numbered `indices`. */
async function compare(
  geometry: Geometry,
  guide: Guide,
  frequenciesGHz: readonly number[],
  cases: readonly { of: Case; indices: readonly number[] }[],
  worst: Worst,
): Promise<void> {
  const results = [];
  for (const refinement of [1, 2])
    results.push(await solve(sceneOf(geometry, guide, refinement), { frequenciesGHz }));
  const [coarse, fine] = results;
  for (const { of, indices } of cases) {
    indices.forEach((index, n) => {
      const s = (to: string): [Complex, Complex] => [
        scatteringOf(coarse, to, "one", n),
        scatteringOf(fine, to, "one", n),
      ];
      take(worst, turned(of.R[index], of.pol === "TEz" ? -1 : 1), s("one"));
      if (of.T && geometry.backing === "air") take(worst, of.T[index], s("two"));
    });
  }
}

function judge(what: string, worst: Worst): void {
  measured(`${what} |dS|, coarser mesh`, worst.raw[0]);
  measured(`${what} |dS|, finer mesh`, worst.raw[1]);
  measured(`${what} |dS| extrapolated`, worst.value);
  measured(`${what} d|S| extrapolated`, worst.size);
  measured(`${what} phase in degrees extrapolated`, worst.phase);
  expect(worst.size).toBeLessThan(SIZE_BAR);
  expect(worst.phase).toBeLessThan(PHASE_BAR);
}

const LOWEST_AT_ANGLES = 6;
const ANGLES_TO = 60;

describe("layers at right angles, by the TEM mode", () => {
  it("covers every layered entry", () => {
    expect(entries.length).toBe(19);
  });
  it.each(entries)("$id", async ({ id, geometry, cases }) => {
    const straight = cases.filter(({ theta_deg }) => theta_deg === 0);
    const frequencies = straight[0].f_Hz.map((hz) => hz / 1e9);
    const band =
      frequencies.length > 1
        ? { fromGHz: Math.min(...frequencies), toGHz: Math.max(...frequencies) }
        : { fromGHz: 0.5 * frequencies[0], toGHz: 1.2 * frequencies[0] };
    const worst = nothing();
    const indices = frequencies.map((_, n) => n);
    await compare(
      geometry,
      { polarization: "TEz", mode: 0, width: null, band },
      frequencies,
      straight.map((of) => ({ of, indices })),
      worst,
    );
    judge(`slab ${id} at 0°`, worst);
  });
});

describe("layers at an angle, by mode 1", () => {
  it.each(entries)("$id", async ({ id, geometry, cases }) => {
    const worst = nothing();
    const slanted = cases.filter(({ theta_deg }) => theta_deg > 0 && theta_deg <= ANGLES_TO);
    expect(slanted.length).toBeGreaterThan(1);
    for (const of of slanted) {
      for (const [index, hz] of of.f_Hz.entries()) {
        const f = hz / 1e9;
        if (f < LOWEST_AT_ANGLES || (of.f_Hz.length > 1 && index % 2 === 0)) continue;
        const width = LIGHT_MM_GHZ / f / 2 / Math.sin((of.theta_deg * Math.PI) / 180);
        const band = { fromGHz: 0.97 * f, toGHz: 1.25 * f };
        await compare(
          geometry,
          { polarization: of.pol, mode: 1, width, band },
          [f],
          [{ of, indices: [index] }],
          worst,
        );
      }
    }
    judge(`slab ${id} at angles`, worst);
  });
});
