/**
 * Frequency and Q of lossy cavities, for σ and for σ*, uniformly filled and with a slab, by time-domain runs through the public door.
 * Source: (εs + σ)(μs + σ*) = −k², cf. R. F. Harrington, Time-Harmonic Electromagnetic Fields (1961); slabs: transverse
 * resonance, R. E. Collin, Field Theory of Guided Waves, 2nd ed. (1991), ch. 6; both computed in the entries.
 * Tolerance: what the solver does — uniform 1e-3 in f and in Q at 40 cells per wavelength (2e-3 and 1e-3 in the entries);
 * slabs 5e-4 in f, 5e-3 in Q at 0.5 mm (3e-3 and 2e-2 in the entries).
 */
import { describe, expect, it } from "vitest";
import { measured } from "./support/measured.js";
import { complexSchema, numberAt, referenceEntries } from "./support/reference.js";
import { ringMode } from "./support/ring-down.js";
import { ELECTRIC_BOX, solve, traceOf } from "./support/run.js";

interface Case {
  polarization: "TMz" | "TEz";
  widthMm: number;
  heightMm: number;
  cellMm: number;
  f: number;
  /** Distance to the next mode in GHz. */
  gap: number;
  slabMm: number | null;
  geometry: Record<string, unknown>;
  source: { x: number; y: number };
  probe: { x: number; y: number };
}

interface Ring {
  f: number;
  q: number;
  /** The same mode among the resonances that the result tells. */
  told: { f: number; q: number; fUncertainty: number; qUncertainty: number };
}

async function ring(one: Case): Promise<Ring> {
  const { geometry, slabMm } = one;
  const medium = {
    id: "filling",
    name: "Filling",
    relativePermittivity: numberAt(geometry, "eps_r"),
    relativePermeability: numberAt(geometry, "mu_r"),
    conductivity: numberAt(geometry, "sigma_S_per_m"),
    magneticLoss: numberAt(geometry, "sigma_m_ohm_per_m"),
  };
  const window = 6 / one.gap;
  const pulse = { kind: "pulse", centerGHz: one.f, widthGHz: Math.min(one.f, 1.5 * one.gap) } as const;
  const pulseNs = (12 * Math.sqrt(2 * Math.LN10)) / (Math.PI * pulse.widthGHz);
  const result = await solve({
    polarization: one.polarization,
    section: { widthMm: one.widthMm, heightMm: one.heightMm },
    band: { fromGHz: 0.8 * one.f, toGHz: 1.2 * one.f },
    mesh: { cellMm: one.cellMm },
    edges: ELECTRIC_BOX,
    media: [medium],
    background: slabMm === null ? "filling" : "air",
    paint:
      slabMm === null
        ? []
        : [
            {
              kind: "rectangle",
              id: "slab",
              medium: "filling",
              x: 0,
              y: 0,
              width: slabMm,
              height: one.heightMm,
            },
          ],
    sources: [{ kind: "line", id: "wire", ...one.source, waveform: pulse }],
    probes: [{ kind: "point", id: "p", ...one.probe, field: one.polarization === "TMz" ? "Ez" : "Hz" }],
    stop: { maxTimeNs: pulseNs + 1.2 * window, decayDb: 300 },
  });
  const mode = ringMode(traceOf(result, "p"), pulseNs * 1e-9, window * 1e-9, one.f * 1e9);
  const [told] = [...(result.resonances ?? [])].sort(
    (a, b) => Math.abs(a.GHz - one.f) - Math.abs(b.GHz - one.f),
  );
  return {
    f: mode.frequency / 1e9,
    q: mode.q,
    told: {
      f: told.GHz,
      q: told.q ?? Number.NaN,
      fUncertainty: told.ghzUncertainty ?? Number.NaN,
      qUncertainty: told.qUncertainty ?? Number.NaN,
    },
  };
}

const nextMode = (
  polarization: string,
  a: number,
  b: number,
  m: number,
  n: number,
  index: number,
): number => {
  const lowest = polarization === "TMz" ? 1 : 0;
  const own = Math.hypot(m / a, n / b);
  let gap = Number.POSITIVE_INFINITY;
  for (let p = lowest; p < 8; p += 1) {
    for (let q = lowest; q < 8; q += 1) {
      if ((p === m && q === n) || p + q === 0) continue;
      gap = Math.min(gap, Math.abs(Math.hypot(p / a, q / b) - own));
    }
  }
  return (149.896229 * gap) / index;
};

