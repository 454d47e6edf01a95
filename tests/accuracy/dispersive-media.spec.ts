/**
 * Slabs of Debye and Lorentz media, electric and magnetic, in a plane wave at normal incidence, against the layer-stack calculator. The
 * wave is the TEM wave of a strip: TEz between electric edges, TMz between magnetic ones, driven by a line source across it.
 */
import type { FillMedium } from "@heddle/kernels/scene";
import { complexPermeability, complexPermittivity } from "@heddle/kernels/scene";
import { EPS0, MU0 } from "@heddle/kernels/lattice";
import { stackResponse } from "@heddle/kernels/stack";
import { describe, expect, it } from "vitest";
import { measured } from "./support/measured.js";
import type { Document } from "./support/run.js";
import { ELECTRIC_BOX, OPEN_SPACE, phasorOf, solve } from "./support/run.js";

type Wave = "TMz" | "TEz";
const FREQUENCIES = [1.5, 2.5, 3.5, 4.5, 5.5];
const FACE = 60;
const THICKNESS = 9;

const medium = (id: string, changes: Partial<FillMedium>): FillMedium => ({
  id,
  name: id,
  relativePermittivity: 1,
  relativePermeability: 1,
  conductivity: 0,
  magneticLoss: 0,
  electricPoles: [],
  magneticPoles: [],
  ...changes,
});

const MEDIA = [
  medium("debye", {
    relativePermittivity: 2,
    conductivity: 0.02,
    electricPoles: [{ kind: "debye", delta: 3, tauNs: 0.05 }],
  }),
  medium("lorentz", {
    relativePermittivity: 1.5,
    electricPoles: [{ kind: "lorentz", delta: 1.2, resonanceGHz: 3.2, dampingGHz: 0.8 }],
  }),
  medium("magnetic-lorentz", {
    relativePermittivity: 3,
    magneticPoles: [{ kind: "lorentz", delta: 1.5, resonanceGHz: 3, dampingGHz: 1.5 }],
  }),
  medium("both", {
    electricPoles: [
      { kind: "debye", delta: 1.5, tauNs: 0.03 },
      { kind: "lorentz", delta: 1, resonanceGHz: 4, dampingGHz: 6 },
    ],
    magneticPoles: [{ kind: "debye", delta: 1.5, tauNs: 0.1 }],
  }),
];

const strip = (wave: Wave, cellMm: number, slab: FillMedium | null): Document => {
  const beside = wave === "TEz" ? ("electric" as const) : ("magnetic" as const);
  const half = cellMm / 2;
  const at = (x: number): number => (wave === "TEz" ? x + half : x);
  return {
    polarization: wave,
    section: { widthMm: 120, heightMm: 6 },
    band: { fromGHz: 1, toGHz: 6 },
    mesh: { cellMm },
    edges: { left: "absorbing", right: "absorbing", bottom: beside, top: beside },
    media: slab ? [slab] : [],
    paint: slab
      ? [{ kind: "rectangle", id: "slab", medium: slab.id, x: FACE, y: 0, width: THICKNESS, height: 6 }]
      : [],
    sources: [{ kind: "line", id: "wire", x: at(20), y: 3 }],
    probes: [40, 90].map((x) => ({
      kind: "point" as const,
      id: x === 40 ? "before" : "behind",
      x: at(x),
      y: 3,
      field: wave === "TEz" ? ("Hz" as const) : ("Ez" as const),
    })),
    stop: { maxTimeNs: 60, decayDb: 100 },
  };
};

interface Complex {
  re: number;
  im: number;
}
const times = (a: Complex, b: Complex): Complex => ({
  re: a.re * b.re - a.im * b.im,
  im: a.re * b.im + a.im * b.re,
});
const over = (a: Complex, b: Complex): Complex => {
  const norm = b.re * b.re + b.im * b.im;
  return { re: (a.re * b.re + a.im * b.im) / norm, im: (a.im * b.re - a.re * b.im) / norm };
};
const minus = (a: Complex, b: Complex): Complex => ({ re: a.re - b.re, im: a.im - b.im });
const size = (a: Complex): number => Math.hypot(a.re, a.im);
const turned = (a: Complex, angle: number): Complex => times(a, { re: Math.cos(angle), im: Math.sin(angle) });

