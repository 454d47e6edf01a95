/**
 * Eigenvalues of a small general complex matrix: Hessenberg form by stabilised elimination, then the shifted QR iteration
 * with Givens rotations (G. H. Golub, C. F. Van Loan, Matrix Computations, 4th ed. 2013, §7.4, §7.5).
 */
import type { ComplexMatrix } from "./complex-matrix.js";

const ITERATIONS_EACH = 60;

type Pair = [number, number];
const divide = (ar: number, ai: number, br: number, bi: number): Pair => {
  const norm = br * br + bi * bi;
  return [(ar * br + ai * bi) / norm, (ai * br - ar * bi) / norm];
};
const squareRoot = (re: number, im: number): Pair => {
  const size = Math.hypot(re, im);
  const root = Math.sqrt((size + Math.abs(re)) / 2);
  if (root === 0) return [0, 0];
  return re >= 0 ? [root, im / (2 * root)] : [Math.abs(im) / (2 * root), im < 0 ? -root : root];
};

/** @param matrix square; it is used up. The order of the result is that of deflation. */
export function complexEigenvalues(matrix: ComplexMatrix): Pair[] {
  const n = matrix.rows;
  toHessenberg(matrix);
  const { re, im } = matrix;
  const at = (i: number, j: number): number => i + j * n;
  const size = (i: number, j: number): number => Math.abs(re[at(i, j)]) + Math.abs(im[at(i, j)]);
  const values: Pair[] = [];
  let end = n - 1;
  let iterations = 0;
  while (end >= 0) {
    let start = end;
    while (start > 0 && size(start, start - 1) > 1e-15 * (size(start, start) + size(start - 1, start - 1)))
      start -= 1;
    if (start === end || iterations > ITERATIONS_EACH) {
      values.push([re[at(end, end)], im[at(end, end)]]);
      end -= 1;
      iterations = 0;
      continue;
    }
    iterations += 1;
    const [sr, si] = iterations % 11 === 10 ? [size(end, end - 1), 0] : cornerShift(matrix, end);
    sweep(matrix, start, end, sr, si);
  }
  return values;
}

/** The eigenvalue of the trailing 2 × 2 block that is closer to its last entry. */
function cornerShift({ rows: n, re, im }: ComplexMatrix, end: number): Pair {
  const a = end - 1 + (end - 1) * n;
  const b = end - 1 + end * n;
  const c = end + (end - 1) * n;
  const d = end + end * n;
  const hr = (re[a] - re[d]) / 2;
  const hi = (im[a] - im[d]) / 2;
  const br = re[b] * re[c] - im[b] * im[c];
  const bi = re[b] * im[c] + im[b] * re[c];
  let [rr, ri] = squareRoot(hr * hr - hi * hi + br, 2 * hr * hi + bi);
  if (hr * rr + hi * ri < 0) [rr, ri] = [-rr, -ri];
  if (hr + rr === 0 && hi + ri === 0) return [re[d], im[d]];
  const [qr, qi] = divide(br, bi, hr + rr, hi + ri);
  return [re[d] - qr, im[d] - qi];
}

/** One QR step of the active block start … end with the shift taken off and put back. */
function sweep({ rows: n, re, im }: ComplexMatrix, start: number, end: number, sr: number, si: number): void {
  for (let k = start; k <= end; k += 1) {
    re[k + k * n] -= sr;
    im[k + k * n] -= si;
  }
  const turns: { c: number; xr: number; xi: number }[] = [];
  for (let k = start; k < end; k += 1) {
    const p = k + k * n;
    const q = p + 1;
    const top = Math.hypot(re[p], im[p]);
    const norm = Math.hypot(top, re[q], im[q]);
    // [c x; −x̄ c] with c real makes the entry below the diagonal vanish.
    let c = 1;
    let xr = 0;
    let xi = 0;
    if (norm > 0 && top > 0) {
      c = top / norm;
      xr = (re[p] * re[q] + im[p] * im[q]) / (top * norm);
      xi = (im[p] * re[q] - re[p] * im[q]) / (top * norm);
    } else if (norm > 0) {
      c = 0;
      xr = re[q] / norm;
      xi = -im[q] / norm;
    }
    turns.push({ c, xr, xi });
    for (let j = k; j <= end; j += 1) {
      const u = k + j * n;
      const ur = re[u];
      const ui = im[u];
      const wr = re[u + 1];
      const wi = im[u + 1];
      re[u] = c * ur + xr * wr - xi * wi;
      im[u] = c * ui + xr * wi + xi * wr;
      re[u + 1] = c * wr - (xr * ur + xi * ui);
      im[u + 1] = c * wi - (xr * ui - xi * ur);
    }
  }
  turns.forEach(({ c, xr, xi }, index) => {
    const k = start + index;
    for (let i = start; i <= Math.min(k + 1, end); i += 1) {
      const u = i + k * n;
      const w = u + n;
      const ur = re[u];
      const ui = im[u];
      const wr = re[w];
      const wi = im[w];
      re[u] = c * ur + xr * wr + xi * wi;
      im[u] = c * ui + xr * wi - xi * wr;
      re[w] = c * wr - (xr * ur - xi * ui);
      im[w] = c * wi - (xr * ui + xi * ur);
    }
  });
  for (let k = start; k <= end; k += 1) {
    re[k + k * n] += sr;
    im[k + k * n] += si;
  }
}

function toHessenberg({ rows: n, re, im }: ComplexMatrix): void {
  const swap = (a: number, b: number): void => {
    [re[a], re[b]] = [re[b], re[a]];
    [im[a], im[b]] = [im[b], im[a]];
  };
  for (let m = 1; m < n - 1; m += 1) {
    let pivot = m;
    for (let i = m + 1; i < n; i += 1) {
      const here = i + (m - 1) * n;
      const best = pivot + (m - 1) * n;
      if (Math.hypot(re[here], im[here]) > Math.hypot(re[best], im[best])) pivot = i;
    }
    const lead = pivot + (m - 1) * n;
    if (re[lead] === 0 && im[lead] === 0) continue;
    if (pivot !== m) {
      for (let j = 0; j < n; j += 1) swap(pivot + j * n, m + j * n);
      for (let i = 0; i < n; i += 1) swap(i + pivot * n, i + m * n);
    }
    const base = m + (m - 1) * n;
    for (let i = m + 1; i < n; i += 1) {
      const entry = i + (m - 1) * n;
      const [fr, fi] = divide(re[entry], im[entry], re[base], im[base]);
      if (fr === 0 && fi === 0) continue;
      for (let j = m - 1; j < n; j += 1) {
        const from = m + j * n;
        const to = i + j * n;
        const r = re[from];
        const s = im[from];
        re[to] -= fr * r - fi * s;
        im[to] -= fr * s + fi * r;
      }
      for (let k = 0; k < n; k += 1) {
        const from = k + i * n;
        const to = k + m * n;
        re[to] += fr * re[from] - fi * im[from];
        im[to] += fr * im[from] + fi * re[from];
      }
    }
  }
}
