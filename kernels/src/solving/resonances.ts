/** The resonances of a run as its result tells them, and the limits on their Q. */
import type { FoundResonance } from "../analysis/index.js";
import { resonancesOf, ringDownLasts } from "../analysis/index.js";
import { MU0 } from "../lattice/index.js";
import type { LimitResult, ResolvedScene, Resonance } from "../scene/index.js";
import type { SpectrumInput } from "./spectra.js";
import { traceSignal, waveformSignal } from "./spectra.js";

/**
 * The share of 2πf times its energy that two plates of the walls' conductivity take from a section with nothing varying along z:
 * δ/b, δ = 1/√(πfμ₀σ) (R. F. Harrington, Time-Harmonic Electromagnetic Fields, 1961, §2-8 by perturbation, derived here).
 * Null where the scene has no such plates.
 */
function plateLoss({ outOfPlane, wallConductivity }: ResolvedScene, hz: number): number | null {
  if (outOfPlane.kind !== "height" || wallConductivity === undefined) return null;
  return 1 / Math.sqrt(Math.PI * hz * MU0 * wallConductivity) / (outOfPlane.mm / 1000);
}

function inDocument(found: FoundResonance, scene: ResolvedScene): Resonance {
  const plates = plateLoss(scene, found.hz);
  return {
    probe: found.probe,
    GHz: found.hz / 1e9,
    q: found.q,
    ...(plates === null ? {} : { qWithPlates: 1 / (found.loss + plates) }),
    levelDb: found.levelDb,
    ghzUncertainty: found.hzUncertainty / 1e9,
    qUncertainty: found.qUncertainty,
  };
}

/** Undefined where nothing rings freely for long enough to be looked at: a tone, a stop before the sources' end. */
export function resonancesInDocument(input: SpectrumInput, scene: ResolvedScene): Resonance[] | undefined {
  const { sources, endSeconds } = input.drives;
  const first = sources.at(0);
  if (!first || !Number.isFinite(endSeconds) || input.steps === 0) return undefined;
  // A power rings at sums and differences of the fields' frequencies.
  const traces = input.probes.flatMap(({ id, kind, power }, index) =>
    power || kind === "area" ? [] : [{ id, signal: traceSignal(input, index) }],
  );
  const band = { from: scene.band.fromGHz * 1e9, to: scene.band.toGHz * 1e9 };
  if (!ringDownLasts(traces, band, endSeconds)) return undefined;
  const alike = sources.every(({ waveformText }) => waveformText === first.waveformText);
  return resonancesOf(traces, band, endSeconds, alike && !input.sent ? waveformSignal(input) : null).map(
    (found) => inDocument(found, scene),
  );
}

/**
 * Limits on the highest Q of the band, with the plates' loss where the scene has it. Not judged where no resonance was found or one
 * decays too slowly for its Q to be told.
 */
export function judgeQ(scene: ResolvedScene, resonances: readonly Resonance[] | undefined): LimitResult[] {
  return scene.limits.flatMap((limit): LimitResult[] => {
    if (!("value" in limit) || !("q" in limit.of)) return [];
    let highest: Resonance | null = null;
    let value = 0;
    for (const resonance of resonances ?? []) {
      const q = resonance.qWithPlates ?? resonance.q;
      if (q === null) return [{ ...UNJUDGED, id: limit.id, atGHz: resonance.GHz }];
      if (q > value) {
        highest = resonance;
        value = q;
      }
    }
    if (!highest) return [{ ...UNJUDGED, id: limit.id }];
    const margin = limit.sense === "below" ? limit.value - value : value - limit.value;
    const { q, qUncertainty, GHz } = highest;
    // δ/b is taken as exact: d(1/Q) is the same with the plates and without.
    const uncertainty = q === null || qUncertainty === null ? null : qUncertainty * (value / q) ** 2;
    return [{ id: limit.id, holds: margin >= 0, margin, atGHz: GHz, uncertainty }];
  });
}

const UNJUDGED = { holds: null, margin: null, atGHz: null, uncertainty: null } as const;
