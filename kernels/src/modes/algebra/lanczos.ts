/**
 * Shift-and-invert Lanczos in pairs, with full reorthogonalization, for K x = λ M x with K and M symmetric, M positive definite
 * (T. Ericsson, A. Ruhe, Math. Comput. 35 (1980) 1251; in blocks: G. H. Golub, R. Underwood, in Mathematical Software III, 1977).
 */
import { symmetricEigen } from "./symmetric-eigen.js";

export interface ShiftedOperator {
  unknowns: number;
  /** out = M x. */
  multiplyMass: (x: Float64Array, out: Float64Array) => void;
  /** Solves (K − shift·M) y = x for two interleaved vectors, in place. */
  solvePair: (x: Float64Array) => void;
  shift: number;
}

export interface Eigenpair {
  value: number;
  /** x with xᵀ M x = 1. */
  vector: Float64Array;
}

export interface Search {
  /** Settled, rising. */
  pairs: Eigenpair[];
  /** The next eigenvalues behind them, roughly. */
  guards: number[];
}

/**
 * A pair has settled when its residual is this share of its own 1/(λ − shift); its eigenvalue is then right to about the square.
 * Of the guards behind the pairs asked for only the eigenvalues are used, and those to three digits.
 */
const SETTLED = 1e-6;
const SETTLED_GUARD = 1e-2;
const LARGEST_BASIS = 400;
/** Blocks between two looks at the Ritz values. */
const CHECK_EVERY = 2;
/** Vectors of the two newest blocks. */
const NEWEST = 4;
/** A vector of which a pass leaves less than this is orthogonalized again (B. N. Parlett, The Symmetric Eigenvalue Problem, 1980, §6-9). */
const AGAIN = 0.5;
const NOTHING = new Float64Array(0);
/** What is left of a vector, after taking out the basis, when it lay in it. */
const DEPENDENT = 1e-11;

function dot(a: Float64Array, b: Float64Array): number {
  let s0 = 0;
  let s1 = 0;
  let s2 = 0;
  let s3 = 0;
  const n = a.length & ~3;
  for (let i = 0; i < n; i += 4) {
    s0 += a[i] * b[i];
    s1 += a[i + 1] * b[i + 1];
    s2 += a[i + 2] * b[i + 2];
    s3 += a[i + 3] * b[i + 3];
  }
  for (let i = n; i < a.length; i += 1) s0 += a[i] * b[i];
  return s0 + s1 + s2 + s3;
}

function subtract(x: Float64Array, c: number, q: Float64Array): void {
  for (let i = 0; i < x.length; i += 1) x[i] -= c * q[i];
}

/** x −= Σ cₙqₙ, four vectors in one pass over x. */
function subtractAll(x: Float64Array, c: ArrayLike<number>, vectors: readonly Float64Array[]): void {
  const length = x.length;
  let n = 0;
  for (; n + 3 < vectors.length; n += 4) {
    const [q0, q1, q2, q3] = [vectors[n], vectors[n + 1], vectors[n + 2], vectors[n + 3]];
    const [c0, c1, c2, c3] = [c[n], c[n + 1], c[n + 2], c[n + 3]];
    for (let i = 0; i < length; i += 1) x[i] -= c0 * q0[i] + c1 * q1[i] + c2 * q2[i] + c3 * q3[i];
  }
  for (; n < vectors.length; n += 1) subtract(x, c[n], vectors[n]);
}

/** Numbers between −½ and ½ that are the same in every run (a linear congruential generator). */
function fillAtRandom(x: Float64Array, seed: number): void {
  let state = seed >>> 0;
  for (let i = 0; i < x.length; i += 1) {
    state = (Math.imul(state, 1664525) + 1013904223) >>> 0;
    x[i] = state / 2 ** 32 - 0.5;
  }
}

class Basis {
  readonly vectors: Float64Array[] = [];
  private readonly images: Float64Array[] = [];
  private readonly massTimes: Float64Array;
  private seed: number;

