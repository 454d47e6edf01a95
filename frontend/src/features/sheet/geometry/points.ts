/** Plane geometry in millimetres of the section; x right, y up. */
export type Xy = readonly [number, number];

export interface BoxMm {
  left: number;
  bottom: number;
  right: number;
  top: number;
}

export const distance = (a: Xy, b: Xy): number => Math.hypot(b[0] - a[0], b[1] - a[1]);

/** `at` turned about `centre` by `angle` degrees, counter-clockwise. */
export function turn(at: Xy, centre: Xy, angle: number): Xy {
  if (angle === 0) return at;
  const radians = (angle * Math.PI) / 180;
  const [cos, sin] = [Math.cos(radians), Math.sin(radians)];
  const [dx, dy] = [at[0] - centre[0], at[1] - centre[1]];
  return [centre[0] + dx * cos - dy * sin, centre[1] + dx * sin + dy * cos];
}

/** Distance of `at` from the segment from `a` to `b`. */
export function distanceToSegment(at: Xy, a: Xy, b: Xy): number {
  const [dx, dy] = [b[0] - a[0], b[1] - a[1]];
  const length2 = dx * dx + dy * dy;
  const along = length2 === 0 ? 0 : ((at[0] - a[0]) * dx + (at[1] - a[1]) * dy) / length2;
  const t = Math.min(1, Math.max(0, along));
  return Math.hypot(at[0] - a[0] - t * dx, at[1] - a[1] - t * dy);
}

export function distanceToPolyline(at: Xy, points: readonly Xy[]): number {
  const first = points.at(0);
  if (first === undefined) return Number.POSITIVE_INFINITY;
  let nearest = distance(at, first);
  let previous = first;
  for (const point of points) {
    nearest = Math.min(nearest, distanceToSegment(at, previous, point));
    previous = point;
  }
  return nearest;
}

/** Even-odd over all rings together: a point inside an outline and inside a hole is outside. */
export function insideRings(at: Xy, rings: readonly (readonly Xy[])[]): boolean {
  let inside = false;
  for (const ring of rings) {
    let previous = ring.at(-1);
    for (const point of ring) {
      if (previous !== undefined && point[1] > at[1] !== previous[1] > at[1]) {
        const crossing =
          point[0] + ((at[1] - point[1]) * (previous[0] - point[0])) / (previous[1] - point[1]);
        if (at[0] < crossing) inside = !inside;
      }
      previous = point;
    }
  }
  return inside;
}

export function boxOf(points: readonly Xy[]): BoxMm {
  const box = {
    left: Number.POSITIVE_INFINITY,
    bottom: Number.POSITIVE_INFINITY,
    right: Number.NEGATIVE_INFINITY,
    top: Number.NEGATIVE_INFINITY,
  };
  for (const [x, y] of points) {
    box.left = Math.min(box.left, x);
    box.right = Math.max(box.right, x);
    box.bottom = Math.min(box.bottom, y);
    box.top = Math.max(box.top, y);
  }
  return box;
}

export const boxBetween = (a: Xy, b: Xy): BoxMm => boxOf([a, b]);

export const growBox = (box: BoxMm, by: number): BoxMm => ({
  left: box.left - by,
  bottom: box.bottom - by,
  right: box.right + by,
  top: box.top + by,
});

export const joinBoxes = (a: BoxMm, b: BoxMm): BoxMm => ({
  left: Math.min(a.left, b.left),
  bottom: Math.min(a.bottom, b.bottom),
  right: Math.max(a.right, b.right),
  top: Math.max(a.top, b.top),
});

export const boxesMeet = (a: BoxMm, b: BoxMm): boolean =>
  a.left <= b.right && b.left <= a.right && a.bottom <= b.top && b.bottom <= a.top;

export const boxHolds = (outer: BoxMm, inner: BoxMm): boolean =>
  outer.left <= inner.left &&
  outer.right >= inner.right &&
  outer.bottom <= inner.bottom &&
  outer.top >= inner.top;

export const boxCentre = (box: BoxMm): Xy => [(box.left + box.right) / 2, (box.bottom + box.top) / 2];

/** Rounds to the power of ten below a quarter of a pixel: what the hand could not have aimed at is left out. */
export function roundToPixel(mm: number, pxPerMm: number): number {
  const quantum = 10 ** Math.max(-4, Math.floor(Math.log10(0.25 / pxPerMm)));
  return roundMm(Math.round(mm / quantum) * quantum);
}

/** Rounds a length to 0.1 µm, so that pointer arithmetic leaves no tails like 12.300000000000001. */
export const roundMm = (mm: number): number => {
  const rounded = Math.round(mm * 1e4) / 1e4;
  return rounded === 0 ? 0 : rounded;
};
