/**
 * Cut-offs and Q of closed sections by the direct eigen-solution (`@heddle/kernels/modes`), the extrapolated values of its two
 * meshes. Sources: closed forms for rectangles and triangles (D. M. Pozar, Microwave Engineering, 4th ed. 2012, sec. 3.3; G. Lamé 1852 after
 * B. J. McCartin, SIAM Rev. 45 (2003) 267), Bessel zeros (DLMF 10.21; N. Marcuvitz, Waveguide Handbook, 1951, sec. 2.4), the L-shape
 * after T. Betcke and L. N. Trefethen, ridged guides by an edge-singular Galerkin method, lossy cavities by their exact complex
 * roots; each entry in `reference` names its own. Meshes, stated at each check, are the entries' or coarser, to keep this short.
 * Tolerances: the entries have 3e-4 for standard guides and 2e-2 to 3e-3 for the rest, which they give to staircases; the checks hold
 * what conforming elements do: 1e-5 for standard guides, 5e-5 for round ones, 2e-5 for triangles, ridges and the L. Q: 1e-3 of a wall's, 2e-3
 * of lossy media's.
 */
import type { ModesDocument } from "@heddle/kernels/modes";
import { findModes } from "@heddle/kernels/modes";
import type { SceneInput } from "@heddle/kernels/scene";
import { readScene } from "@heddle/kernels/scene";
import { describe, expect, it } from "vitest";
import { z } from "zod";
import { measured } from "./support/measured.js";
import type { ReferenceEntry } from "./support/reference.js";
import { numberAt, referenceEntries, referenceEntry } from "./support/reference.js";
import { ELECTRIC_BOX } from "./support/run.js";

type Polarization = "TMz" | "TEz";
type Paint = NonNullable<SceneInput["paint"]>;

interface Section {
  widthMm: number;
  heightMm: number;
  cellMm: number;
  paint?: Paint;
  media?: SceneInput["media"];
  background?: string;
  wallConductivity?: number;
}

/** Modes of a closed section; the band only has to admit the mesh. */
function modesOf(polarization: Polarization, section: Section, count = 10): ModesDocument["modes"] {
  const { widthMm, heightMm, cellMm, ...rest } = section;
  const read = readScene({
    format: "heddle-scene",
    version: 1,
    name: "accuracy",
    polarization,
    section: { widthMm, heightMm },
    band: { fromGHz: 1e-3, toGHz: 2e-3 },
    mesh: { cellMm },
    edges: ELECTRIC_BOX,
    stop: { maxTimeNs: 1 },
    ...rest,
  });
  if (!read.ok) throw new Error(read.problems.map(({ path, sentence }) => `${path}: ${sentence}`).join("\n"));
  const modes = findModes(read.scene, count).modes;
  expect(modes.length).toBe(count);
  return modes;
}

const mmAt = (entry: ReferenceEntry, key: string): number => numberAt(entry.geometry, key) * 1000;
const numbersAt = (entry: ReferenceEntry, key: string): number[] =>
  z.array(z.number()).parse(entry.expected[key]);

/** The modes found are the expected ones, in order from the lowest. */
function expectCutoffs(
  name: string,
  modes: ModesDocument["modes"],
  hertz: readonly number[],
  tolerance: number,
): void {
  hertz.forEach((expected, n) => {
    const { cutoffGHz, uncertaintyGHz } = modes[n];
    const error = (cutoffGHz * 1e9) / expected - 1;
    measured(`modes ${name} [${n}]`, error);
    expect(Math.abs(error), `${name} [${n}]`).toBeLessThan(tolerance);
    // The stated uncertainty covers the true error (10⁻⁹: both meshes exact but for rounding).
    expect(Math.abs(cutoffGHz - expected / 1e9), `${name} [${n}]`).toBeLessThan(
      uncertaintyGHz + 1e-9 * cutoffGHz,
    );
  });
}

