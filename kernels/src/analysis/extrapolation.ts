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

/**
 * Where metal corners fall anywhere in their cells, the factor before cellᵖ differs from mesh to mesh, even in sign, and no value
 * can be extrapolated: the finer mesh's value stands. Its uncertainty is the whole difference and, on top of it, the correction
 * that an error of a steady sign would have asked for.
 */
export function unsteady(coarse: number, fine: number, ratio: number, order: number): Extrapolated {
  const { uncertainty } = extrapolate(coarse, fine, ratio, order);
  return { value: fine, uncertainty: Math.abs(fine - coarse) + uncertainty };
}

/**
 * The largest uncertainty within `reach` entries: two meshes can agree at a frequency by chance, where their curves cross.
 *
 * @param curves those that one error moves together, such as all S of one drive; null where undefined
 */
export function widest(curves: readonly (readonly (number | null)[])[], reach: number): (number | null)[] {
  const length = curves.at(0)?.length ?? 0;
  const here = Array.from({ length }, (_, n) => Math.max(...curves.map((curve) => curve[n] ?? 0)));
  return Array.from({ length }, (_, n) =>
    curves.every((curve) => curve[n] === null)
      ? null
      : Math.max(...here.slice(Math.max(0, n - reach), n + reach + 1)),
  );
}

/** @param ratio coarse cell over fine cell, above 1; @param order the p above, above 0 */
export function extrapolate(coarse: number, fine: number, ratio: number, order: number): Extrapolated {
  const correction = (fine - coarse) / (ratio ** order - 1);
  return { value: fine + correction, uncertainty: Math.abs(correction) };
}
