/** Collects the pole terms of one row, point by point or run by run. */
import type { EngineField, PoleTerm, RowCoefficients } from "../stepping/index.js";
import type { WeightedPole } from "./dispersion.js";
import type { PoleModel } from "./poles.js";

/** Columns without weight that end a term: a memory for them would cost more than a term's own needs. */
const GAP = 32;

export class RowTerms {
  private readonly weights = new Map<PoleModel, Partial<Record<EngineField, Float64Array>>>();

  constructor(private readonly stride: number) {}

  /** Columns from … to − 1. */
  fill(field: EngineField, poles: readonly WeightedPole[], from: number, to: number): void {
    for (const { model, weight } of poles) {
      const fields = this.weights.get(model) ?? {};
      this.weights.set(model, fields);
      (fields[field] ??= new Float64Array(this.stride)).fill(weight, from, to);
    }
  }

  /** Multiplies the weights of one point. */
  scale(field: EngineField, column: number, factor: number): void {
    for (const fields of this.weights.values()) {
      const weights = fields[field];
      if (weights) weights[column] *= factor;
    }
  }

  /** The terms, without points that the coefficients `out` hold at zero. */
  finish(out: RowCoefficients): PoleTerm[] {
    const terms: PoleTerm[] = [];
    const gains = { f: out.bF, gx: out.bGx, gy: out.bGy };
    for (const [{ dynamics }, fields] of this.weights) {
      for (const field of ["gx", "gy", "f"] as const) {
        const weights = fields[field];
        if (!weights) continue;
        const acts = (i: number): boolean => weights[i] !== 0 && gains[field][i] !== 0;
        for (let i = 0; i < this.stride; ) {
          if (!acts(i)) {
            i += 1;
            continue;
          }
          let end = i + 1;
          for (let k = end; k < this.stride && k - end < GAP; k += 1) if (acts(k)) end = k + 1;
          const part = weights.slice(i, end).map((weight, n) => (acts(i + n) ? weight : 0));
          terms.push({ field, dynamics, firstColumn: i, weights: part });
          i = end;
        }
      }
    }
    return terms;
  }
}
