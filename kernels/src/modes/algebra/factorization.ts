/**
 * Multifrontal L·D·Lᵀ of a matrix that is a sum of element matrices (I. S. Duff, J. K. Reid, ACM Trans. Math. Softw. 9 (1983) 302):
 * each part of the dissection assembles a small dense matrix from its elements or its children, eliminates its own unknowns and
 * hands the rest on. Without pivoting: safe for positive definite matrices, checked by growth for others.
 */
import { eliminate } from "./dense-front.js";
import type { Part } from "./dissection.js";

/** A pivot came out as (nearly) zero: the matrix is singular or the shift hits an eigenvalue. */
export class PivotError extends Error {
  override name = "PivotError";
}

/** Of what stood on the diagonal when the part's elimination began. */
const SMALLEST_PIVOT = 1e-13;

export class Factorization {
  /** How many pivots are negative: the number of negative eigenvalues (J. J. Sylvester's law of inertia). */
  readonly negative: number;
  /** Numbers in L. */
  readonly size: number;
  private readonly l: Float64Array;
  private readonly d: Float64Array;
  private readonly offsets: Float64Array;
  private readonly work: Float64Array;

  /**
   * @param dofs unknowns of each element in the dissection's numbering, −1 where fixed
   * @param element writes the symmetric matrix of an element, perElement², into its second argument
   */
  constructor(
    private readonly parts: readonly Part[],
    dofs: Int32Array,
    perElement: number,
    unknowns: number,
    element: (index: number, out: Float64Array) => void,
  ) {
    let size = 0;
    let largest = 0;
    let deepest = 0;
    let depth = 0;
    this.offsets = new Float64Array(parts.length);
    parts.forEach((part, index) => {
      const m = part.count + part.border.length;
      this.offsets[index] = size;
      size += m * part.count;
      largest = Math.max(largest, m);
      for (const child of part.children) depth -= parts[child].border.length ** 2;
      depth += part.border.length ** 2;
      deepest = Math.max(deepest, depth);
    });
    this.size = size;
    this.l = new Float64Array(size);
    this.d = new Float64Array(unknowns);
    this.work = new Float64Array(2 * largest);
    this.negative = this.factor(dofs, perElement, unknowns, element, largest, deepest);
  }

  private factor(
    dofs: Int32Array,
    perElement: number,
    unknowns: number,
    element: (index: number, out: Float64Array) => void,
    largest: number,
    deepest: number,
  ): number {
    const { parts, l, d } = this;
    const front = new Float64Array(largest * largest);
    const stack = new Float64Array(deepest);
    const place = new Int32Array(unknowns);
    const matrix = new Float64Array(perElement * perElement);
    let top = 0;
    let negative = 0;
    const diagonal = new Float64Array(largest);
    parts.forEach((part, index) => {
      const { first, count: k, border } = part;
      const m = k + border.length;
      front.fill(0, 0, m * m);
      for (let n = 0; n < k; n += 1) place[first + n] = n;
      border.forEach((dof, n) => {
        place[dof] = k + n;
      });
      for (const e of part.elements) {
        element(e, matrix);
        addElement(front, m, matrix, dofs, e * perElement, perElement, place);
      }
      for (let c = part.children.length - 1; c >= 0; c -= 1) {
        const child = parts[part.children[c]].border;
        top -= child.length ** 2;
        addChild(front, m, stack, top, child, place);
      }
      for (let n = 0; n < k; n += 1) diagonal[n] = Math.abs(front[n * m + n]);
      eliminate(front, m, k);
      for (let n = 0; n < k; n += 1) {
        const pivot = front[n * m + n];
        if (!(Math.abs(pivot) > SMALLEST_PIVOT * diagonal[n])) throw new PivotError("A pivot vanished.");
        if (pivot < 0) negative += 1;
        d[first + n] = pivot;
      }
      const offset = this.offsets[index];
      for (let i = 1; i < m; i += 1) {
        const length = Math.min(i, k);
        const from = i * m;
        const to = offset + i * k;
        for (let j = 0; j < length; j += 1) l[to + j] = front[from + j];
      }
      const b = border.length;
      for (let i = 0; i < b; i += 1) {
        const from = (k + i) * m + k;
        const to = top + i * b;
        for (let j = 0; j <= i; j += 1) stack[to + j] = front[from + j];
      }
      top += b * b;
    });
    return negative;
  }

