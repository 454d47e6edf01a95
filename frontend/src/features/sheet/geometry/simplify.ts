import { distanceToSegment, type Xy } from "./points";

/**
 * The fewest of the given points whose polyline stays within `toleranceMm` of all of them (Ramer, Douglas and
 * Peucker), first and last kept. Iterative, so that a stroke of many thousand points cannot exhaust the stack.
 */
export function simplifyPolyline(points: readonly Xy[], toleranceMm: number): Xy[] {
  if (points.length <= 2) return [...points];
  const keep = new Uint8Array(points.length);
  keep[0] = 1;
  keep[points.length - 1] = 1;
  const spans: [number, number][] = [[0, points.length - 1]];
  for (let span = spans.pop(); span !== undefined; span = spans.pop()) {
    const [from, to] = span;
    const [a, b] = [points[from], points[to]];
    if (a === undefined || b === undefined) continue;
    let worst = toleranceMm;
    let at = -1;
    for (let i = from + 1; i < to; i += 1) {
      const point = points[i];
      if (point === undefined) continue;
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
