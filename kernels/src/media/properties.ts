/** Media as the solver sees them: absolute ε, μ, σ, σ*, and the means of them over a partial cell. */
import { EPS0, MU0 } from "../lattice/index.js";
import type { Pole } from "../scene/schema-media.js";

/** ε in F/m, μ in H/m, σ in S/m, σ* in Ω/m; poles come on top of ε and μ. */
export interface Properties {
  epsilon: number;
  mu: number;
  sigma: number;
  sigmaStar: number;
  /** Missing where there are none. */
  poles?: { electric: readonly Pole[]; magnetic: readonly Pole[] };
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
  electricPoles?: readonly Pole[];
  magneticPoles?: readonly Pole[];
}

export const propertiesOf = (medium: RelativeProperties): Properties => {
  const { electricPoles: electric = [], magneticPoles: magnetic = [] } = medium;
  return {
    epsilon: medium.relativePermittivity * EPS0,
    mu: medium.relativePermeability * MU0,
    sigma: medium.conductivity,
    sigmaStar: medium.magneticLoss,
    ...(electric.length + magnetic.length > 0 && { poles: { electric, magnetic } }),
  };
};

/** A storage and its loss: (ε, σ) or (μ, σ*). */
export interface Pair {
  storage: number;
  loss: number;
}
