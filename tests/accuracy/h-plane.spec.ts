/**
 * H-plane parts of rectangular guide by ports: irises, posts, slabs, absorbing terminations, steps and filters against mode matching,
 * fundamental solutions and closed forms; sources stand in each entry. Two meshes of the default engine and stop, the finer one twice as
 * fine, extrapolated with the order that the geometry promises: 4/3 at re-entrant corners and thin edges (their fields are followed, and
 * more is seen), else 2. The coarser one has the entries' own 60 cells across the guide, or what puts the metal's edges on its lines.
 */
import type { SolveResult } from "@heddle/kernels/scene";
import { describe, expect, it } from "vitest";
import { z } from "zod";
import type { Complex } from "./support/extrapolation.js";
import { distance, extrapolated, phaseBetween, sizeOf } from "./support/extrapolation.js";
import { measured } from "./support/measured.js";
import type { ReferenceEntry } from "./support/reference.js";
import { complexSchema, numberAt, referenceEntries } from "./support/reference.js";
import type { Document } from "./support/run.js";
import { scatteringOf, solve } from "./support/run.js";

const CELLS = 60;
const CELLS_OF: Readonly<Record<string, number>> = {
  "hp-thickiris-a24-10-1": 72,
  "hp-step-24-18": 64,
  "hp-filter-a24-B": 48,
};
const meshesOf = (id: string): readonly [number, number] => {
  const cells = CELLS_OF[id] ?? CELLS;
  return [cells, 2 * cells];
};
/** The bars for the extrapolated value: |S| and degrees, and these where |S| is at least this. */
const SIZE_BAR = 0.01;
const PHASE_BAR = 1.5;
const PHASE_FROM = 0.1;

type Paint = NonNullable<Document["paint"]>;
type Media = NonNullable<Document["media"]>;

interface Part {
  paint: Paint;
  media?: Media;
  /** From the first reference plane to the second, mm; null where there is one port only, and a wall `end` mm behind it. */
  length: number | null;
  end?: number;
  order: number;
  /** Width of the second guide where it differs. */
  width2?: number;
}

const ORDERS = { corner: 4 / 3, smooth: 2 } as const;
const mm = (values: Record<string, unknown>, key: string): number => 1000 * numberAt(values, key);

/** Two pieces of metal that leave a centred opening. */
const iris = (id: string, a: number, opening: number, x: number, thickness: number): Paint => {
  const side = (a - opening) / 2;
  if (thickness === 0)
    return [
      {
        kind: "wall",
        id: `${id}-low`,
        points: [
          [x, 0],
          [x, side],
        ],
      },
      {
        kind: "wall",
        id: `${id}-high`,
        points: [
          [x, a - side],
          [x, a],
        ],
      },
    ];
  const piece = (name: string, y: number) =>
    ({
      kind: "rectangle",
      id: `${id}-${name}`,
      medium: "pec",
      x,
      y,
      width: thickness,
      height: side,
    }) as const;
  return [piece("low", 0), piece("high", a - side)];
};

/** GHz. */
const frequenciesOf = ({ expected }: ReferenceEntry): number[] =>
  z
    .array(z.number())
    .parse(expected.f_Hz)
    .map((hz) => hz / 1e9);

const postSchema = z.object({ x_m: z.number(), z_m: z.number(), radius_m: z.number() });

/** What an entry's geometry paints, with its first reference plane at x = `at` mm. */
function partOf({ geometry }: ReferenceEntry, at: number): Part {
  const a = mm(geometry, "a_m");
  if ("cavity_length_m" in geometry) {
    const [opening, thickness] = [mm(geometry, "opening_m"), mm(geometry, "thickness_m")];
    const cavity = mm(geometry, "cavity_length_m");
    return {
      paint: [
        ...iris("first", a, opening, at, thickness),
        ...iris("second", a, opening, at + thickness + cavity, thickness),
      ],
      length: 2 * thickness + cavity,
      order: ORDERS.corner,
    };
  }
  if ("opening_m" in geometry) {
    const thickness = mm(geometry, "thickness_m");
    return {
      paint: iris("iris", a, mm(geometry, "opening_m"), at, thickness),
      length: thickness,
      order: ORDERS.corner,
    };
  }
  if ("radius_m" in geometry || "posts" in geometry) {
    const posts =
      "posts" in geometry
        ? z.array(postSchema).parse(geometry.posts)
        : [{ x_m: numberAt(geometry, "x_center_m"), z_m: 0, radius_m: numberAt(geometry, "radius_m") }];
    const glass = z.object({ eps_r: z.number() }).safeParse(geometry.material);
    return {
      paint: posts.map(({ x_m, z_m, radius_m }, n) => ({
        kind: "ellipse",
        id: `post-${n}`,
        medium: glass.success ? "glass" : "pec",
        x: at + 1000 * z_m,
        y: 1000 * x_m,
        rx: 1000 * radius_m,
        ry: 1000 * radius_m,
      })),
      ...(glass.success
        ? { media: [{ id: "glass", name: "Glass", relativePermittivity: glass.data.eps_r }] }
        : {}),
      length: 0,
      order: ORDERS.smooth,
    };
  }
  if ("a2_m" in geometry) {
    const width2 = mm(geometry, "a2_m");
    const side = (a - width2) / 2;
    const piece = (id: string, y: number) =>
      ({ kind: "rectangle", id, medium: "pec", x: at, y, width: 1000, height: side }) as const;
    return { paint: [piece("low", 0), piece("high", a - side)], length: 0, order: ORDERS.corner, width2 };
  }
  const length = mm(geometry, "length_m");
  return {
    paint: [{ kind: "rectangle", id: "slab", medium: "fill", x: at, y: 0, width: length, height: a }],
    media: [
      {
        id: "fill",
        name: "Fill",
        relativePermittivity: numberAt(geometry, "eps_r"),
        relativePermeability: numberAt(geometry, "mu_r"),
        conductivity: numberAt(geometry, "sigma"),
        magneticLoss: numberAt(geometry, "sigma_m"),
      },
    ],
    length,
    order: ORDERS.smooth,
  };
}

