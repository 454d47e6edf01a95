/**
 * Limits of the trade, judged: what their tables say in other units, and which level keeps them.
 * Sources: in the entries (those marked from memory there are so); tolerance: the entries' own, 0.05 dB, 1e-9 where units are converted.
 */
import { judgeLevels, limitAt } from "@heddle/kernels/analysis";
import { describe, expect, it } from "vitest";
import { z } from "zod";
import { numberAt, referenceEntries, referenceEntry } from "./support/reference.js";
import type { Document } from "./support/run.js";
import { ELECTRIC_BOX, phasorOf, solve } from "./support/run.js";

const dbMicrovolts = (voltsPerMetre: number): number => 20 * Math.log10(voltsPerMetre / 1e-6);

const bandSchema = z.object({
  f_lo_Hz: z.number(),
  f_hi_Hz: z.number().nullable(),
  limit_dBuV_per_m: z.number().optional(),
  limit_uV_per_m: z.number().optional(),
  average_dBuV_per_m: z.number().optional(),
  cls: z.string().optional(),
});
type Band = z.output<typeof bandSchema>;
const TABLES = [
  "fcc15109-classA-10m",
  "fcc15109-classB-3m",
  "cispr32-classA-10m",
  "cispr32-classB-10m",
  "cispr32-classB-above1GHz",
  "cispr11-group1",
];
const bandsOf = (id: string, cls?: string): Band[] =>
  z
    .array(bandSchema)
    .parse(referenceEntry("limits", id).expected.rows)
    .filter((band) => band.cls === cls);
const levelOf = (band: Band): number => band.limit_dBuV_per_m ?? band.average_dBuV_per_m ?? Number.NaN;
/** Steps are two points a millionth of the frequency apart; at the edge itself the tighter value holds where it comes first. */
const lineOf = (bands: readonly Band[]): [number, number][] =>
  bands.flatMap((band) => {
    const top = (band.f_hi_Hz ?? 2 * band.f_lo_Hz) / 1e9;
    return [
      [(band.f_lo_Hz / 1e9) * (1 + 1e-6), levelOf(band)],
      [top, levelOf(band)],
    ] as [number, number][];
  });

describe("the tables of radiated limits", () => {
  it.each(["fcc15109-classA-10m", "fcc15109-classB-3m"])("%s: µV/m are these dBµV/m", (id) => {
    for (const band of bandsOf(id))
      expect(Math.abs(dbMicrovolts((band.limit_uV_per_m ?? Number.NaN) * 1e-6) - levelOf(band))).toBeLessThan(
        1e-9,
      );
  });

  it.each(TABLES)("%s: judged as a line of steps, each band by its own value", (id) => {
    for (const cls of id === "cispr11-group1" ? ["A", "B"] : [undefined]) {
      const bands = bandsOf(id, cls);
      expect(bands.length).toBeGreaterThan(1);
      const limit = { sense: "below" as const, points: lineOf(bands) };
      for (const band of bands) {
        const from = band.f_lo_Hz / 1e9;
        const middle = Math.sqrt(from * ((band.f_hi_Hz ?? 2 * band.f_lo_Hz) / 1e9));
        expect(Math.abs((limitAt(limit, middle) ?? Number.NaN) - levelOf(band))).toBeLessThan(1e-9);
      }
      const frequencies = bands.map((band) => (1.1 * band.f_lo_Hz) / 1e9);
      const kept = bands.map((band) => levelOf(band) - 3);
      expect(judgeLevels(limit, frequencies, kept)).toMatchObject({ holds: true });
      const [first, ...rest] = kept;
      expect(judgeLevels(limit, frequencies, [first + 3.05, ...rest])).toMatchObject({
        holds: false,
        atGHz: frequencies[0],
      });
    }
  });

  it("change by 20 lg of the distances' ratio from 3 m to 10 m", () => {
    const [row] = z
      .array(z.record(z.string(), z.unknown()))
      .parse(referenceEntry("limits", "distance-extrapolation").expected.rows);
    const change = 20 * Math.log10(numberAt(row, "from_m") / numberAt(row, "to_m"));
    expect(Math.abs(change - numberAt(row, "change_dB"))).toBeLessThan(1e-9);
  });
});

