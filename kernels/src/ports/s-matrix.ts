/** The scattering matrix at one frequency from the waves of several runs: B = S·A, one run a column. */

export interface ComplexTable {
  /** Entry (i, j) at i·columns + j. */
  re: Float64Array;
  im: Float64Array;
  rows: number;
  columns: number;
}

export const complexTable = (rows: number, columns: number): ComplexTable => ({
  re: new Float64Array(rows * columns),
  im: new Float64Array(rows * columns),
  rows,
  columns,
});

/** X with X·A = B for square A, by elimination of columns with exchange; entries that have no value are NaN. */
function solveRight(b: ComplexTable, a: ComplexTable): ComplexTable {
  const n = a.rows;
  // Aᵀ·Xᵀ = Bᵀ, row by row of the augmented matrix.
  const width = n + b.rows;
  const re = new Float64Array(n * width);
  const im = new Float64Array(n * width);
  for (let i = 0; i < n; i += 1) {
    for (let j = 0; j < n; j += 1) {
      re[i * width + j] = a.re[j * n + i];
      im[i * width + j] = a.im[j * n + i];
    }
    for (let j = 0; j < b.rows; j += 1) {
      re[i * width + n + j] = b.re[j * n + i];
      im[i * width + n + j] = b.im[j * n + i];
    }
  }
  for (let k = 0; k < n; k += 1) {
    let pivot = k;
    const size = (i: number): number => Math.hypot(re[i * width + k], im[i * width + k]);
    for (let i = k + 1; i < n; i += 1) if (size(i) > size(pivot)) pivot = i;
    for (let j = 0; j < width; j += 1) {
      const [p, q] = [k * width + j, pivot * width + j];
      [re[p], re[q]] = [re[q], re[p]];
      [im[p], im[q]] = [im[q], im[p]];
    }
    const [pr, pi] = [re[k * width + k], im[k * width + k]];
    const norm = pr * pr + pi * pi;
    for (let j = 0; j < width; j += 1) {
      const at = k * width + j;
      const [x, y] = [re[at], im[at]];
      re[at] = (x * pr + y * pi) / norm;
      im[at] = (y * pr - x * pi) / norm;
    }
    for (let i = 0; i < n; i += 1) {
      if (i === k) continue;
      const [fr, fi] = [re[i * width + k], im[i * width + k]];
      for (let j = 0; j < width; j += 1) {
        const [x, y] = [re[k * width + j], im[k * width + j]];
        re[i * width + j] -= fr * x - fi * y;
        im[i * width + j] -= fr * y + fi * x;
      }
    }
  }
  const x = complexTable(b.rows, n);
  for (let i = 0; i < b.rows; i += 1)
    for (let j = 0; j < n; j += 1) {
      x.re[i * n + j] = re[j * width + n + i];
      x.im[i * n + j] = im[j * width + n + i];
    }
  return x;
}

/**
 * Columns of S for the driven ports. Where every port was driven, S = B·A⁻¹, which takes out what comes back from behind the ports;
 * else each column is B over the driven port's own A, with nothing taken to come in at the others.
 *
 * @param a waves inward, ports × runs
 * @param driven the port that each run drives
 */
export function scatteringColumns(a: ComplexTable, b: ComplexTable, driven: readonly number[]): ComplexTable {
  if (a.rows === a.columns) {
    const s = solveRight(b, a);
    // Runs come in their own order, columns of S in that of the ports.
    const sorted = complexTable(s.rows, s.columns);
    for (let i = 0; i < s.rows; i += 1)
      driven.forEach((port, run) => {
        sorted.re[i * s.columns + run] = s.re[i * s.columns + port];
        sorted.im[i * s.columns + run] = s.im[i * s.columns + port];
      });
    return sorted;
  }
  const s = complexTable(a.rows, a.columns);
  driven.forEach((port, run) => {
    const at = port * a.columns + run;
    const norm = a.re[at] ** 2 + a.im[at] ** 2;
    for (let i = 0; i < a.rows; i += 1) {
      const k = i * a.columns + run;
      s.re[k] = (b.re[k] * a.re[at] + b.im[k] * a.im[at]) / norm;
      s.im[k] = (b.im[k] * a.re[at] - b.re[k] * a.im[at]) / norm;
    }
  });
  return s;
}

const STEPS = 200;

/** The largest share of the power sent in that comes out, over all excitations of the columns: the square of the largest singular value. */
export function largestGain(s: ComplexTable): number {
  const { rows, columns, re, im } = s;
  // Power iteration on S^H·S, from every unit excitation: their best is the dominant one.
  let best = 0;
  for (let start = 0; start < columns; start += 1) {
    let xr = Float64Array.from({ length: columns }, (_, j) => (j === start ? 1 : 1e-3));
    let xi = new Float64Array(columns);
    let gain = 0;
    for (let step = 0; step < STEPS; step += 1) {
      const yr = new Float64Array(rows);
      const yi = new Float64Array(rows);
      for (let i = 0; i < rows; i += 1)
        for (let j = 0; j < columns; j += 1) {
          const k = i * columns + j;
          yr[i] += re[k] * xr[j] - im[k] * xi[j];
          yi[i] += re[k] * xi[j] + im[k] * xr[j];
        }
      const size = Math.hypot(...xr, ...xi);
      const last = gain;
      gain = (Math.hypot(...yr, ...yi) / size) ** 2;
      if (!Number.isFinite(gain)) return gain;
      const zr = new Float64Array(columns);
      const zi = new Float64Array(columns);
      for (let j = 0; j < columns; j += 1)
        for (let i = 0; i < rows; i += 1) {
          const k = i * columns + j;
          zr[j] += re[k] * yr[i] + im[k] * yi[i];
          zi[j] += re[k] * yi[i] - im[k] * yr[i];
        }
      const scale = Math.hypot(...zr, ...zi);
      if (scale === 0) break;
      xr = zr.map((value) => value / scale);
      xi = zi.map((value) => value / scale);
      if (Math.abs(gain - last) <= 1e-14 * gain) break;
    }
    best = Math.max(best, gain);
  }
  return best;
}