/** The part between two ports 0.7 widths from its reference planes; with a short behind where the entry has but one port. */
function sceneOf(
  entry: ReferenceEntry,
  cells: number,
  single: boolean,
): { document: Document; order: number } {
  const a = mm(entry.geometry, "a_m");
  const cell = a / cells;
  const before = cell * Math.round(0.9 * cells);
  const gap = cell * Math.round(0.7 * cells);
  const { paint, media, length, order, width2 } = partOf(entry, before);
  const inside = length ?? 0;
  const widthMm = before + inside + (single ? 0 : before);
  const frequencies = frequenciesOf(entry);
  const low = (a - (width2 ?? a)) / 2;
  const port = { mode: 1, shiftMm: gap } as const;
  return {
    order,
    document: {
      polarization: "TMz",
      section: { widthMm, heightMm: a },
      band: { fromGHz: Math.min(...frequencies), toGHz: Math.max(...frequencies) },
      mesh: { cellMm: cell },
      edges: {
        left: "absorbing",
        right: single ? "electric" : "absorbing",
        bottom: "electric",
        top: "electric",
      },
      paint,
      ...(media ? { media } : {}),
      ports: [
        { id: "one", from: [before - gap, 0], to: [before - gap, a], inward: "+x", ...port, drive: true },
        ...(single
          ? []
          : [
              {
                id: "two",
                from: [before + inside + gap, low] as [number, number],
                to: [before + inside + gap, a - low] as [number, number],
                inward: "-x" as const,
                ...port,
                drive: true,
              },
            ]),
      ],
    },
  };
}

const KEYS = [
  { key: "S11", to: "one", from: "one" },
  { key: "S21", to: "two", from: "one" },
  { key: "S21_power_normalised", to: "two", from: "one" },
  { key: "S22", to: "two", from: "two" },
] as const;

interface Compared {
  key: string;
  frequency: number;
  exact: Complex;
  meshes: [Complex, Complex];
  value: Complex;
}

interface Meshes {
  order: number;
  results: [SolveResult, SolveResult];
}

async function onTwoMeshes(entry: ReferenceEntry, frequenciesGHz: readonly number[]): Promise<Meshes> {
  const single = entry.expected.S21 === undefined && entry.expected.S21_power_normalised === undefined;
  const [coarse, fine] = meshesOf(entry.id).map((cells) => sceneOf(entry, cells, single));
  return {
    order: coarse.order,
    results: [
      await solve(coarse.document, { frequenciesGHz }),
      await solve(fine.document, { frequenciesGHz }),
    ],
  };
}

/** Every S of the entry at its own frequencies, which come first in the results. */
function compare(entry: ReferenceEntry, { order, results: [coarse, fine] }: Meshes): Compared[] {
  const frequencies = frequenciesOf(entry);
  return KEYS.filter(({ key }) => entry.expected[key] !== undefined).flatMap(({ key, to, from }) =>
    z
      .array(complexSchema)
      .parse(entry.expected[key])
      .map((exact, n): Compared => {
        const meshes: [Complex, Complex] = [
          scatteringOf(coarse, to, from, n),
          scatteringOf(fine, to, from, n),
        ];
        return {
          key,
          frequency: frequencies[n],
          exact,
          meshes,
          value: extrapolated(meshes[0], meshes[1], order),
        };
      }),
  );
}

