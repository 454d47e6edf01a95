/**
 * Q of a mode beyond perturbation: the complex frequency of the damped mode itself.
 *
 * With ε + σ/(jωε₀) and μ + s/(jωμ₀), s the magnetic loss, in each medium, the elements' equations A(ω)x = K(ω)x − (ω/c)²M(ω)x = 0 are complex symmetric and hold
 * ω in the coefficients. From the lossless mode, residual inverse iteration (A. Neumaier, SIAM J. Numer. Anal. 22 (1985) 914)
 *
 *   ω: xᵀA(ω)x = 0,    x ← x − T⁻¹A(ω)x
 *
 * with T the lossless matrix beside the mode's eigenvalue: one real factorization, the real and the imaginary part solved as a pair. It
 * converges the faster the smaller the loss is against the distance to the next mode; where it does not, null tells so.
 */
import { C0, EPS0, MU0 } from "../lattice/index.js";
import type { Complex } from "../scene/index.js";
import { add, complex, divide, magnitude, multiply, scale, subtract } from "../stack/complex.js";
import { PivotError } from "./algebra/factorization.js";
import { ELEMENT_NUMBERS, elementMatrix } from "./algebra/quadratic.js";
import type { ElementSpace } from "./space.js";
import { factorShifted } from "./space.js";

const NODES = 6;
/** The factored matrix lies this share of the eigenvalue below it. */
const BESIDE = 0.02;
const MOST_ROUNDS = 40;
/** Relative change of ω that counts as none: a thousandth of 1/Q where Q is 10⁵. */
const SETTLED = 1e-8;
/** A Q this many times off that by perturbation is not the same mode's. */
const STRAYED = 1.5;
/** Steps of the secant method for ω, each two digits or more. */
const SECANT_STEPS = 30;

interface Medium {
  epsilon: number;
  mu: number;
  sigma: number;
  sigmaStar: number;
}

/** What of K and of M is left of a medium's own with its losses: 1/μ and ε (TMz), 1/ε and μ (TEz), over their lossless values. */
function factors(
  { epsilon, mu, sigma, sigmaStar }: Medium,
  electric: boolean,
  omega: Complex,
): [Complex, Complex] {
  const one = complex(1);
  const e = subtract(one, divide(complex(0, sigma / (EPS0 * epsilon)), omega));
  const m = subtract(one, divide(complex(0, sigmaStar / (MU0 * mu)), omega));
  return electric ? [divide(one, m), e] : [divide(one, e), m];
}

/** (ω/c)² in 1/mm². */
const squared = (omega: Complex): Complex => scale(multiply(omega, omega), 1 / (C0 * 1e3) ** 2);

class DampedProblem {
  private readonly media: ReadonlyMap<number, Medium>;
  private readonly electric: boolean;
  private readonly stiffness = new Float64Array(NODES * NODES);
  private readonly mass = new Float64Array(NODES * NODES);

  constructor(private readonly space: ElementSpace) {
    const { mesh, polarization } = space;
    const media = new Map<number, Medium>();
    for (const index of mesh.medium) {
      const fill = mesh.drawing.media[index];
      if (fill.kind === "fill") media.set(index, fill);
    }
    this.media = media;
    this.electric = polarization === "TMz";
  }

  private factorsAt(omega: Complex): Map<number, [Complex, Complex]> {
    return new Map([...this.media].map(([index, fill]) => [index, factors(fill, this.electric, omega)]));
  }

  /** Visits K_e x_e and M_e x_e of each element: six complex numbers each, interleaved. */
  private visit(
    x: Float64Array,
    use: (element: number, kx: Float64Array, mx: Float64Array, local: Float64Array) => void,
  ): void {
    const { dofs, numbers, mesh } = this.space;
    const { stiffness, mass } = this;
    const [local, kx, mx] = [new Float64Array(12), new Float64Array(12), new Float64Array(12)];
    for (let e = 0; e < mesh.count; e += 1) {
      for (let i = 0; i < NODES; i += 1) {
        const dof = dofs[NODES * e + i];
        local[2 * i] = dof < 0 ? 0 : x[2 * dof];
        local[2 * i + 1] = dof < 0 ? 0 : x[2 * dof + 1];
      }
      elementMatrix(numbers, ELEMENT_NUMBERS * e, 1, 0, stiffness);
      elementMatrix(numbers, ELEMENT_NUMBERS * e, 0, 1, mass);
      kx.fill(0);
      mx.fill(0);
      for (let i = 0; i < NODES; i += 1) {
        for (let j = 0; j < NODES; j += 1) {
          const [k, m] = [stiffness[NODES * i + j], mass[NODES * i + j]];
          for (let part = 0; part < 2; part += 1) {
            kx[2 * i + part] += k * local[2 * j + part];
            mx[2 * i + part] += m * local[2 * j + part];
          }
        }
      }
      use(e, kx, mx, local);
    }
  }

