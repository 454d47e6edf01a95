/**
 * Singular values and right singular vectors of a complex matrix by one-sided Jacobi rotations, which find small singular
 * values to high relative accuracy (G. H. Golub, C. F. Van Loan, Matrix Computations, 4th ed. 2013, §8.6.3).
 */
import type { ComplexMatrix } from "./complex-matrix.js";
import { complexMatrix, innerProduct } from "./complex-matrix.js";

const SWEEPS = 40;
const ORTHOGONAL = 1e-13;

export interface RightSingular {
  /** Falling. */
  values: Float64Array;
  /** Column k belongs to value k. */
  vectors: ComplexMatrix;
}

/** @param matrix rows ≥ columns; it is used up */
export function rightSingular(matrix: ComplexMatrix): RightSingular {
  const { rows, columns } = matrix;
  const v = complexMatrix(columns, columns);
  for (let j = 0; j < columns; j += 1) v.re[j + j * columns] = 1;
  let turned = true;
  for (let sweep = 0; sweep < SWEEPS && turned; sweep += 1) {
    turned = false;
    // Norms are kept through a sweep and taken anew for the next one.
    const norms = Float64Array.from({ length: columns }, (_, j) => squaredNorm(matrix, j));
    for (let p = 0; p < columns; p += 1) {
      for (let q = p + 1; q < columns; q += 1) {
        const [gr, gi] = innerProduct(matrix, p * rows, matrix, q * rows, rows);
        const gamma = Math.hypot(gr, gi);
        if (gamma <= ORTHOGONAL * Math.sqrt(norms[p] * norms[q]) || gamma < 1e-290) continue;
        turned = true;
        const zeta = (norms[q] - norms[p]) / (2 * gamma);
        const t = (zeta < 0 ? -1 : 1) / (Math.abs(zeta) + Math.sqrt(1 + zeta * zeta));
        const c = 1 / Math.sqrt(1 + t * t);
        const s = c * t;
        rotate(matrix, p, q, c, (s * gr) / gamma, (s * gi) / gamma);
        rotate(v, p, q, c, (s * gr) / gamma, (s * gi) / gamma);
        norms[p] = Math.max(0, norms[p] - t * gamma);
        norms[q] += t * gamma;
      }
    }
  }
  const norms = Float64Array.from({ length: columns }, (_, j) => Math.sqrt(squaredNorm(matrix, j)));
  const order = Array.from(norms.keys()).sort((a, b) => norms[b] - norms[a]);
  const vectors = complexMatrix(columns, columns);
  order.forEach((from, to) => {
    vectors.re.set(v.re.subarray(from * columns, (from + 1) * columns), to * columns);
    vectors.im.set(v.im.subarray(from * columns, (from + 1) * columns), to * columns);
  });
  return { values: Float64Array.from(order, (j) => norms[j]), vectors };
}

const squaredNorm = (m: ComplexMatrix, j: number): number =>
  innerProduct(m, j * m.rows, m, j * m.rows, m.rows)[0];

/** Column p ← c·p − σ̄·q, column q ← σ·p + c·q, with the complex σ = (sr, si). */
function rotate(m: ComplexMatrix, p: number, q: number, c: number, sr: number, si: number): void {
  const { rows, re, im } = m;
  const first = p * rows;
  const second = q * rows;
  for (let i = 0; i < rows; i += 1) {
    const pr = re[first + i];
    const pi = im[first + i];
    const qr = re[second + i];
    const qi = im[second + i];
    re[first + i] = c * pr - (sr * qr + si * qi);
    im[first + i] = c * pi - (sr * qi - si * qr);
    re[second + i] = sr * pr - si * pi + c * qr;
    im[second + i] = sr * pi + si * pr + c * qi;
  }
}
