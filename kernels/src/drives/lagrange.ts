/** Interpolation between equally spaced numbers by the polynomial through as many of them as there are weights. */
export const NODES = 8;
/** Nodes before the interval that a position lies in. */
export const NODES_BEFORE = NODES / 2 - 1;

/**
 * Weights of nodes 0 … 7 at a position between nodes 3 and 4. A sine that turns by θ from node to node is off by at most 0.0011·θ⁸
 * (the remainder of the polynomial, Π(x − n)/8!·θ⁸ at x = 3.5).
 */
export function writeLagrangeWeights(position: number, out: Float64Array, offset: number): void {
  for (let n = 0; n < NODES; n += 1) {
    let weight = 1;
    for (let m = 0; m < NODES; m += 1) if (m !== n) weight *= (position - m) / (n - m);
    out[offset + n] = weight;
  }
}