/** The mode nearest to an expected frequency. */
function nearest(modes: ModesDocument["modes"], hertz: number): ModesDocument["modes"][number] {
  return modes.reduce((best, mode) =>
    Math.abs(mode.cutoffGHz * 1e9 - hertz) < Math.abs(best.cutoffGHz * 1e9 - hertz) ? mode : best,
  );
}

describe("rectangular guides, 1e-5", () => {
  const guides = referenceEntries("cutoffs").filter(({ id }) => /^cut-rect-wr\d+$/.test(id));
  it.each(guides)("$id: TE10, TE20, TE01 at 40 cells across", (entry) => {
    const a = mmAt(entry, "a_m");
    const modes = modesOf("TEz", { widthMm: a, heightMm: mmAt(entry, "b_m"), cellMm: a / 40 }, 3);
    const hertz = ["fc_TE10_Hz", "fc_TE20_Hz", "fc_TE01_Hz"].map((key) => numberAt(entry.expected, key));
    expectCutoffs(
      entry.id,
      modes,
      hertz.sort((p, q) => p - q),
      1e-5,
    );
  });

  it("cut-rect-wr90-first10 at 60 cells across", () => {
    const entry = referenceEntry("cutoffs", "cut-rect-wr90-first10");
    const list = z.array(z.object({ mode: z.string(), fc_Hz: z.number() })).parse(entry.expected.modes);
    const a = mmAt(entry, "a_m");
    const section = { widthMm: a, heightMm: mmAt(entry, "b_m"), cellMm: a / 60 };
    for (const [polarization, prefix] of [
      ["TEz", "TE"],
      ["TMz", "TM"],
    ] as const) {
      const hertz = list.filter(({ mode }) => mode.startsWith(prefix)).map(({ fc_Hz }) => fc_Hz);
      expectCutoffs(`wr90 ${prefix}`, modesOf(polarization, section, hertz.length), hertz, 1e-5);
    }
  });

  it("WR-90 at the default 20 cells per shortest wavelength of a band up to its third mode", () => {
    const entry = referenceEntry("cutoffs", "cut-rect-wr90");
    const read = readScene({
      format: "heddle-scene",
      version: 1,
      name: "default mesh",
      polarization: "TEz",
      section: { widthMm: 22.86, heightMm: 10.16 },
      band: { fromGHz: 5, toGHz: 15 },
      edges: ELECTRIC_BOX,
    });
    if (!read.ok) throw new Error("The scene is refused.");
    const hertz = ["fc_TE10_Hz", "fc_TE20_Hz", "fc_TE01_Hz"].map((key) => numberAt(entry.expected, key));
    expectCutoffs("wr90 default", findModes(read.scene, 3).modes, hertz, 1e-5);
  });

  it("cut-square-30mm: degenerate modes stand twice, at 40 cells a side", () => {
    const entry = referenceEntry("cutoffs", "cut-square-30mm");
    const section = { widthMm: 30, heightMm: 30, cellMm: 0.75 };
    const [tm11, tm12, tm22, tm13] = numbersAt(entry, "TMz_fc_Hz");
    expectCutoffs("square TM", modesOf("TMz", section, 6), [tm11, tm12, tm12, tm22, tm13, tm13], 1e-5);
    const [te10, te11, te20, te12] = numbersAt(entry, "TEz_fc_Hz");
    const te = [te10, te10, te11, te20, te20, te12, te12];
    expectCutoffs("square TE", modesOf("TEz", section, 7), te, 1e-5);
  });
});

/** Metal everywhere but in the shapes. */
const carved = (widthMm: number, heightMm: number, cellMm: number, paint: Paint): Section => ({
  widthMm,
  heightMm,
  cellMm,
  background: "pec",
  paint,
});