  constructor(
    private readonly operator: ShiftedOperator,
    private readonly locked: readonly Float64Array[],
    seed: number,
  ) {
    this.massTimes = new Float64Array(operator.unknowns);
    this.seed = seed;
  }

  /**
   * Takes locked and basis vectors out of x: first the newest, which a Lanczos step brings most of, then all, and once more
   * where that took much out, for rounding then shows. Returns the coefficients on the basis and the M-norm of x
   * before and after; `massTimes` then holds M x.
   */
  orthogonalize(x: Float64Array): { coefficients: Float64Array; norm: number; before: number } {
    const { operator, massTimes, vectors, locked, images } = this;
    const coefficients = new Float64Array(vectors.length);
    const massNorm = (): number => Math.sqrt(Math.max(0, dot(x, massTimes)));
    operator.multiplyMass(x, massTimes);
    const before = massNorm();
    for (let n = Math.max(0, vectors.length - NEWEST); n < vectors.length; n += 1) {
      const c = dot(vectors[n], massTimes);
      coefficients[n] += c;
      subtract(x, c, vectors[n]);
      subtract(massTimes, c, images[n]);
    }
    let norm = massNorm();
    for (let pass = 0; pass < 3; pass += 1) {
      const previous = norm;
      subtractAll(
        x,
        locked.map((q) => dot(q, massTimes)),
        locked,
      );
      const found = vectors.map((q) => dot(q, massTimes));
      subtractAll(x, found, vectors);
      found.forEach((c, n) => {
        coefficients[n] += c;
      });
      operator.multiplyMass(x, massTimes);
      norm = massNorm();
      if (norm > AGAIN * previous) break;
    }
    return { coefficients, norm, before };
  }

  /** Adds x, as `orthogonalize` has just left it, of the given norm. */
  push(x: Float64Array, norm: number): void {
    const scale = 1 / norm;
    for (let i = 0; i < x.length; i += 1) x[i] *= scale;
    this.vectors.push(x);
    this.images.push(this.massTimes.map((value) => value * scale));
    if (this.images.length > NEWEST) this.images[this.images.length - 1 - NEWEST] = NOTHING;
  }

  /** M times vector n, which must be one of the newest. */
  image(n: number): Float64Array {
    return this.images[n];
  }

  /** Adds a vector at random; false where the space is used up. */
  pushRandom(): boolean {
    for (let attempt = 0; attempt < 3; attempt += 1) {
      const x = new Float64Array(this.operator.unknowns);
      this.seed += 1;
      fillAtRandom(x, this.seed * 2654435761);
      const { norm, before } = this.orthogonalize(x);
      if (norm > DEPENDENT * before) {
        this.push(x, norm);
        return true;
      }
    }
    return false;
  }
}

/**
 * The `wanted` eigenvalues and `guards` rough ones above and nearest to the shift, rising, in the M-orthogonal complement of `locked`; fewer where the
 * space has fewer. A generator: it yields after every block, so that the caller may show progress or stop.
 */
