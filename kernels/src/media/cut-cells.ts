/**
 * What a conformal conductor leaves open of the lattice, as factors of the coefficients (S. Dey and R. Mittra, IEEE Microw. Guided
 * Wave Lett. 7 (1997) 273), all multiplying what the means over the open media give:
 *
 *   - `storage` of a point of F: its M is this times that of a whole cell;
 *   - `length` of a G: its b is this times that of a whole edge.
 */
import type { Lattice } from "../lattice/index.js";

/** By array index; points that are missing are whole. */
export interface CutFactors {
  storage: Map<number, number>;
  lengthGx: Map<number, number>;
  lengthGy: Map<number, number>;
}

export interface CutCells extends CutFactors {
  /** The factors as drawn, before cells borrowed area from each other: what an edit elsewhere may keep. */
  drawn?: CutFactors;
  /** Whether a point's loss goes with its storage: with area it does, with what is lent for stability it does not. */
  scalesLoss: boolean;
}

export const noCutCells = (scalesLoss: boolean): CutCells => ({
  storage: new Map(),
  lengthGx: new Map(),
  lengthGy: new Map(),
  scalesLoss,
});

/** Shares of Δt² of the limit that one gx and one gy at a point of F take: the four of a whole point make 1. */
export function stepShares({ dx, dy }: Lattice): { x: number; y: number } {
  const wx = 1 / (dx * dx);
  const wy = 1 / (dy * dy);
  return { x: wx / (2 * (wx + wy)), y: wy / (2 * (wx + wy)) };
}
