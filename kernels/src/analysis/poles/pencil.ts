/**
 * Damped exponentials of a complex, evenly sampled signal, y[n] = Σ A·zⁿ, by the matrix pencil in its singular-vector form
 * (T. K. Sarkar, O. Pereira, IEEE Antennas Propag. Mag. 37 (1995) 48).
 */
import type { ComplexMatrix } from "./complex-matrix.js";
import { complexMatrix, innerProduct } from "./complex-matrix.js";
import { complexEigenvalues } from "./eigenvalues.js";
import { rightSingular } from "./right-singular.js";

export interface ComplexSignal {
  re: Float64Array;
  im: Float64Array;
}

export interface Exponential {
  zRe: number;
  zIm: number;
  /** A, at sample 0. */
  re: number;
  im: number;
}

export interface PencilFit {
  terms: Exponential[];
  /** Rms of what the terms leave of the signal, a sample. */
  residual: number;
}

/** Pencil parameter over the number of samples: between a third and a half the poles vary least. */
const PENCIL_SHARE = 0.4;
/** A singular value counts as signal above this many times those of the noise, */
const OVER_NOISE = 3;
/** … which are read at this place of the falling row, where the noise of a random matrix has most of its spread behind it. */
const NOISE_PLACE = 0.75;
/** What rounding alone leaves in double precision. */
const ROUNDING = 1e-12;
/** Poles that grow by more than this over the signal are not fitted. */
const MOST_GROWTH = Math.exp(3);

/** The exponentials of a signal of at least 8 samples; none where it is zero or nothing stands out of its noise. */
export function matrixPencil(signal: ComplexSignal): PencilFit {
  const samples = signal.re.length;
  const pencil = Math.floor(samples * PENCIL_SHARE);
  const rows = samples - pencil;
  const hankel = complexMatrix(rows, pencil + 1);
  for (let j = 0; j <= pencil; j += 1) {
    hankel.re.set(signal.re.subarray(j, j + rows), j * rows);
    hankel.im.set(signal.im.subarray(j, j + rows), j * rows);
  }
  const { values, vectors } = rightSingular(hankel);
  const noise = values[Math.floor((values.length - 1) * NOISE_PLACE)];
  const least = Math.max(OVER_NOISE * noise, ROUNDING * values[0]);
  const order = values.findIndex((value) => !(value > least));
  const count = Math.min(order < 0 ? pencil : order, pencil);
  if (count === 0) return { terms: [], residual: rms(signal) };
  const poles = complexEigenvalues(shiftMatrix(vectors, count)).filter(
    ([re, im]) => Number.isFinite(re + im) && Math.hypot(re, im) ** samples < MOST_GROWTH,
  );
  return fitAmplitudes(signal, poles);
}

/** Φ with W↓ = W↑Φ, W the conjugate singular vectors of the signal without their last and their first row. */
function shiftMatrix(vectors: ComplexMatrix, count: number): ComplexMatrix {
  const { rows } = vectors;
  const shift = complexMatrix(count, count);
  // Conjugated afterwards: conj(V)^H conj(V) = conj(V^H V).
  for (let j = 0; j < count; j += 1) {
    for (let i = 0; i < count; i += 1) {
      const [re, im] = innerProduct(vectors, i * rows, vectors, j * rows + 1, rows - 1);
      shift.re[i + j * count] = re;
      shift.im[i + j * count] = -im;
    }
  }
  // (W↑^H W↑)⁻¹ = I + u·u^H / (1 − |u|²), u the conjugate of W's last row.
  const last = (k: number): number => k * rows + rows - 1;
  let norm = 0;
  for (let k = 0; k < count; k += 1) norm += vectors.re[last(k)] ** 2 + vectors.im[last(k)] ** 2;
  for (let j = 0; j < count; j += 1) {
    let re = 0;
    let im = 0;
    for (let k = 0; k < count; k += 1) {
      const ur = vectors.re[last(k)];
      const ui = -vectors.im[last(k)];
      const x = shift.re[k + j * count];
      const y = shift.im[k + j * count];
      re += ur * x - ui * y;
      im += ur * y + ui * x;
    }
    for (let i = 0; i < count; i += 1) {
      const ur = vectors.re[last(i)];
      const ui = vectors.im[last(i)];
      shift.re[i + j * count] += (ur * re - ui * im) / (1 - norm);
      shift.im[i + j * count] += (ur * im + ui * re) / (1 - norm);
    }
  }
  return shift;
}

