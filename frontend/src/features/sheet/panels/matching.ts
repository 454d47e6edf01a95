import { VACUUM_PERMEABILITY, VACUUM_PERMITTIVITY } from "@heddle/kernels/scene";

/**
 * σ* in Ω/m that matches σ in S/m: the loss rates σ/ε and (σ*)/μ are then equal, the wave impedance stays real, and
 * at normal incidence nothing is reflected. Common practice.
 */
export const matchingMagneticLoss = (medium: {
  conductivity: number;
  relativePermittivity: number;
  relativePermeability: number;
}): number =>
  (medium.conductivity * medium.relativePermeability * VACUUM_PERMEABILITY) /
  (medium.relativePermittivity * VACUUM_PERMITTIVITY);
