/** One eigenpair of a symmetric tridiagonal matrix: bisection by Sturm counts, then inverse iteration (G. H. Golub, C. F. Van Loan, Matrix Computations, 4th ed. 2013, §8.4; from memory). */

export interface TridiagonalPair {
  value: number;
  /** Of unit length. */
  vector: Float64Array;
}

const BISECTIONS = 200;
const ITERATIONS = 4;

/** Eigenvalues below x. */
function countBelow(diagonal: Float64Array, beside: Float64Array, x: number, tiny: number): number {
  let count = 0;
  let pivot = 1;
  for (let i = 0; i < diagonal.length; i += 1) {
    const coupling = i === 0 ? 0 : beside[i - 1] ** 2 / pivot;
    pivot = diagonal[i] - x - coupling;
    if (Math.abs(pivot) < tiny) pivot = -tiny;
    if (pivot < 0) count += 1;
  }
  return count;
}

/** Solves (matrix − shift)·x = b in place, with row exchanges; a vanishing pivot is taken as `tiny`. */
function solveShifted(
  diagonal: Float64Array,
  beside: Float64Array,
  shift: number,
  b: Float64Array,
  tiny: number,
): void {
  const n = diagonal.length;
  const d = diagonal.map((value) => value - shift);
  const upper = Float64Array.from({ length: n }, (_, i) => beside[i] ?? 0);
  const second = new Float64Array(n);
  const lower = upper.slice();
  for (let i = 0; i + 1 < n; i += 1) {
    if (Math.abs(lower[i]) > Math.abs(d[i])) {
      [d[i], lower[i]] = [lower[i], d[i]];
      [upper[i], d[i + 1]] = [d[i + 1], upper[i]];
      [second[i], upper[i + 1]] = [upper[i + 1], 0];
      [b[i], b[i + 1]] = [b[i + 1], b[i]];
    }
    const factor = lower[i] / (d[i] === 0 ? tiny : d[i]);
    d[i + 1] -= factor * upper[i];
    upper[i + 1] -= factor * second[i];
    b[i + 1] -= factor * b[i];
  }
  for (let i = n - 1; i >= 0; i -= 1) {
    const known = upper[i] * (i + 1 < n ? b[i + 1] : 0) + second[i] * (i + 2 < n ? b[i + 2] : 0);
    b[i] = (b[i] - known) / (Math.abs(d[i]) < tiny ? tiny : d[i]);
  }
}

/**
 * @param diagonal n entries
 * @param beside n − 1 entries beside the diagonal
 * @param index 0 is the smallest; throws a RangeError where there are fewer
 */
export function tridiagonalPair(
  diagonal: Float64Array,
  beside: Float64Array,
  index: number,
): TridiagonalPair {
  const n = diagonal.length;
  if (!(index >= 0 && index < n)) throw new RangeError(`There are ${n} eigenvalues, none numbered ${index}.`);
  let size = 0;
  for (let i = 0; i < n; i += 1) {
    const row = Math.abs(diagonal[i]) + Math.abs(beside[i - 1] ?? 0) + Math.abs(beside[i] ?? 0);
    size = Math.max(size, row);
  }
  const tiny = size * 1e-18 + Number.MIN_VALUE;
  let [low, high] = [-size, size];
  for (let step = 0; step < BISECTIONS && high - low > 1e-17 * size; step += 1) {
    const middle = (low + high) / 2;
    if (countBelow(diagonal, beside, middle, tiny) > index) high = middle;
    else low = middle;
  }
  const value = (low + high) / 2;
  // Not symmetric about the middle, so that no mode is orthogonal to it.
  const vector = Float64Array.from({ length: n }, (_, i) => 1 + 0.37 * Math.sin(1 + 1.7 * i));
  for (let step = 0; step < ITERATIONS; step += 1) {
    solveShifted(diagonal, beside, value, vector, tiny);
    const length = Math.hypot(...vector);
    for (let i = 0; i < n; i += 1) vector[i] /= length;
  }
  return { value, vector };
}
