/** All eigenvalues and vectors of a small dense symmetric matrix, by cyclic Jacobi rotations (G. H. Golub, C. F. Van Loan, Matrix Computations, 4th ed. 2013, §8.5). */

const SWEEPS = 60;

export interface DenseEigen {
  /** Falling. */
  values: Float64Array;
  /** Row n is the unit vector of value n. */
  vectors: Float64Array[];
}

/** @param matrix n × n, row-major; it is used up */
export function symmetricEigen(matrix: Float64Array, n: number): DenseEigen {
  const a = matrix;
  const v = new Float64Array(n * n);
  for (let i = 0; i < n; i += 1) v[i * n + i] = 1;
  let size = 0;
  for (const entry of a) size += entry * entry;
  for (let sweep = 0; sweep < SWEEPS; sweep += 1) {
    let off = 0;
    for (let i = 0; i < n; i += 1) for (let j = 0; j < i; j += 1) off += a[i * n + j] ** 2;
    if (off <= 1e-32 * size) break;
    for (let p = 0; p < n; p += 1) for (let q = p + 1; q < n; q += 1) rotate(a, v, n, p, q);
  }
  const order = Array.from({ length: n }, (_, i) => i).sort((i, j) => a[j * n + j] - a[i * n + i]);
  return {
    values: Float64Array.from(order, (i) => a[i * n + i]),
    vectors: order.map((i) => v.slice(i * n, (i + 1) * n)),
  };
}

function rotate(a: Float64Array, v: Float64Array, n: number, p: number, q: number): void {
  const apq = a[p * n + q];
  const app = a[p * n + p];
  const aqq = a[q * n + q];
  if (Math.abs(apq) <= 1e-18 * Math.sqrt(Math.abs(app * aqq))) return;
  const theta = (aqq - app) / (2 * apq);
  const t = Math.sign(theta || 1) / (Math.abs(theta) + Math.sqrt(theta * theta + 1));
  const c = 1 / Math.sqrt(t * t + 1);
  const s = t * c;
  const rowP = p * n;
  const rowQ = q * n;
  for (let k = 0; k < n; k += 1) {
    const x = a[rowP + k];
    const y = a[rowQ + k];
    a[rowP + k] = c * x - s * y;
    a[rowQ + k] = s * x + c * y;
    const u = v[rowP + k];
    const w = v[rowQ + k];
    v[rowP + k] = c * u - s * w;
    v[rowQ + k] = s * u + c * w;
  }
  for (let k = 0; k < n; k += 1) {
    const x = a[k * n + p];
    const y = a[k * n + q];
    a[k * n + p] = c * x - s * y;
    a[k * n + q] = s * x + c * y;
  }
}