describe("triangles, 2e-5", () => {
  it("cut-equitri-40mm at 30 cells a side", () => {
    const entry = referenceEntry("section-cutoffs", "cut-equitri-40mm");
    const side = mmAt(entry, "side_m");
    const height = (side * Math.sqrt(3)) / 2;
    const triangle: Paint[number] = {
      kind: "polygon",
      id: "t",
      medium: "air",
      points: [
        [0, 0],
        [side, 0],
        [side / 2, height],
      ],
    };
    const section = carved(side, height, side / 30, [triangle]);
    const [tm1, tm2] = numbersAt(entry, "TMz_fc_Hz");
    expectCutoffs("equitri TM", modesOf("TMz", section, 3), [tm1, tm2, tm2], 2e-5);
    const [te1, te2] = numbersAt(entry, "TEz_fc_Hz");
    expectCutoffs("equitri TE", modesOf("TEz", section, 3), [te1, te1, te2], 2e-5);
  });

  it("cut-righttri-32mm at 24 cells a leg", () => {
    const entry = referenceEntry("section-cutoffs", "cut-righttri-32mm");
    const leg = mmAt(entry, "leg_m");
    const triangle: Paint[number] = {
      kind: "polygon",
      id: "t",
      medium: "air",
      points: [
        [0, 0],
        [leg, 0],
        [0, leg],
      ],
    };
    const section = carved(leg, leg, leg / 24, [triangle]);
    expectCutoffs("righttri TM", modesOf("TMz", section, 2), numbersAt(entry, "TMz_fc_Hz"), 2e-5);
    expectCutoffs("righttri TE", modesOf("TEz", section, 2), numbersAt(entry, "TEz_fc_Hz"), 2e-5);
  });
});

const disc = (id: string, medium: string, centre: number, radius: number): Paint[number] => ({
  kind: "ellipse",
  id,
  medium,
  x: centre,
  y: centre,
  rx: radius,
  ry: radius,
});

describe("round guides, 5e-5", () => {
  const circles = referenceEntries("section-cutoffs").filter(({ id }) => id.startsWith("cut-circ"));
  const listSchema = z.array(z.object({ mode: z.string(), fc_Hz: z.number(), degeneracy: z.number() }));
  it.each(circles)("$id: its ten modes, degenerate ones twice, at 20 cells a diameter", (entry) => {
    const r = mmAt(entry, "radius_m");
    const section = carved(2 * r, 2 * r, r / 10, [disc("hole", "air", r, r)]);
    const list = listSchema.parse(entry.expected.modes);
    for (const [polarization, prefix] of [
      ["TEz", "TE"],
      ["TMz", "TM"],
    ] as const) {
      const hertz = list
        .filter(({ mode }) => mode.startsWith(prefix))
        .flatMap(({ fc_Hz, degeneracy }) => Array.from({ length: degeneracy }, () => fc_Hz));
      const modes = modesOf(polarization, section, hertz.length);
      expectCutoffs(`${entry.id} ${prefix}`, modes, hertz, 5e-5);
    }
  });

  it("cut-semicirc-20mm at 15 cells a radius", () => {
    const entry = referenceEntry("section-cutoffs", "cut-semicirc-20mm");
    const r = mmAt(entry, "radius_m");
    const half: Paint[number] = { kind: "ellipse", id: "h", medium: "air", x: r, y: 0, rx: r, ry: r };
    const section = carved(2 * r, r, r / 15, [half]);
    expectCutoffs("semicirc TM", modesOf("TMz", section, 2), numbersAt(entry, "TMz_fc_Hz"), 2e-5);
    expectCutoffs("semicirc TE", modesOf("TEz", section, 2), numbersAt(entry, "TEz_fc_Hz"), 2e-5);
  });

  const lines = referenceEntries("section-cutoffs").filter(({ id }) => id.startsWith("cut-coax"));
  it.each(lines)("$id: higher-order modes at 8 cells across the gap", (entry) => {
    const a = mmAt(entry, "inner_radius_m");
    const b = mmAt(entry, "outer_radius_m");
    const section = carved(2 * b, 2 * b, (b - a) / 8, [disc("out", "air", b, b), disc("in", "pec", b, a)]);
    const at = (key: string): number => numberAt(entry.expected, key);
    const te = ["fc_TE11_Hz", "fc_TE21_Hz", "fc_TE31_Hz"].map(at).flatMap((f) => [f, f]);
    const modes = modesOf("TEz", section, 16);
    expectCutoffs(
      `${entry.id} TE`,
      modes,
      te.filter((f) => f < at("fc_TE01_Hz")),
      5e-5,
    );
    const te01 = nearest(modes, at("fc_TE01_Hz")).cutoffGHz * 1e9;
    measured(`modes ${entry.id} TE01`, te01 / at("fc_TE01_Hz") - 1);
    expect(Math.abs(te01 / at("fc_TE01_Hz") - 1)).toBeLessThan(5e-5);
    const tm = [at("fc_TM01_Hz"), at("fc_TM11_Hz"), at("fc_TM11_Hz")];
    expectCutoffs(`${entry.id} TM`, modesOf("TMz", section, 3), tm, 5e-5);
  });

  it("cut-quarterannulus-10-25mm at 15 cells across", () => {
    const entry = referenceEntry("section-cutoffs", "cut-quarterannulus-10-25mm");
    const section = carved(25, 25, 1, [disc("out", "air", 0, 25), disc("in", "pec", 0, 10)]);
    expectCutoffs("annulus TM", modesOf("TMz", section, 1), numbersAt(entry, "TMz_fc_Hz"), 2e-5);
    expectCutoffs("annulus TE", modesOf("TEz", section, 2), numbersAt(entry, "TEz_fc_Hz"), 2e-5);
  });
});