describe("limits of power density", () => {
  it("are the field of a plane wave of as many W/m²", () => {
    const rows = z
      .array(z.record(z.string(), z.unknown()))
      .parse(referenceEntry("limits", "microwave-oven-leakage").expected.rows);
    for (const row of rows) {
      const density = numberAt(row, "limit_mW_per_cm2") * 10;
      expect(density).toBeCloseTo(numberAt(row, "limit_W_per_m2"), 9);
      expect(Math.sqrt(density * 376.730313668) / numberAt(row, "E_rms_plane_wave_V_per_m")).toBeCloseTo(
        1,
        9,
      );
    }
  });

  it("rise as f/1500 between 300 MHz and 1.5 GHz, which is a straight line over log f in dB and so exact at two points", () => {
    const rows = z
      .array(
        z.object({
          f_lo_Hz: z.number(),
          f_hi_Hz: z.number(),
          S_mW_per_cm2: z.union([z.number(), z.string()]),
        }),
      )
      .parse(referenceEntry("limits", "fcc-mpe-general").expected.rows);
    expect(rows[1].S_mW_per_cm2).toBe("f_MHz/1500");
    const density = (GHz: number): number => 10 * Math.log10((GHz * 1000) / 1500);
    const limit = {
      sense: "below" as const,
      points: [0.3, 1.5].map((GHz): [number, number] => [GHz, density(GHz)]),
    };
    for (const GHz of [0.3, 0.45, 0.7, 1, 1.5])
      expect(Math.abs((limitAt(limit, GHz) ?? Number.NaN) - density(GHz))).toBeLessThan(1e-9);
    // It meets the constants on either side.
    expect(10 ** (density(0.3) / 10)).toBeCloseTo(Number(rows[0].S_mW_per_cm2), 9);
    expect(10 ** (density(1.5) / 10)).toBeCloseTo(Number(rows[2].S_mW_per_cm2), 9);
  });
});

describe("targets of shielding and of absorber rooms", () => {
  it.each(["se-targets", "absorber-room-target"])(
    "%s: ranges of dB, from the weaker to the stronger",
    (id) => {
      const rows = z
        .array(z.record(z.string(), z.unknown()))
        .parse(referenceEntry("limits", id).expected.rows);
      for (const row of rows) {
        const [weak, strong] = z.array(z.number()).parse(row.SE_dB ?? row.R_dB_normal);
        const sense = id === "se-targets" ? ("above" as const) : ("below" as const);
        const limit = { sense, points: [[1, weak] as const] };
        expect(judgeLevels(limit, [1], [strong])).toMatchObject({
          holds: true,
          margin: Math.abs(strong - weak),
        });
        expect(judgeLevels(limit, [1], [0])).toMatchObject({ holds: false });
      }
    },
  );
});

describe("a limit of a scene", () => {
  it("is judged by the level of its probe in dB of its own unit: a table in dBµV/m less 120", async () => {
    const [, band] = bandsOf("cispr32-classB-above1GHz");
    const value = levelOf(band) - 120;
    const document: Document = {
      polarization: "TMz",
      section: { widthMm: 60, heightMm: 40 },
      band: { fromGHz: 3, toGHz: 6 },
      mesh: { cellMm: 2 },
      edges: ELECTRIC_BOX,
      media: [{ id: "lossy", name: "Lossy", conductivity: 0.02 }],
      background: "lossy",
      probes: [{ kind: "point", id: "p", x: 40, y: 20, field: "Ez" }],
      limits: [
        {
          id: "kept",
          name: "B",
          sense: "below",
          points: [
            [3, value],
            [6, value],
          ],
          of: { probe: "p" },
        },
        {
          id: "passed",
          name: "B",
          sense: "below",
          points: [
            [3, value],
            [6, value],
          ],
          of: { probe: "p" },
        },
      ],
    };
    const frequenciesGHz = [3, 4, 5, 6];
    const at = (amplitude: number) => ({
      ...document,
      sources: [{ kind: "line" as const, id: "w", x: 20, y: 15, amplitude }],
    });
    const unit = await solve(at(1), { frequenciesGHz });
    const levels = frequenciesGHz.map((_, n) => {
      const { re, im } = phasorOf(unit, "p", n);
      return 20 * Math.log10(Math.hypot(re, im));
    });
    const largest = Math.max(...levels);
    expect(unit.limits?.[0].margin).toBeCloseTo(value - largest, 6);
    // A source 0.1 dB short of the limit keeps it, one 0.1 dB over does not.
    const amplitude = 10 ** ((value - largest) / 20);
    const [under, over] = [
      await solve(at(amplitude / 1.0116), { frequenciesGHz }),
      await solve(at(amplitude * 1.0116), { frequenciesGHz }),
    ];
    expect(under.limits?.map(({ holds }) => holds)).toEqual([true, true]);
    expect(over.limits?.map(({ holds }) => holds)).toEqual([false, false]);
  });
});

describe("the entries", () => {
  it("are all looked at above", () => {
    const others = [
      "distance-extrapolation",
      "microwave-oven-leakage",
      "fcc-mpe-general",
      "se-targets",
      "absorber-room-target",
    ];
    expect(
      referenceEntries("limits")
        .map(({ id }) => id)
        .sort(),
    ).toEqual([...TABLES, ...others].sort());
  });
});
