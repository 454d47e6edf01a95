/** The pace slider: logarithmic from 10 ps of field time a second, its last position as fast as the server goes. */
import { formatSi } from "../../lib/figures";

export const SLOWEST_PS_PER_SECOND = 10;
const FASTEST_PACED = 1e6;
export const PACE_POSITIONS = 100;
const LAST_PACED = PACE_POSITIONS - 1;

/** Picoseconds a second at a position of the slider; null at its end. */
export function paceAt(position: number): number | null {
  if (position >= PACE_POSITIONS) return null;
  const decades = Math.log10(FASTEST_PACED / SLOWEST_PS_PER_SECOND);
  return Number((SLOWEST_PS_PER_SECOND * 10 ** ((position / LAST_PACED) * decades)).toPrecision(2));
}

/** The position nearest to a pace. */
export function positionOf(pace: number | null): number {
  if (pace === null) return PACE_POSITIONS;
  const decades = Math.log10(FASTEST_PACED / SLOWEST_PS_PER_SECOND);
  const place = Math.log10(pace / SLOWEST_PS_PER_SECOND) / decades;
  return Math.min(LAST_PACED, Math.max(0, Math.round(place * LAST_PACED)));
}

export const paceWords = (pace: number | null): string =>
  pace === null ? "as fast as it goes" : `${formatSi(pace * 1e-12, "s", 2)} a second`;
