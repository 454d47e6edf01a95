/**
 * Values at zero cell size from two meshes (L. F. Richardson, Phil. Trans. R. Soc. A 210 (1911) 307; from memory): an error that
 * falls as cellᵖ leaves f(0) = fine + (fine − coarse)/(ratioᵖ − 1).
 *
 * The uncertainty is the whole of that correction, |fine − coarse|/(ratioᵖ − 1). It is never less, for the error may change its sign where
 * metal lies off the mesh lines, and p is what the geometry can promise, not what two meshes seem to show.
 */
export interface Extrapolated {
  value: number;
  uncertainty: number;
}

/** @param ratio coarse cell over fine cell, above 1; @param order the p above, above 0 */
export function extrapolate(coarse: number, fine: number, ratio: number, order: number): Extrapolated {
  const correction = (fine - coarse) / (ratio ** order - 1);
  return { value: fine + correction, uncertainty: Math.abs(correction) };
}

/** The same of a complex number; the uncertainty is the length of the correction. */
export function extrapolateComplex(
  coarse: readonly [number, number],
  fine: readonly [number, number],
  ratio: number,
  order: number,
): { re: number; im: number; uncertainty: number } {
  const re = extrapolate(coarse[0], fine[0], ratio, order);
  const im = extrapolate(coarse[1], fine[1], ratio, order);
  return { re: re.value, im: im.value, uncertainty: Math.hypot(re.uncertainty, im.uncertainty) };
}
