/** The smallest of 1, 2, 5 × 10ᵏ that is at least `atLeast`. */
export function roundStep(atLeast: number): number {
  const decade = 10 ** Math.floor(Math.log10(atLeast));
  for (const factor of [1, 2, 5]) {
    // A hair of slack: 0.2 computed from pixels may come out as 0.19999999999999998.
    if (factor * decade >= atLeast * (1 - 1e-9)) return tidy(factor * decade);
  }
  return tidy(10 * decade);
}

const tidy = (value: number): number => Number(value.toPrecision(12));

export interface TickSteps {
  /** mm between numbered ticks, and between the small ones. */
  labelledMm: number;
  minorMm: number;
  /** Middle ticks, drawn a little longer than the small ones; null where none fits the division. */
  middleMm: number | null;
}

/** Numbers at least `labelPx` apart and small ticks at least `minorPx`, all on round millimetres. */
export function tickSteps(pxPerMm: number, labelPx = 64, minorPx = 5): TickSteps {
  const labelledMm = roundStep(labelPx / pxPerMm);
  const leading = Math.round(labelledMm / 10 ** Math.floor(Math.log10(labelledMm) + 1e-9));
  // A labelled step divides evenly by these only, so that every small tick is a round number too.
  const divisions = leading === 1 ? [10, 5, 2] : leading === 2 ? [20, 10, 4, 2] : [50, 25, 10, 5];
  const division = divisions.find((count) => (labelledMm / count) * pxPerMm >= minorPx) ?? 1;
  return {
    labelledMm,
    minorMm: tidy(labelledMm / division),
    middleMm: division % 2 === 0 ? tidy(labelledMm / 2) : null,
  };
}

/** Multiples of `step` within [from, to], by index so that no error adds up. */
export function multiplesWithin(from: number, to: number, step: number): number[] {
  const first = Math.ceil(from / step - 1e-9);
  const last = Math.floor(to / step + 1e-9);
  return Array.from({ length: Math.max(0, last - first + 1) }, (_, i) => tidy((first + i) * step));
}

/** Whether `value` is a multiple of `step`, to rounding. */
export const isMultiple = (value: number, step: number): boolean =>
  Math.abs(value / step - Math.round(value / step)) < 1e-6;

/** The length of a scale bar of at most `mostPx`, on a round number. */
export function scaleBarMm(pxPerMm: number, mostPx = 150): number {
  const most = mostPx / pxPerMm;
  const decade = 10 ** Math.floor(Math.log10(most));
  return tidy((most >= 5 * decade ? 5 : most >= 2 * decade ? 2 : 1) * decade);
}

/** The grid that the pointer snaps to: round millimetres at least `leastPx` apart. */
export const gridStepMm = (pxPerMm: number, leastPx = 6): number => roundStep(leastPx / pxPerMm);