describe("sections with re-entrant corners, 2e-5", () => {
  it("cut-lshape-20mm at 20 cells a square", () => {
    const entry = referenceEntry("section-cutoffs", "cut-lshape-20mm");
    const block: Paint = [
      { kind: "rectangle", id: "block", medium: "pec", x: 20, y: 20, width: 20, height: 20 },
    ];
    const section = { widthMm: 40, heightMm: 40, cellMm: 1, paint: block };
    const tm = numbersAt(entry, "TMz_fc_Hz");
    expectCutoffs("L TM", modesOf("TMz", section, tm.length), tm, 2e-5);
    const te = numbersAt(entry, "TEz_fc_Hz");
    expectCutoffs("L TE", modesOf("TEz", section, te.length), te, 2e-5);
  });

  const ridges = referenceEntries("section-cutoffs").filter(({ id }) => id.includes("ridge"));
  it.each(ridges)("$id at 0.5 mm", (entry) => {
    const a = mmAt(entry, "a_m");
    const b = mmAt(entry, "b_m");
    const width = mmAt(entry, "ridge_width_m");
    const gap = mmAt(entry, "gap_m");
    const double = entry.geometry.shape === "double ridge";
    const height = double ? (b - gap) / 2 : b - gap;
    const ridge = (id: string, y: number): Paint[number] => ({
      kind: "rectangle",
      id,
      medium: "pec",
      x: (a - width) / 2,
      y,
      width,
      height,
    });
    const paint = double ? [ridge("lower", 0), ridge("upper", b - height)] : [ridge("lower", 0)];
    const section = { widthMm: a, heightMm: b, cellMm: 0.5, paint };
    const te = modesOf("TEz", section, 8);
    expectCutoffs(`${entry.id} TE`, te, [numberAt(entry.expected, "fc_TE10_Hz")], 2e-5);
    for (const [modes, key] of [
      [te, "fc_TE20like_Hz"],
      [modesOf("TMz", section, 4), "fc_TM_lowest_x_even_Hz"],
    ] as const) {
      const expected = numberAt(entry.expected, key);
      const error = (nearest(modes, expected).cutoffGHz * 1e9) / expected - 1;
      measured(`modes ${entry.id} ${key}`, error);
      expect(Math.abs(error), key).toBeLessThan(2e-5);
    }
  });
});