/** Reflection at the front face and transmission to the back face, as ratios of the field along z. */
async function runs(wave: Wave, cellMm: number, slab: FillMedium): Promise<{ r: Complex; t: Complex }[]> {
  const options = { frequenciesGHz: FREQUENCIES };
  const filled = await solve(strip(wave, cellMm, slab), options);
  const empty = await solve(strip(wave, cellMm, null), options);
  const probe = 40 + (wave === "TEz" ? cellMm / 2 : 0);
  return FREQUENCIES.map((frequency, index) => {
    const k = (2 * Math.PI * frequency) / 299.792458;
    const incident = phasorOf(empty, "before", index);
    const reflected = over(minus(phasorOf(filled, "before", index), incident), incident);
    const passed = over(phasorOf(filled, "behind", index), phasorOf(empty, "behind", index));
    return { r: turned(reflected, 2 * k * (FACE - probe)), t: turned(passed, -k * THICKNESS) };
  });
}

describe.each(["TMz", "TEz"] as const)("dispersive slabs, %s", (wave) => {
  it.each(MEDIA)("$id", async (slab) => {
    const [coarse, fine] = [await runs(wave, 1, slab), await runs(wave, 0.5, slab)];
    const worst = { coarse: 0, fine: 0, extrapolated: 0 };
    FREQUENCIES.forEach((frequencyGHz, index) => {
      const stack = {
        elements: [{ kind: "layer" as const, medium: slab, thicknessMm: THICKNESS }],
        backing: medium("air", {}),
      };
      const exact = stackResponse(stack, { polarization: wave, angleDeg: 0, frequencyGHz });
      for (const [got, want] of [
        ["r", exact.fieldReflection],
        ["t", exact.fieldTransmission ?? { re: NaN, im: NaN }],
      ] as const) {
        const [a, b] = [coarse[index][got], fine[index][got]];
        const limit = { re: (4 * b.re - a.re) / 3, im: (4 * b.im - a.im) / 3 };
        worst.coarse = Math.max(worst.coarse, size(minus(a, want)));
        worst.fine = Math.max(worst.fine, size(minus(b, want)));
        worst.extrapolated = Math.max(worst.extrapolated, size(minus(limit, want)));
      }
    });
    measured(`${wave} ${slab.id}, 1 mm`, worst.coarse);
    measured(`${wave} ${slab.id}, 0.5 mm`, worst.fine);
    measured(`${wave} ${slab.id}, extrapolated`, worst.extrapolated);
    expect(worst.extrapolated).toBeLessThan(0.005);
  });
});

describe.each(["TMz", "TEz"] as const)("a cavity filled with a Lorentz medium, %s", (wave) => {
  // Source: the cavity's wave number is that of its shape, so that ω²μ(ω)ε(ω) = (π/a)² + (π/b)² at a complex ω
  // (D. M. Pozar, Microwave Engineering, section 6.3, for a constant medium); Q = Re ω/(2 Im ω). Bar: 0.5 % in Q.
  const [a, b] = [30, 20];
  const filling = medium("filling", {
    relativePermittivity: 2,
    electricPoles: [{ kind: "lorentz", delta: 0.8, resonanceGHz: 9, dampingGHz: 0.6 }],
    magneticPoles: [{ kind: "lorentz", delta: 0.3, resonanceGHz: 14, dampingGHz: 0.4 }],
  });
  /** χ at a complex frequency in GHz. */
  const chi = (pole: FillMedium["electricPoles"][number], f: Complex): Complex => {
    if (pole.kind !== "lorentz") throw new Error("Only Lorentz poles fill this cavity.");
    const squared = times(f, f);
    const strength = pole.delta * pole.resonanceGHz ** 2;
    const under = {
      re: pole.resonanceGHz ** 2 - squared.re - pole.dampingGHz * f.im,
      im: -squared.im + pole.dampingGHz * f.re,
    };
    return over({ re: strength, im: 0 }, under);
  };
  const index2 = (f: Complex): Complex => {
    const [e, m] = [chi(filling.electricPoles[0], f), chi(filling.magneticPoles[0], f)];
    return times(
      { re: filling.relativePermittivity + e.re, im: e.im },
      { re: filling.relativePermeability + m.re, im: m.im },
    );
  };
  /** The root below both resonances, by f ← f₀/√(εμ(f)). */
  const exact = (): Complex => {
    const empty = 299.792458 * Math.hypot(0.5 / a, 0.5 / b);
    let f: Complex = { re: empty / Math.SQRT2, im: 0 };
    for (let n = 0; n < 500; n += 1) {
      const ratio = over({ re: empty * empty, im: 0 }, index2(f));
      const modulus = Math.sqrt(size(ratio));
      const angle = Math.atan2(ratio.im, ratio.re) / 2;
      f = { re: (f.re + modulus * Math.cos(angle)) / 2, im: (f.im + modulus * Math.sin(angle)) / 2 };
    }
    return f;
  };

  it("rings at the right frequency with the right Q", async () => {
    const root = exact();
    const [f, q] = [root.re, root.re / (2 * root.im)];
    const onField = wave === "TMz" ? ("Ez" as const) : ("Hz" as const);
    const rings = await Promise.all(
      [1, 0.5].map(async (cellMm) => {
        const result = await solve({
          polarization: wave,
          section: { widthMm: a, heightMm: b },
          band: { fromGHz: 0.85 * f, toGHz: 1.15 * f },
          mesh: { cellMm },
          edges: ELECTRIC_BOX,
          media: [filling],
          background: "filling",
          sources: [{ kind: "line", id: "wire", x: 7, y: 5 }],
          probes: [{ kind: "point", id: "p", x: 23, y: 6, field: onField }],
          stop: { maxTimeNs: 60, decayDb: 120 },
        });
        const told = (result.resonances ?? [])
          .toSorted((m, n) => Math.abs(m.GHz - f) - Math.abs(n.GHz - f))
          .at(0);
        if (!told) throw new Error("No resonance was found.");
        return told;
      }),
    );
    rings.forEach((ring) => {
      measured(`${wave} cavity, f ${ring.GHz} for ${f}`, ring.GHz / f - 1);
      measured(`${wave} cavity, Q ${String(ring.q)} for ${q}`, (ring.q ?? Infinity) / q - 1);
    });
    const [coarse, fine] = rings;
    expect(Math.abs((4 * fine.GHz - coarse.GHz) / 3 / f - 1)).toBeLessThan(1e-4);
    expect(Math.abs((4 * (fine.q ?? Infinity) - (coarse.q ?? Infinity)) / 3 / q - 1)).toBeLessThan(0.005);
  });
});