  /** ω near `guess` with xᵀA(ω)x = 0. */
  frequency(x: Float64Array, guess: Complex): Complex {
    const sums = new Map<number, [Complex, Complex]>();
    const product = (a: Float64Array, b: Float64Array): Complex => {
      let sum = complex(0);
      for (let i = 0; i < NODES; i += 1)
        sum = add(sum, multiply(complex(a[2 * i], a[2 * i + 1]), complex(b[2 * i], b[2 * i + 1])));
      return sum;
    };
    this.visit(x, (e, kx, mx, local) => {
      const index = this.space.mesh.medium[e];
      const [k, m] = sums.get(index) ?? [complex(0), complex(0)];
      sums.set(index, [add(k, product(local, kx)), add(m, product(local, mx))]);
    });
    const form = (omega: Complex): Complex => {
      const all = this.factorsAt(omega);
      let value = complex(0);
      for (const [index, [k, m]] of sums) {
        const [fk, fm] = all.get(index) ?? [complex(1), complex(1)];
        value = add(value, subtract(multiply(fk, k), multiply(squared(omega), multiply(fm, m))));
      }
      return value;
    };
    let [before, now] = [guess, multiply(guess, complex(1 + 1e-4, 1e-4))];
    let [valueBefore, value] = [form(before), form(now)];
    for (let n = 0; n < SECANT_STEPS; n += 1) {
      const change = subtract(value, valueBefore);
      if (magnitude(change) === 0) break;
      const step = divide(multiply(value, subtract(now, before)), change);
      [before, valueBefore] = [now, value];
      now = subtract(now, step);
      value = form(now);
      if (magnitude(step) < 1e-13 * magnitude(now)) break;
    }
    return now;
  }

  /** out = A(ω)x. */
  apply(x: Float64Array, omega: Complex, out: Float64Array): void {
    const all = this.factorsAt(omega);
    const lambda = squared(omega);
    const { dofs, mesh } = this.space;
    out.fill(0);
    this.visit(x, (e, kx, mx) => {
      const [fk, fm] = all.get(mesh.medium[e]) ?? [complex(1), complex(1)];
      const massFactor = multiply(lambda, fm);
      for (let i = 0; i < NODES; i += 1) {
        const dof = dofs[NODES * e + i];
        if (dof < 0) continue;
        const [kr, ki, mr, mi] = [kx[2 * i], kx[2 * i + 1], mx[2 * i], mx[2 * i + 1]];
        out[2 * dof] += fk.re * kr - fk.im * ki - (massFactor.re * mr - massFactor.im * mi);
        out[2 * dof + 1] += fk.re * ki + fk.im * kr - (massFactor.re * mi + massFactor.im * mr);
      }
    });
  }
}

/**
 * Q = Re ω/(2 Im ω) of the damped mode that grows out of a lossless one; null where the iteration does not settle.
 *
 * @param vector the lossless mode
 * @param value its (ω/c)² in 1/mm²
 * @param q by perturbation
 */
export function dampedQ(space: ElementSpace, vector: Float64Array, value: number, q: number): number | null {
  const problem = new DampedProblem(space);
  let factored;
  try {
    factored = factorShifted(space, value * (1 - BESIDE));
  } catch (error) {
    if (error instanceof PivotError) return null;
    throw error;
  }
  const x = new Float64Array(2 * space.unknowns);
  vector.forEach((entry, n) => {
    x[2 * n] = entry;
  });
  const residual = new Float64Array(x.length);
  const real = Math.sqrt(value) * C0 * 1e3;
  let omega = complex(real, real / (2 * q));
  for (let round = 0; round < MOST_ROUNDS; round += 1) {
    const next = problem.frequency(x, omega);
    const change = magnitude(subtract(next, omega)) / magnitude(next);
    omega = next;
    if (!(change < 1)) return null;
    if (round > 0 && change < SETTLED) {
      const found = omega.re / (2 * omega.im);
      // Another mode's, where two lie so close that the loss mixes them.
      return found > q / STRAYED && found < q * STRAYED ? found : null;
    }
    problem.apply(x, omega, residual);
    factored.solvePair(residual);
    for (let n = 0; n < x.length; n += 1) x[n] -= residual[n];
  }
  return null;
}
