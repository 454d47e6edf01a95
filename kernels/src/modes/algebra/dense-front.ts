/** The dense kernel of the factorization: eliminates the first unknowns of a small symmetric matrix. */

const PANEL = 32;
let scaled = new Float64Array(0);

/**
 * Replaces the lower triangle of a symmetric m × m matrix (row-major, stride m) by its partial factors L·D·Lᵀ: the first k
 * columns become L below the diagonal and D on it, the rest the Schur complement. No pivoting.
 */
export function eliminate(f: Float64Array, m: number, k: number): void {
  if (scaled.length < m * PANEL) scaled = new Float64Array(m * PANEL);
  for (let start = 0; start < k; start += PANEL) {
    const end = Math.min(k, start + PANEL);
    panel(f, m, start, end);
    if (end < m) trailing(f, m, start, end);
  }
}

/** Columns start…end of L and D; also L·D of every row, which the update of what follows needs. */
function panel(f: Float64Array, m: number, start: number, end: number): void {
  const w = scaled;
  for (let j = start; j < end; j += 1) {
    const rowJ = j * m + start;
    const done = j - start;
    const wj = j * PANEL;
    let d = f[j * m + j];
    for (let q = 0; q < done; q += 1) {
      const l = f[rowJ + q];
      const dl = w[wj + q];
      d -= l * dl;
    }
    f[j * m + j] = d;
    const inverse = 1 / d;
    for (let i = j + 1; i < m; i += 1) {
      const rowI = i * m + start;
      let sum = f[rowI + done];
      for (let q = 0; q < done; q += 1) sum -= f[rowI + q] * w[wj + q];
      w[i * PANEL + done] = sum;
      f[rowI + done] = sum * inverse;
    }
  }
}

/** Rows and columns from `end` on, less the panel's part; four rows by two columns at a time. */
function trailing(f: Float64Array, m: number, start: number, end: number): void {
  const w = scaled;
  const width = end - start;
  let i = end;
  for (; i + 3 < m; i += 4) {
    const r0 = i * m;
    const r1 = r0 + m;
    const r2 = r1 + m;
    const r3 = r2 + m;
    const a0 = r0 + start;
    const a1 = r1 + start;
    const a2 = r2 + start;
    const a3 = r3 + start;
    // Up to the diagonal block; what is written above the diagonal is never read.
    for (let j = end; j < i + 4; j += 2) {
      const b0 = j * PANEL;
      const b1 = b0 + PANEL;
      let s00 = 0;
      let s01 = 0;
      let s10 = 0;
      let s11 = 0;
      let s20 = 0;
      let s21 = 0;
      let s30 = 0;
      let s31 = 0;
      for (let q = 0; q < width; q += 1) {
        const y0 = w[b0 + q];
        const y1 = w[b1 + q];
        const x0 = f[a0 + q];
        const x1 = f[a1 + q];
        s00 += x0 * y0;
        s01 += x0 * y1;
        s10 += x1 * y0;
        s11 += x1 * y1;
        const x2 = f[a2 + q];
        const x3 = f[a3 + q];
        s20 += x2 * y0;
        s21 += x2 * y1;
        s30 += x3 * y0;
        s31 += x3 * y1;
      }
      f[r0 + j] -= s00;
      f[r1 + j] -= s10;
      f[r2 + j] -= s20;
      f[r3 + j] -= s30;
      // i + 3 < m keeps column j + 1 ≤ i + 3 inside the matrix.
      f[r0 + j + 1] -= s01;
      f[r1 + j + 1] -= s11;
      f[r2 + j + 1] -= s21;
      f[r3 + j + 1] -= s31;
    }
  }
  for (; i < m; i += 1) {
    const row = i * m;
    for (let j = end; j <= i; j += 1) {
      let sum = 0;
      for (let q = 0; q < width; q += 1) sum += f[row + start + q] * w[j * PANEL + q];
      f[row + j] -= sum;
    }
  }
}
