/**
 * What the poles of media and films absorb at one frequency, exactly in the lattice, from the phasors of the fields.
 *
 * With z = exp(jωΔt), C = cos(ωΔt/2) and V a point's phasor at its own times, a step's currents act on the mean of two samples, C·V half a
 * step later.
 *
 * A pole (see `PoleDynamics` in `stepping`) has R = (z − 1 − S)⁻¹·h·V and draws (weight/b)·(z − 1)·R₀ at z^½, so that it takes
 *
 *   ½·(weight/b)·C·Re[2j·sin(ωΔt/2)·((z − 1 − S)⁻¹h)₀]·|V|².
 *
 * A branch (see `BranchMemory`) of V = Σwᵢvᵢ has S = q(1 + κ)V/(z − κ), and with what it gives back of the loss D in the coefficients, which
 * counts with them, it takes
 *
 *   ½C²·{q[(1 + κ)·Re 1/(z − κ) + cos ωΔt]·|V|² − cos ωΔt·q·Σ|w|·Σ|wᵢ||vᵢ|²}.
 */
import type { Branch, CoefficientSource, Engine, EngineField, PoleDynamics } from "../stepping/index.js";
import { rowCoefficients } from "../stepping/index.js";
import type { FramePoints } from "./frame-transform.js";

/** What absorbs besides the loss in the coefficients. */
export interface LossyMedia {
  /** The section's rows with their `terms`; null where no medium has poles. */
  terms: CoefficientSource | null;
  branches: readonly Branch[];
}

/** Powers in W/m at points of F and at points of G. */
export interface FieldPowers {
  f: number;
  g: number;
}

/** ½·(weight/b)·this·|V|² is what a pole takes. */
export function poleLoss({ order, step, feed }: PoleDynamics, omegaDt: number): number {
  const [c, s] = [Math.cos(omegaDt), Math.sin(omegaDt)];
  // ρ₀ = ((z − 1 − S)⁻¹h)₀ as numerator over determinant.
  let [numeratorRe, numeratorIm] = [feed[0], 0];
  let [re, im] = [c - 1 - step[0], s];
  if (order === 2) {
    const [otherRe, otherIm] = [c - 1 - step[3], s];
    numeratorRe = feed[0] * otherRe + step[1] * feed[1];
    numeratorIm = feed[0] * otherIm;
    [re, im] = [re * otherRe - im * otherIm - step[1] * step[2], re * otherIm + im * otherRe];
  }
  const norm = re * re + im * im;
  // Re[2j·sin·ρ₀] = −2·sin·Im ρ₀.
  const imaginary = (numeratorIm * re - numeratorRe * im) / norm;
  return -2 * Math.sin(omegaDt / 2) * Math.cos(omegaDt / 2) * imaginary;
}

interface PolePoints {
  field: EngineField;
  dynamics: PoleDynamics;
  indices: number[];
  /** weight/b. */
  weights: number[];
}

const FIELDS: readonly EngineField[] = ["f", "gx", "gy"];

export class Dissipation {
  private readonly poles: PolePoints[] = [];
  private readonly marks: Partial<Record<EngineField, Uint8Array>> = {};
  private readonly branches: readonly Branch[];

  constructor(
    private readonly engine: Engine,
    { terms, branches }: LossyMedia,
  ) {
    this.branches = branches;
    if (terms) this.findPoles(terms);
    const { stride } = engine.lattice;
    for (const { points } of branches)
      for (const { field, row, column } of points) this.mark(field, row * stride + column);
  }

  private mark(field: EngineField, k: number): void {
    const marks = (this.marks[field] ??= new Uint8Array(this.engine.lattice.size));
    marks[k] = 1;
  }

  private findPoles(terms: CoefficientSource): void {
    const { rows, stride } = this.engine.lattice;
    const row = rowCoefficients(stride);
    const engines = rowCoefficients(stride);
    const found = new Map<PoleDynamics, Partial<Record<EngineField, PolePoints>>>();
    for (let j = 0; j <= rows; j += 1) {
      row.terms.length = 0;
      terms(j, row);
      if (row.terms.length === 0) continue;
      this.engine.readCoefficients(j, engines);
      const b = { f: engines.bF, gx: engines.bGx, gy: engines.bGy };
      for (const { field, dynamics, firstColumn, weights } of row.terms) {
        const byField = found.get(dynamics) ?? {};
        found.set(dynamics, byField);
        const points = (byField[field] ??= { field, dynamics, indices: [], weights: [] });
        weights.forEach((weight, n) => {
          const column = firstColumn + n;
          if (weight === 0 || b[field][column] === 0) return;
          points.indices.push(j * stride + column);
          points.weights.push(weight / b[field][column]);
          this.mark(field, j * stride + column);
        });
      }
    }
    for (const byField of found.values())
      for (const field of FIELDS) {
        const points = byField[field];
        if (points) this.poles.push(points);
      }
  }