const rms = ({ re, im }: ComplexSignal): number => {
  let sum = 0;
  for (let n = 0; n < re.length; n += 1) sum += re[n] ** 2 + im[n] ** 2;
  return Math.sqrt(sum / re.length);
};

/** Least squares for the amplitudes, by orthogonalising the exponentials twice. */
function fitAmplitudes(signal: ComplexSignal, poles: readonly [number, number][]): PencilFit {
  const samples = signal.re.length;
  const count = poles.length;
  const basis = complexMatrix(samples, count);
  poles.forEach(([zr, zi], k) => {
    let re = 1;
    let im = 0;
    for (let n = 0; n < samples; n += 1) {
      basis.re[n + k * samples] = re;
      basis.im[n + k * samples] = im;
      [re, im] = [re * zr - im * zi, re * zi + im * zr];
    }
  });
  const r = complexMatrix(count, count);
  const rest = complexMatrix(samples, 1);
  rest.re.set(signal.re);
  rest.im.set(signal.im);
  const projections = complexMatrix(count, 1);
  for (let k = 0; k < count; k += 1) {
    for (let pass = 0; pass < 2; pass += 1) {
      for (let i = 0; i < k; i += 1) {
        const [pr, pi] = innerProduct(basis, i * samples, basis, k * samples, samples);
        r.re[i + k * count] += pr;
        r.im[i + k * count] += pi;
        subtract(basis, k * samples, basis, i * samples, pr, pi, samples);
      }
    }
    const norm = Math.sqrt(innerProduct(basis, k * samples, basis, k * samples, samples)[0]);
    r.re[k + k * count] = norm;
    if (norm > 0) {
      for (let n = k * samples; n < (k + 1) * samples; n += 1) {
        basis.re[n] /= norm;
        basis.im[n] /= norm;
      }
    }
    const [pr, pi] = innerProduct(basis, k * samples, rest, 0, samples);
    projections.re[k] = pr;
    projections.im[k] = pi;
    subtract(rest, 0, basis, k * samples, pr, pi, samples);
  }
  for (let k = count - 1; k >= 0; k -= 1) {
    let re = projections.re[k];
    let im = projections.im[k];
    for (let j = k + 1; j < count; j += 1) {
      const cr = r.re[k + j * count];
      const ci = r.im[k + j * count];
      re -= cr * projections.re[j] - ci * projections.im[j];
      im -= cr * projections.im[j] + ci * projections.re[j];
    }
    const norm = r.re[k + k * count];
    projections.re[k] = norm > 0 ? re / norm : 0;
    projections.im[k] = norm > 0 ? im / norm : 0;
  }
  const terms = poles.map(
    ([zRe, zIm], k): Exponential => ({ zRe, zIm, re: projections.re[k], im: projections.im[k] }),
  );
  return { terms, residual: rms(rest) };
}

/** x −= (pr, pi)·y */
function subtract(
  x: ComplexMatrix,
  p: number,
  y: ComplexMatrix,
  q: number,
  pr: number,
  pi: number,
  length: number,
): void {
  for (let n = 0; n < length; n += 1) {
    const yr = y.re[q + n];
    const yi = y.im[q + n];
    x.re[p + n] -= pr * yr - pi * yi;
    x.im[p + n] -= pr * yi + pi * yr;
  }
}