export function* lowestEigenpairs(
  operator: ShiftedOperator,
  wanted: number,
  guards: number,
  locked: readonly Float64Array[],
  seed: number,
): Generator<number, Search> {
  const { unknowns, shift } = operator;
  const room = Math.min(unknowns - locked.length, LARGEST_BASIS);
  if (room <= 0 || wanted <= 0) return { pairs: [], guards: [] };
  const basis = new Basis(operator, locked, seed);
  const projected: Float64Array[] = [];
  const pair = new Float64Array(2 * unknowns);
  const q0 = basis.pushRandom();
  if (!q0) return { pairs: [], guards: [] };
  if (room > 1) basis.pushRandom();
  let done = 0;
  for (let block = 1; ; block += 1) {
    const { vectors } = basis;
    // The newest vectors that the operator has not met yet: two, or one at the end of a small space.
    const fresh = vectors.slice(done, done + 2);
    for (let n = 0; n < 2; n += 1) {
      if (n < fresh.length) {
        const image = basis.image(done + n);
        for (let i = 0; i < unknowns; i += 1) pair[2 * i + n] = image[i];
      } else for (let i = 0; i < unknowns; i += 1) pair[2 * i + n] = 0;
    }
    operator.solvePair(pair);
    const coupling: Float64Array[] = [];
    const known = vectors.length;
    fresh.forEach((_, n) => {
      const x = new Float64Array(unknowns);
      for (let i = 0; i < unknowns; i += 1) x[i] = pair[2 * i + n];
      const { coefficients, norm, before } = basis.orthogonalize(x);
      const row = new Float64Array(known + 2);
      row.set(coefficients);
      coupling.push(row);
      if (vectors.length < room && norm > DEPENDENT * before) {
        row[vectors.length] = norm;
        basis.push(x, norm);
      }
    });
    done += fresh.length;
    projected.push(...coupling);
    const spent = done >= vectors.length;
    if (spent && vectors.length < room && vectors.length < unknowns - locked.length) {
      // An invariant subspace: what is left is looked for from a new start.
      basis.pushRandom();
    }
    const last = done >= room || done >= vectors.length;
    if (last || (done >= 2 * wanted && block % CHECK_EVERY === 0)) {
      const found = settled(projected, done, vectors, wanted, guards, last);
      if (found !== null) {
        const value = ({ theta }: { theta: number }): number => shift + 1 / theta;
        const pairs = found
          .slice(0, wanted)
          .map((pair) => ({ value: value(pair), vector: combine(vectors, pair.weights, unknowns) }));
        return {
          pairs: pairs.sort((p, q) => p.value - q.value),
          guards: found
            .slice(wanted)
            .map(value)
            .sort((p, q) => p - q),
        };
      }
      if (last) throw new Error("The eigenvalues did not settle.");
    }
    yield done;
  }
}

/** Ritz pairs of the first `done` vectors, where the wanted ones have settled. */
function settled(
  projected: readonly Float64Array[],
  done: number,
  vectors: readonly Float64Array[],
  wanted: number,
  guards: number,
  last: boolean,
): { theta: number; weights: Float64Array }[] | null {
  const matrix = new Float64Array(done * done);
  for (let i = 0; i < done; i += 1) {
    for (let j = 0; j <= i; j += 1) {
      // Row i holds the components of A q_i on the vectors known then; the matrix is symmetric.
      const value = projected[i][j] ?? 0;
      matrix[i * done + j] = value;
      matrix[j * done + i] = value;
    }
  }
  const { values, vectors: ritz } = symmetricEigen(matrix, done);
  const found: { theta: number; weights: Float64Array }[] = [];
  for (let n = 0; n < done && found.length < wanted + guards && values[n] > 0; n += 1) {
    // A q_i reaches beyond the first `done` vectors by its components on the newest ones.
    let residual = 0;
    for (let beyond = done; beyond < vectors.length; beyond += 1) {
      let component = 0;
      for (let i = Math.max(0, done - 2); i < done; i += 1)
        component += (projected[i][beyond] ?? 0) * ritz[n][i];
      residual += component * component;
    }
    const allowed = found.length < wanted ? SETTLED : SETTLED_GUARD;
    // At the end of the room a rougher pair is still a pair; one rougher than that is none.
    if (Math.sqrt(residual) > (last ? Math.max(allowed, 1e-4) : allowed) * values[n]) return null;
    found.push({ theta: values[n], weights: ritz[n] });
  }
  return last || found.length === wanted + guards ? found : null;
}

function combine(vectors: readonly Float64Array[], weights: Float64Array, unknowns: number): Float64Array {
  const x = new Float64Array(unknowns);
  const minus = weights.map((weight) => -weight);
  subtractAll(x, minus, vectors.slice(0, weights.length));
  return x;
}
