/**
 * Physical constants in SI units. c₀ is exact; μ₀ is the CODATA 2018 value (E. Tiesinga et al., Rev. Mod. Phys. 93
 * (2021) 025010); ε₀ and η₀ follow from the two, so that every figure of the solver is consistent with them.
 */
export const C0 = 299_792_458;
export const MU0 = 1.256_637_062_12e-6;
export const EPS0 = 1 / (MU0 * C0 * C0);
export const ETA0 = MU0 * C0;
