import { distanceToSegment, type Xy } from "./points";

/**
 * Longest stretch that is simplified as a whole. A path that folds back and forth would otherwise cost the square of
 * its length: 10,000 such points took 17 s.
 */
const LONGEST_STRETCH = 512;

/**
 * The fewest of the given points whose polyline stays within `toleranceMm` of all of them (Ramer, Douglas and
 * Peucker), stretch by stretch, first and last kept. Iterative, so that a stroke of many thousand points cannot exhaust the stack.
 */
export function simplifyPolyline(points: readonly Xy[], toleranceMm: number): Xy[] {
  if (points.length <= 2) return [...points];
  const keep = new Uint8Array(points.length);
  const end = points.length - 1;
  keep[0] = 1;
  keep[end] = 1;
  const spans: [number, number][] = [];
  for (let from = 0; from < end; from += LONGEST_STRETCH) {
    const to = Math.min(from + LONGEST_STRETCH, end);
    keep[to] = 1;
    spans.push([from, to]);
  }
  for (let span = spans.pop(); span !== undefined; span = spans.pop()) {
    const [from, to] = span;
    const [a, b] = [points[from], points[to]];
    let worst = toleranceMm;
    let at = -1;
    for (let i = from + 1; i < to; i += 1) {
      const point = points[i];
      const off = distanceToSegment(point, a, b);
      if (off > worst) {
        worst = off;
        at = i;
      }
    }
    if (at > 0) {
      keep[at] = 1;
      spans.push([from, at], [at, to]);
    }
  }
  return points.filter((_, i) => keep[i] === 1);
}