// Bar of media: 0.5 %, held to 2e-3 at every Q.
describe("Q of walls and media", () => {
  const lossy = (entry: ReferenceEntry) => ({
    id: "lossy",
    name: "Lossy",
    relativePermittivity: numberAt(entry.geometry, "eps_r"),
    relativePermeability: numberAt(entry.geometry, "mu_r"),
    conductivity: numberAt(entry.geometry, "sigma_S_per_m"),
    magneticLoss: numberAt(entry.geometry, "sigma_m_ohm_per_m"),
  });

  const uniform = referenceEntries("cavities").filter((entry) => entry.id.startsWith("cav-uniform"));
  it.each(uniform)("$id, the polarizations that have it, at 1 mm: 2e-3", (entry) => {
    const { a_m, b_m, m, n, eps_r, mu_r } = z.record(z.string(), z.number()).parse(entry.geometry);
    const hertz = ((299792458 / 2) * Math.hypot(m / a_m, n / b_m)) / Math.sqrt(eps_r * mu_r);
    // A mode that does not vary along one side exists in TEz alone.
    for (const polarization of m * n > 0 ? (["TMz", "TEz"] as const) : (["TEz"] as const)) {
      const section = {
        widthMm: 1000 * a_m,
        heightMm: 1000 * b_m,
        cellMm: 1,
        media: [lossy(entry)],
        background: "lossy",
      };
      const q = nearest(modesOf(polarization, section, 10), hertz).mediaQ ?? 0;
      measured(`modes ${entry.id} ${polarization} Q`, q / numberAt(entry.expected, "Q") - 1);
      expect(Math.abs(q / numberAt(entry.expected, "Q") - 1)).toBeLessThan(2e-3);
    }
  });

  const slabs = referenceEntries("cavities").filter((entry) => entry.id.startsWith("cav-slab"));
  it.each(slabs)("$id at 1 mm: f without loss 1e-5; Q 2e-3", (entry) => {
    const widthMm = mmAt(entry, "a_m");
    const heightMm = mmAt(entry, "b_m");
    const polarization = entry.geometry.pol === "TMz" ? "TMz" : "TEz";
    const slab: Paint[number] = {
      kind: "rectangle",
      id: "slab",
      medium: "lossy",
      x: 0,
      y: 0,
      width: mmAt(entry, "slab_thickness_m"),
      height: heightMm,
    };
    const section = { widthMm, heightMm, cellMm: 1, media: [lossy(entry)], paint: [slab] };
    const hertz = numberAt(entry.expected, "lossless_f_Hz");
    const mode = nearest(modesOf(polarization, section, 6), hertz);
    measured(`modes ${entry.id} f`, (mode.cutoffGHz * 1e9) / hertz - 1);
    expect(Math.abs((mode.cutoffGHz * 1e9) / hertz - 1)).toBeLessThan(1e-5);
    const exact = numberAt(entry.expected, "Q");
    const error = (mode.mediaQ ?? 0) / exact - 1;
    measured(`modes ${entry.id} Q (exact ${exact.toFixed(0)})`, error);
    expect(Math.abs(error)).toBeLessThan(2e-3);
  });

  const walls = referenceEntries("wall-losses");
  it.each(walls)("$id: copper and steel walls at 0.5 mm, 1e-3", (entry) => {
    const { a_m, b_m, wall_sigma_S_per_m } = z
      .object({ a_m: z.number(), b_m: z.number(), wall_sigma_S_per_m: z.number() })
      .parse(entry.geometry);
    const section = {
      widthMm: 1000 * a_m,
      heightMm: 1000 * b_m,
      cellMm: 0.5,
      wallConductivity: wall_sigma_S_per_m,
    };
    const hertz = numberAt(entry.expected, "f0_pec_Hz");
    const mode = nearest(modesOf("TMz", section, 4), hertz);
    const expected = numberAt(entry.expected, "Q_perturbation");
    measured(`modes ${entry.id} Q`, (mode.wallQ ?? 0) / expected - 1);
    expect(Math.abs((mode.wallQ ?? 0) / expected - 1)).toBeLessThan(1e-3);
    expect(Math.abs((mode.cutoffGHz * 1e9) / hertz - 1)).toBeLessThan(1e-5);
  });
});
