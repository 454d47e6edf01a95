/** Levels of a result's spectra as the panel draws them, and why there may be none. */
import type { ProbeResult, SolveResult } from "@heddle/kernels/scene";

export interface LevelCurve {
  probe: string;
  unit: string;
  GHz: readonly number[];
  /** dB per unit source; null where undefined. */
  dB: readonly (number | null)[];
  /** Completed by fitted poles: the trace had not died away. */
  completed: boolean;
}

const finiteOrNull = (value: number): number | null => (Number.isFinite(value) ? value : null);

/**
 * 20·lg of the magnitude for fields and voltages, 10·lg for powers and energies; null where the probe has no spectrum.
 * A tone's single line stands as one point.
 */
export function levelsOf(probe: ProbeResult): LevelCurve | null {
  const { spectrum, id, unit } = probe;
  if (spectrum === null) return null;
  if ("re" in spectrum) {
    const dB = spectrum.GHz.map((_, i) => {
      const re = spectrum.re[i] ?? null;
      const im = spectrum.im[i] ?? null;
      return re === null || im === null ? null : finiteOrNull(20 * Math.log10(Math.hypot(re, im)));
    });
    return { probe: id, unit, GHz: spectrum.GHz, dB, completed: spectrum.completed === true };
  }
  const dB = spectrum.GHz.map((_, i) => {
    const value = spectrum.value[i] ?? null;
    return value === null ? null : finiteOrNull(10 * Math.log10(value));
  });
  return { probe: id, unit, GHz: spectrum.GHz, dB, completed: false };
}

export const curvesOf = (result: SolveResult): LevelCurve[] =>
  result.probes.map(levelsOf).filter((curve) => curve !== null);

/** Why a result shows no spectrum, as a sentence; null where it shows one. */
export function whyNoSpectrum(result: SolveResult): string | null {
  if (result.probes.some((probe) => probe.spectrum !== null)) return null;
  if (result.probes.length === 0) return "No probe: place one to get a trace and its spectrum.";
  if (result.edits !== undefined && result.edits.length > 0)
    return "The run was edited while it ran, so its traces have no spectrum. Run the edited scene cleanly.";
  const reason = result.quality.warnings.find((warning) => /spectr/i.test(warning));
  return reason ?? "The run gave no spectrum.";
}

export interface LevelRange {
  low: number;
  high: number;
}

/** A range of round tens that holds the curves, at most `deepest` dB deep: nulls do not squeeze the rest. */
export function rangeOf(curves: readonly LevelCurve[], deepest = 80): LevelRange | null {
  let high = Number.NEGATIVE_INFINITY;
  let low = Number.POSITIVE_INFINITY;
  for (const curve of curves) {
    for (const value of curve.dB) {
      if (value === null) continue;
      high = Math.max(high, value);
      low = Math.min(low, value);
    }
  }
  if (high === Number.NEGATIVE_INFINITY) return null;
  // + 0: never minus zero.
  const top = 10 * Math.ceil((high + 1) / 10) + 0;
  const bottom = Math.max(10 * Math.floor((low - 1) / 10), top - deepest);
  return { low: Math.min(bottom, top - 20), high: top };
}

/** The index of the frequency nearest to one asked for. */
export function nearestIndex(GHz: readonly number[], wanted: number): number {
  let best = -1;
  let distance = Number.POSITIVE_INFINITY;
  GHz.forEach((value, index) => {
    const away = Math.abs(value - wanted);
    if (away < distance) {
      distance = away;
      best = index;
    }
  });
  return best;
}