const worst = (all: readonly Compared[], of: (one: Compared) => number): number => Math.max(...all.map(of));
const phaseOf = (exact: Complex, value: Complex): number =>
  sizeOf(exact) < PHASE_FROM ? 0 : phaseBetween(value, exact);

function report(id: string, all: readonly Compared[]): { size: number; phase: number } {
  const size = worst(all, ({ value, exact }) => Math.abs(sizeOf(value) - sizeOf(exact)));
  const phase = worst(all, ({ value, exact }) => phaseOf(exact, value));
  for (const mesh of [0, 1] as const) {
    measured(
      `${id} |dS| at ${meshesOf(id)[mesh]} cells`,
      worst(all, ({ meshes, exact }) => distance(meshes[mesh], exact)),
    );
  }
  measured(
    `${id} |dS| extrapolated`,
    worst(all, ({ value, exact }) => distance(value, exact)),
  );
  measured(`${id} d|S| extrapolated`, size);
  measured(`${id} phase in degrees extrapolated`, phase);
  return { size, phase };
}

const entries = referenceEntries("h-plane");
const isFilter = ({ id }: ReferenceEntry): boolean => id.startsWith("hp-filter");

describe("H-plane parts", () => {
  it.each(entries.filter((entry) => !isFilter(entry)))("$id: |S| to 0.01, phase to 1.5°", async (entry) => {
    const all = compare(entry, await onTwoMeshes(entry, frequenciesOf(entry)));
    const { size, phase } = report(entry.id, all);
    expect(size).toBeLessThan(SIZE_BAR);
    expect(phase).toBeLessThan(PHASE_BAR);
  });
});

/** The passband of a result: the frequency of the largest |S21| and the distance of its half-power points, in GHz. */
function passband(result: SolveResult, first: number): { center: number; width: number } {
  const f = result.ports?.GHz.slice(first) ?? [];
  const power = f.map((_, n) => sizeOf(scatteringOf(result, "two", "one", first + n)) ** 2);
  const top = power.indexOf(Math.max(...power));
  const [before, at, after] = [power[top - 1], power[top], power[top + 1]];
  const offset = (before - after) / (2 * (before - 2 * at + after));
  const crossing = (from: number, step: 1 | -1): number => {
    let n = from;
    while (power[n + step] > at / 2) n += step;
    return f[n] + ((power[n] - at / 2) / (power[n] - power[n + step])) * (f[n + step] - f[n]);
  };
  return { center: f[top] + offset * (f[1] - f[0]), width: crossing(top, 1) - crossing(top, -1) };
}

/** The bars of filters: centre, bandwidth, and |S| off the band (more than a bandwidth from its centre). */
const CENTER_BAR = 5e-4;
const WIDTH_BAR = 0.03;
const OFF_BAND_BAR = 0.01;
const FINE_FREQUENCIES = 801;

describe("filters", () => {
  it.each(entries.filter(isFilter))(
    "$id: centre to 5e-4, bandwidth to 3 %, |S| off the band to 0.01",
    async (entry) => {
      const [center, width] = [
        numberAt(entry.expected, "f0_Hz") / 1e9,
        numberAt(entry.expected, "bw_3dB_Hz") / 1e9,
      ];
      const own = frequenciesOf(entry);
      const fine = Array.from(
        { length: FINE_FREQUENCIES },
        (_, n) => center + width * ((3 * n) / (FINE_FREQUENCIES - 1) - 1.5),
      );
      const meshes = await onTwoMeshes(entry, [...own, ...fine]);
      const bands = meshes.results.map((result) => passband(result, own.length));
      const toZero = (of: "center" | "width"): number =>
        extrapolated({ re: bands[0][of], im: 0 }, { re: bands[1][of], im: 0 }, meshes.order).re;
      bands.forEach((band, mesh) => {
        measured(`${entry.id} centre at ${meshesOf(entry.id)[mesh]} cells`, band.center / center - 1);
        measured(`${entry.id} bandwidth at ${meshesOf(entry.id)[mesh]} cells`, band.width / width - 1);
      });
      measured(`${entry.id} centre extrapolated`, toZero("center") / center - 1);
      measured(`${entry.id} bandwidth extrapolated`, toZero("width") / width - 1);
      const off = compare(entry, meshes).filter(({ frequency }) => Math.abs(frequency - center) > width);
      expect(off.length).toBeGreaterThan(8);
      const { size } = report(entry.id, off);
      expect(Math.abs(toZero("center") / center - 1)).toBeLessThan(CENTER_BAR);
      expect(Math.abs(toZero("width") / width - 1)).toBeLessThan(WIDTH_BAR);
      expect(size).toBeLessThan(OFF_BAND_BAR);
    },
  );
});
