/** A dense complex matrix, column after column. */
export interface ComplexMatrix {
  readonly rows: number;
  readonly columns: number;
  /** Entry (i, j) is at i + j·rows. */
  readonly re: Float64Array;
  readonly im: Float64Array;
}

export const complexMatrix = (rows: number, columns: number): ComplexMatrix => ({
  rows,
  columns,
  re: new Float64Array(rows * columns),
  im: new Float64Array(rows * columns),
});

/** x^H y of two columns that start at `p` and `q`, as [re, im]. */
export function innerProduct(
  x: ComplexMatrix,
  p: number,
  y: ComplexMatrix,
  q: number,
  length: number,
): [number, number] {
  let re = 0;
  let im = 0;
  for (let i = 0; i < length; i += 1) {
    const xr = x.re[p + i];
    const xi = x.im[p + i];
    const yr = y.re[q + i];
    const yi = y.im[q + i];
    re += xr * yr + xi * yi;
    im += xr * yi - xi * yr;
  }
  return [re, im];
}