  /** Solves for two right-hand sides at once, in place: x holds them interleaved. */
  solvePair(x: Float64Array): void {
    const { parts, l, d, offsets, work: y } = this;
    for (let index = 0; index < parts.length; index += 1) {
      const { first, count: k, border } = parts[index];
      const offset = offsets[index];
      const base = 2 * first;
      for (let i = 1; i < k; i += 1) {
        const row = offset + i * k;
        let s0 = x[base + 2 * i];
        let s1 = x[base + 2 * i + 1];
        for (let j = 0; j < i; j += 1) {
          const v = l[row + j];
          s0 -= v * x[base + 2 * j];
          s1 -= v * x[base + 2 * j + 1];
        }
        x[base + 2 * i] = s0;
        x[base + 2 * i + 1] = s1;
      }
      const b = border.length;
      // Two rows at once; the last of an odd number goes twice, its second sum unused.
      for (let i = 0; i < b; i += 2) {
        const row = offset + (k + i) * k;
        const second = i + 1 < b ? row + k : row;
        let s0 = 0;
        let s1 = 0;
        let t0 = 0;
        let t1 = 0;
        for (let j = 0; j < k; j += 1) {
          const x0 = x[base + 2 * j];
          const x1 = x[base + 2 * j + 1];
          const v = l[row + j];
          const w = l[second + j];
          s0 += v * x0;
          s1 += v * x1;
          t0 += w * x0;
          t1 += w * x1;
        }
        const dof = 2 * border[i];
        x[dof] -= s0;
        x[dof + 1] -= s1;
        if (i + 1 < b) {
          const next = 2 * border[i + 1];
          x[next] -= t0;
          x[next + 1] -= t1;
        }
      }
    }
    for (let n = 0; n < d.length; n += 1) {
      const inverse = 1 / d[n];
      x[2 * n] *= inverse;
      x[2 * n + 1] *= inverse;
    }
    for (let index = parts.length - 1; index >= 0; index -= 1) {
      const { first, count: k, border } = parts[index];
      const offset = offsets[index];
      const base = 2 * first;
      for (let j = 0; j < 2 * k; j += 1) y[j] = x[base + j];
      const b = border.length;
      for (let i = 0; i < b; i += 2) {
        const row = offset + (k + i) * k;
        const two = i + 1 < b;
        const second = two ? row + k : row;
        const x0 = x[2 * border[i]];
        const x1 = x[2 * border[i] + 1];
        const z0 = two ? x[2 * border[i + 1]] : 0;
        const z1 = two ? x[2 * border[i + 1] + 1] : 0;
        for (let j = 0; j < k; j += 1) {
          const v = l[row + j];
          const w = l[second + j];
          y[2 * j] -= v * x0 + w * z0;
          y[2 * j + 1] -= v * x1 + w * z1;
        }
      }
      for (let i = k - 1; i > 0; i -= 1) {
        const row = offset + i * k;
        const x0 = y[2 * i];
        const x1 = y[2 * i + 1];
        for (let j = 0; j < i; j += 1) {
          const v = l[row + j];
          y[2 * j] -= v * x0;
          y[2 * j + 1] -= v * x1;
        }
      }
      for (let j = 0; j < 2 * k; j += 1) x[base + j] = y[j];
    }
  }
}

function addElement(
  front: Float64Array,
  m: number,
  matrix: Float64Array,
  dofs: Int32Array,
  at: number,
  perElement: number,
  place: Int32Array,
): void {
  for (let p = 0; p < perElement; p += 1) {
    const dofP = dofs[at + p];
    if (dofP < 0) continue;
    const i = place[dofP];
    for (let q = 0; q < perElement; q += 1) {
      const dofQ = dofs[at + q];
      if (dofQ < 0) continue;
      const j = place[dofQ];
      if (j <= i) front[i * m + j] += matrix[p * perElement + q];
    }
  }
}

/** Adds a child's Schur complement. Borders rise, and so do their places within own and border; the two may mix. */
function addChild(
  front: Float64Array,
  m: number,
  stack: Float64Array,
  at: number,
  child: Int32Array,
  place: Int32Array,
): void {
  const b = child.length;
  for (let i = 0; i < b; i += 1) {
    const pi = place[child[i]];
    const row = at + i * b;
    for (let j = 0; j <= i; j += 1) {
      const pj = place[child[j]];
      front[pi >= pj ? pi * m + pj : pj * m + pi] += stack[row + j];
    }
  }
}