  /** Whether a point has a pole or belongs to a film. */
  acts(field: EngineField, k: number): boolean {
    return this.marks[field]?.[k] === 1;
  }

  /**
   * The powers of these points by the sums of a transform.
   *
   * @param groups the transform's; `shares` of each point's cell, default all of it
   */
  of(groups: readonly (FramePoints & { shares?: ArrayLike<number> })[]): PointPowers {
    const places = new Map(FIELDS.map((field) => [field, new Map<number, [number, number]>()]));
    let at = 0;
    for (const { field, indices, shares } of groups) {
      for (let n = 0; n < indices.length; n += 1, at += 1)
        if (this.acts(field, indices[n])) places.get(field)?.set(indices[n], [at, shares?.[n] ?? 1]);
    }
    const poles = this.poles.map(({ field, dynamics, indices, weights }) => {
      const chosen: number[] = [];
      const scaled: number[] = [];
      indices.forEach((k, n) => {
        const place = places.get(field)?.get(k);
        if (!place) return;
        chosen.push(place[0]);
        scaled.push(weights[n] * place[1]);
      });
      return { onF: field === "f", dynamics, places: chosen, weights: scaled };
    });
    const { stride } = this.engine.lattice;
    const branches = this.branches.flatMap(({ points, decay, conductance }) => {
      const found = points.map(({ field, row, column, weight }) => {
        const [place, share] = places.get(field)?.get(row * stride + column) ?? [-1, 0];
        return { place, share, weight };
      });
      const total = found.reduce((sum, { weight }) => sum + Math.abs(weight), 0);
      const share = found.reduce((sum, point) => sum + Math.abs(point.weight) * point.share, 0) / total;
      const onF = points[0].field === "f";
      // A film on the rim of an area: points outside it are not known, and none of it counts.
      return found.every(({ place }) => place >= 0)
        ? [{ onF, points: found, decay, conductance, total, share }]
        : [];
    });
    return new PointPowers(poles, branches);
  }
}

interface BoundPoles {
  onF: boolean;
  dynamics: PoleDynamics;
  places: number[];
  weights: number[];
}

interface BoundBranch {
  onF: boolean;
  points: { place: number; weight: number }[];
  decay: number;
  conductance: number;
  total: number;
  share: number;
}

export class PointPowers {
  constructor(
    private readonly poles: readonly BoundPoles[],
    private readonly branches: readonly BoundBranch[],
  ) {}

  /** @param base where the frequency's sums begin in `re` and `im` */
  at(re: Float64Array, im: Float64Array, base: number, omegaDt: number): FieldPowers {
    const powers = { f: 0, g: 0 };
    for (const { onF, dynamics, places, weights } of this.poles) {
      let sum = 0;
      places.forEach((place, n) => {
        sum += weights[n] * (re[base + place] ** 2 + im[base + place] ** 2);
      });
      powers[onF ? "f" : "g"] += 0.5 * poleLoss(dynamics, omegaDt) * sum;
    }
    const onMean = Math.cos(omegaDt / 2) ** 2;
    const turn = Math.cos(omegaDt);
    for (const { onF, points, decay, conductance, total, share } of this.branches) {
      let [vRe, vIm, squares] = [0, 0, 0];
      for (const { place, weight } of points) {
        const [pRe, pIm] = [re[base + place], im[base + place]];
        vRe += weight * pRe;
        vIm += weight * pIm;
        squares += Math.abs(weight) * (pRe * pRe + pIm * pIm);
      }
      const inverse = (turn - decay) / ((turn - decay) ** 2 + Math.sin(omegaDt) ** 2);
      const onV = (1 + decay) * inverse + turn;
      const power = 0.5 * onMean * conductance * (onV * (vRe * vRe + vIm * vIm) - turn * total * squares);
      powers[onF ? "f" : "g"] += share * power;
    }
    return powers;
  }
}
