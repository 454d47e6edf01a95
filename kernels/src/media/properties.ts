/** Media as the solver sees them: absolute ε, μ, σ, σ*, and the means of them over a partial cell. */
import { EPS0, MU0 } from "../lattice/index.js";

/** ε in F/m, μ in H/m, σ in S/m, σ* in Ω/m. */
export interface Properties {
  epsilon: number;
  mu: number;
  sigma: number;
  sigmaStar: number;
}

export type SolverMedium =
  | { kind: "fill"; properties: Properties }
  | { kind: "electric" }
  | { kind: "magnetic" };

export const VACUUM: Properties = { epsilon: EPS0, mu: MU0, sigma: 0, sigmaStar: 0 };

export interface RelativeProperties {
  relativePermittivity: number;
  relativePermeability: number;
  conductivity: number;
  magneticLoss: number;
}

export const propertiesOf = (medium: RelativeProperties): Properties => ({
  epsilon: medium.relativePermittivity * EPS0,
  mu: medium.relativePermeability * MU0,
  sigma: medium.conductivity,
  sigmaStar: medium.magneticLoss,
});

/** A storage and its loss: (ε, σ) or (μ, σ*). */
export interface Pair {
  storage: number;
  loss: number;
}