describe.each(["TMz", "TEz"] as const)("a dispersive rod in a plane wave, %s", (wave) => {
  // At one frequency a medium with poles is a medium of constant ε, σ, μ and σ*: the fields in and around both must be the same, and those of
  // constant media are proven against Bessel series (cylinders.spec.ts). Cut cells and their means are what differs.
  // Bar: 1 % of the largest field, as for cylinders of media there.
  const ghz = 6;
  const omega = 2e9 * Math.PI * ghz;
  const rods: FillMedium[] = [
    medium("rod", { relativePermittivity: 1.5, electricPoles: [{ kind: "debye", delta: 3, tauNs: 0.03 }] }),
    medium("rod", {
      relativePermittivity: 2,
      electricPoles: [{ kind: "lorentz", delta: 1, resonanceGHz: 7, dampingGHz: 2 }],
      magneticPoles: [{ kind: "lorentz", delta: 0.8, resonanceGHz: 8, dampingGHz: 1 }],
    }),
  ];
  const places = [0, 4, 8.3, 9.7, 12].flatMap((r) => [0, 50, 120, 180].map((angle) => ({ r, angle })));

  const fields = async (rod: FillMedium): Promise<Complex[]> => {
    const half = 20;
    const result = await solve(
      {
        polarization: wave,
        section: { widthMm: 2 * half, heightMm: 2 * half },
        band: { fromGHz: 3, toGHz: 10 },
        mesh: { cellMm: 0.4 },
        edges: OPEN_SPACE,
        media: [rod],
        paint: [{ kind: "ellipse", id: "cylinder", medium: "rod", x: half, y: half, rx: 9, ry: 9 }],
        sources: [{ kind: "plane-wave", id: "wave", angle: 20 }],
        probes: places.map(({ r, angle }, n) => ({
          kind: "point" as const,
          id: `p${n}`,
          x: half + r * Math.cos((angle * Math.PI) / 180),
          y: half + r * Math.sin((angle * Math.PI) / 180),
          field: wave === "TMz" ? ("Ez" as const) : ("Hz" as const),
        })),
        stop: { maxTimeNs: 40, decayDb: 80 },
      },
      { frequenciesGHz: [ghz] },
    );
    return places.map((_, n) => phasorOf(result, `p${n}`));
  };

  it.each([0, 1])("number %d", async (number) => {
    const rod = rods[number];
    const [epsilon, mu] = [complexPermittivity(rod, ghz), complexPermeability(rod, ghz)];
    const constant = medium("rod", {
      relativePermittivity: epsilon.re,
      conductivity: -epsilon.im * omega * EPS0,
      relativePermeability: mu.re,
      magneticLoss: -mu.im * omega * MU0,
    });
    const [got, want] = [await fields(rod), await fields(constant)];
    const largest = Math.max(...want.map(size));
    const worst = Math.max(...got.map((value, n) => size(minus(value, want[n])))) / largest;
    measured(`${wave} dispersive rod ${number} against constant`, worst);
    expect(worst).toBeLessThan(0.01);
  });
});
