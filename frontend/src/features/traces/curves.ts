/** What the spectrum panel draws: curves over frequency, whatever they are of. */
export interface PlotCurve {
  key: string;
  label: string;
  GHz: readonly number[];
  /** In the plot's unit; null where undefined. */
  values: readonly (number | null)[];
  /** Where the value lies on an ever finer mesh, at frequencies of its own; from a run on two meshes. */
  bar?: { GHz: readonly number[]; low: readonly (number | null)[]; high: readonly (number | null)[] };
  /** The probe that it is of, for the selection on the sheet. */
  probe?: string;
}

export interface ValueRange {
  low: number;
  high: number;
}

const finiteOrNull = (value: number): number | null => (Number.isFinite(value) ? value : null);

/** 20·lg of a magnitude; null where undefined or zero. */
export const amplitudeDb = (magnitude: number | null): number | null =>
  magnitude === null ? null : finiteOrNull(20 * Math.log10(magnitude));

/** 10·lg of a power's magnitude; null where undefined or zero. */
export const powerDb = (power: number | null): number | null =>
  power === null ? null : finiteOrNull(10 * Math.log10(Math.abs(power)));

export function magnitudeOf(
  { re, im }: { re: readonly (number | null)[]; im: readonly (number | null)[] },
  index: number,
): number | null {
  const [real, imaginary] = [re[index] ?? null, im[index] ?? null];
  return real === null || imaginary === null ? null : Math.hypot(real, imaginary);
}

/** The lower end of a bar whose value may as well be nothing. */
export const BOTTOMLESS_DB = -300;

/**
 * A value with its uncertainty as levels. Where the uncertainty reaches the value, the bar goes down without end.
 * @param toDb from a magnitude to its level
 */
export function barOf(
  GHz: readonly number[],
  magnitudes: readonly (number | null)[],
  uncertainty: readonly (number | null)[],
  toDb: (magnitude: number | null) => number | null,
): NonNullable<PlotCurve["bar"]> {
  const edge = (sign: 1 | -1): (number | null)[] =>
    magnitudes.map((value, index) => {
      const around = uncertainty[index] ?? null;
      if (value === null || around === null) return null;
      const at = Math.abs(value) + sign * around;
      return at > 0 ? toDb(at) : BOTTOMLESS_DB;
    });
  return { GHz, low: edge(-1), high: edge(1) };
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

/** Smallest and largest of the values that are defined; null where none is. */
export function extremesOf(curves: readonly Pick<PlotCurve, "values">[]): ValueRange | null {
  let high = Number.NEGATIVE_INFINITY;
  let low = Number.POSITIVE_INFINITY;
  for (const { values } of curves) {
    for (const value of values) {
      if (value === null) continue;
      high = Math.max(high, value);
      low = Math.min(low, value);
    }
  }
  return high === Number.NEGATIVE_INFINITY ? null : { low, high };
}

/** A range of round tens that holds the curves, at most `deepest` dB deep: nulls do not squeeze the rest. */
export function rangeOf(curves: readonly Pick<PlotCurve, "values">[], deepest = 80): ValueRange | null {
  const held = extremesOf(curves);
  if (held === null) return null;
  // + 0: never minus zero.
  const top = 10 * Math.ceil((held.high + 1) / 10) + 0;
  const bottom = Math.max(10 * Math.floor((held.low - 1) / 10), top - deepest);
  return { low: Math.min(bottom, top - 20), high: top };
}
