/** Limits as lines over frequency. */
import { limitAt } from "@heddle/kernels/analysis";
import type { Limit, LimitResult } from "@heddle/kernels/scene";

export interface LimitLine {
  key: string;
  name: string;
  sense: "below" | "above";
  /** Null where it was not judged. */
  holds: boolean | null;
  /** dB to spare (negative: over) where it is least; null where it was not judged. */
  margin: number | null;
  atGHz: number | null;
  points: { GHz: number; dB: number }[];
}

/** Between its points a limit is straight over the logarithm of frequency: so many pieces draw the bend. */
const PIECES = 24;

/** @param of whether a limit is on what the plot shows */
export function limitLines(
  limits: readonly Limit[],
  results: readonly LimitResult[] | undefined,
  of: (of: Limit["of"]) => boolean,
): LimitLine[] {
  return limits.flatMap((limit): LimitLine[] => {
    if (!("points" in limit) || !of(limit.of)) return [];
    const places = limit.points.map(([GHz]) => GHz).sort((a, b) => a - b);
    const [first, last] = [places.at(0), places.at(-1)];
    if (first === undefined || last === undefined) return [];
    const between = Array.from({ length: PIECES }, (_, n) => first + ((last - first) * n) / PIECES);
    const points = [...new Set([...between, ...places])]
      .sort((a, b) => a - b)
      .flatMap((GHz) => {
        const dB = limitAt(limit, GHz);
        return dB === null ? [] : [{ GHz, dB }];
      });
    const judged = results?.find(({ id }) => id === limit.id);
    const { holds, margin, atGHz } = judged ?? { holds: null, margin: null, atGHz: null };
    return [{ key: limit.id, name: limit.name, sense: limit.sense, holds, margin, atGHz, points }];
  });
}