describe("uniformly filled cavities", () => {
  const entries = referenceEntries("cavities").filter(({ id }) => id.startsWith("cav-uniform"));
  const cases = entries.flatMap((entry) => {
    const both = numberAt(entry.geometry, "n") > 0;
    return (both ? (["TMz", "TEz"] as const) : (["TEz"] as const)).map((polarization) => ({
      name: `${entry.id} ${polarization}`,
      polarization,
      entry,
    }));
  });
  it.each(cases)("$name: f and Q within 1e-3", async ({ polarization, entry }) => {
    const { geometry, expected } = entry;
    const widthMm = numberAt(geometry, "a_m") * 1000;
    const heightMm = numberAt(geometry, "b_m") * 1000;
    const index = Math.sqrt(numberAt(geometry, "eps_r") * numberAt(geometry, "mu_r"));
    const f = numberAt(expected, "f_real_Hz") / 1e9;
    const [m, n] = [numberAt(geometry, "m"), numberAt(geometry, "n")];
    const found = await ring({
      polarization,
      widthMm,
      heightMm,
      // 40 cells per wavelength in the medium.
      cellMm: 299.792458 / f / index / 40,
      f,
      gap: nextMode(polarization, widthMm, heightMm, m, n, index),
      slabMm: null,
      geometry,
      source: { x: 0.21 * widthMm, y: 0.17 * heightMm },
      probe: { x: 0.83 * widthMm, y: 0.88 * heightMm },
    });
    measured(`${entry.id} ${polarization} f`, found.f / f - 1);
    measured(`${entry.id} ${polarization} Q`, found.q / numberAt(expected, "Q") - 1);
    expect(Math.abs(found.f / f - 1)).toBeLessThan(1e-3);
    expect(Math.abs(found.q / numberAt(expected, "Q") - 1)).toBeLessThan(1e-3);
    measured(`${entry.id} ${polarization} Q told`, found.told.q / numberAt(expected, "Q") - 1);
    measured(`${entry.id} ${polarization} Q uncertainty`, found.told.qUncertainty / found.told.q);
    expect(Math.abs(found.told.f / f - 1)).toBeLessThan(1e-3);
    expect(Math.abs(found.told.q / numberAt(expected, "Q") - 1)).toBeLessThan(1e-3);
  });
});

describe("cavities with a lossy slab on one wall", () => {
  const entries = referenceEntries("cavities").filter(({ id }) => id.startsWith("cav-slab"));
  it.each(entries)("$id: f within 5e-4, Q within 5e-3", async ({ id, geometry, expected }) => {
    const polarization = geometry.pol === "TMz" ? "TMz" : "TEz";
    const widthMm = numberAt(geometry, "a_m") * 1000;
    const heightMm = numberAt(geometry, "b_m") * 1000;
    const slabMm = numberAt(geometry, "slab_thickness_m") * 1000;
    const f = complexSchema.parse(expected.f_complex_Hz).re / 1e9;
    const q = numberAt(expected, "Q");
    const ny = numberAt(geometry, "n_y");
    const root = numberAt(geometry, "root_x");
    const [m] = polarization === "TMz" ? [root] : [ny === 0 ? root : root - 1];
    const found = await ring({
      polarization,
      widthMm,
      heightMm,
      cellMm: 0.5,
      f,
      gap: 0.8 * nextMode(polarization, widthMm, heightMm, m, ny, 1),
      slabMm,
      geometry,
      source: { x: 0.71 * widthMm, y: 0.37 * heightMm },
      probe: { x: 0.83 * widthMm, y: 0.63 * heightMm },
    });
    measured(`${id} f`, found.f / f - 1);
    measured(`${id} Q`, found.q / q - 1);
    expect(Math.abs(found.f / f - 1), id).toBeLessThan(5e-4);
    expect(Math.abs(found.q / q - 1), id).toBeLessThan(5e-3);
    measured(`${id} Q told`, found.told.q / q - 1);
    measured(`${id} Q told over the independent way's`, found.told.q / found.q - 1);
    measured(`${id} Q uncertainty`, found.told.qUncertainty / found.told.q);
    expect(Math.abs(found.told.f / f - 1), id).toBeLessThan(5e-4);
    expect(Math.abs(found.told.q / q - 1), id).toBeLessThan(5e-3);
  });
});
