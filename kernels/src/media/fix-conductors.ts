/** What conductors do to the coefficients. */
import type { Lattice } from "../lattice/index.js";
import type { RowCoefficients } from "../stepping/index.js";
import type { ConductorMap } from "./conductors.js";
import { FIXED_F, FIXED_GX, FIXED_GY } from "./conductors.js";

/** Zeroes the coefficients of what stays zero on conductors, in row j. */
export function fixConductors(
  lattice: Lattice,
  conductors: ConductorMap,
  j: number,
  out: RowCoefficients,
): void {
  const { stride, columns } = lattice;
  const { flags, touched } = conductors;
  if (touched[j] === 0) return;
  const base = j * stride;
  for (let i = 0; i <= columns; i += 1) {
    const k = base + i;
    const own = flags[k];
    // Between fixed points of F (or inside fixed G) nothing can change: no field is left frozen there.
    const fBoth = own & FIXED_F;
    const fixGx = own & FIXED_GX || (fBoth && flags[k + stride] & FIXED_F);
    const fixGy = own & FIXED_GY || (fBoth && flags[k + 1] & FIXED_F);
    const enclosed =
      own & FIXED_GX &&
      own & FIXED_GY &&
      k > stride &&
      flags[k - 1] & FIXED_GY &&
      flags[k - stride] & FIXED_GX;
    if (own & FIXED_F || enclosed) {
      out.aF[i] = 0;
      out.bF[i] = 0;
    }
    if (fixGx) {
      out.aGx[i] = 0;
      out.bGx[i] = 0;
    }
    if (fixGy) {
      out.aGy[i] = 0;
      out.bGy[i] = 0;
    }
  }
}
