/** Limits on levels: the margin of a spectrum to a line over frequency. */

export interface LevelLimit {
  sense: "below" | "above";
  /** [GHz, value]; straight in value against log frequency between points. Frequencies may come in any order. */
  points: readonly (readonly [number, number])[];
}

export interface Judgement {
  holds: boolean | null;
  /** Positive: kept. */
  margin: number | null;
  atGHz: number | null;
}

/** The limit's value at a frequency; null outside its points. A limit of one point holds at that frequency alone. */
export function limitAt(limit: LevelLimit, frequencyGHz: number): number | null {
  const points = [...limit.points].sort((p, q) => p[0] - q[0]);
  const above = points.findIndex(([frequency]) => frequency >= frequencyGHz);
  if (above < 0) return null;
  const [f1, v1] = points[above];
  if (f1 === frequencyGHz) return v1;
  if (above === 0) return null;
  const [f0, v0] = points[above - 1];
  return v0 + ((v1 - v0) * Math.log(frequencyGHz / f0)) / Math.log(f1 / f0);
}

/**
 * The smallest margin over the frequencies that lie within the limit's points, and where it is. `holds` is null where no frequency
 * does, or a level there is undefined.
 *
 * @param levels dB at each frequency; null where undefined
 */
export function judgeLevels(
  limit: LevelLimit,
  frequenciesGHz: readonly number[],
  levels: readonly (number | null)[],
): Judgement {
  let margin = Number.POSITIVE_INFINITY;
  let atGHz: number | null = null;
  for (const [index, frequency] of frequenciesGHz.entries()) {
    const bound = limitAt(limit, frequency);
    if (bound === null) continue;
    const level = levels[index];
    if (level === null) return { holds: null, margin: null, atGHz: frequency };
    const own = limit.sense === "below" ? bound - level : level - bound;
    if (own < margin) {
      margin = own;
      atGHz = frequency;
    }
  }
  return atGHz === null ? { holds: null, margin: null, atGHz } : { holds: margin >= 0, margin, atGHz };
}
