/** The unknowns of a mesh: quadratic elements, cut apart along thin walls, zero where the wall says so. */
import { dissect } from "./algebra/dissection.js";
import type { Part } from "./algebra/dissection.js";
import { Factorization } from "./algebra/factorization.js";
import { ELEMENT_NUMBERS, elementMatrix, elementNumbers } from "./algebra/quadratic.js";
import type { SectionMesh } from "./mesh/section-mesh.js";
import { ELECTRIC, MAGNETIC } from "./mesh/section-mesh.js";

const NODES = 6;

export type ModePolarization = "TMz" | "TEz";

export interface ElementSpace {
  mesh: SectionMesh;
  polarization: ModePolarization;
  unknowns: number;
  /** Unknown of node k of triangle t at 6t + k, or −1 where F is zero; corners first, then the middles of sides. */
  dofs: Int32Array;
  /** Per element: stiffness and mass in the terms of `algebra/quadratic`, with relative ε and μ, lengths in mm. */
  numbers: Float64Array;
  parts: readonly Part[];
  /** Unknowns of each part of the section that no zero of F holds: there a constant F is a solution without frequency. */
  floating: readonly Int32Array[];
}

class DisjointSets {
  private readonly parent: Int32Array;

  constructor(count: number) {
    this.parent = Int32Array.from({ length: count }, (_, n) => n);
  }

  find(n: number): number {
    let root = n;
    while (this.parent[root] !== root) root = this.parent[root];
    let at = n;
    while (this.parent[at] !== root) {
      const next = this.parent[at];
      this.parent[at] = root;
      at = next;
    }
    return root;
  }

  unite(a: number, b: number): void {
    this.parent[this.find(a)] = this.find(b);
  }
}

/** Numbers the nodes of all elements; corners of elements meet only where sides without a wall between them join them. */
function numberNodes(mesh: SectionMesh, zeroWall: number): { dofs: Int32Array; unknowns: number } {
  const { count, walls, beyond } = mesh;
  const sets = new DisjointSets(3 * count);
  const after = (s: number): number => (s % 3 === 2 ? s - 2 : s + 1);
  for (let s = 0; s < 3 * count; s += 1) {
    const other = beyond[s];
    if (other < s) continue;
    sets.unite(s, after(other));
    sets.unite(after(s), other);
  }
  const zero = new Uint8Array(3 * count);
  for (let s = 0; s < 3 * count; s += 1) {
    if (walls[s] !== zeroWall) continue;
    zero[sets.find(s)] = 1;
    zero[sets.find(after(s))] = 1;
  }
  const dofs = new Int32Array(NODES * count);
  const numberOf = new Int32Array(3 * count).fill(-1);
  let unknowns = 0;
  for (let t = 0; t < count; t += 1) {
    for (let k = 0; k < 3; k += 1) {
      const s = 3 * t + k;
      const root = sets.find(s);
      if (zero[root] === 1) dofs[NODES * t + k] = -1;
      else {
        if (numberOf[root] < 0) {
          numberOf[root] = unknowns;
          unknowns += 1;
        }
        dofs[NODES * t + k] = numberOf[root];
      }
      const other = beyond[s];
      if (walls[s] === zeroWall) dofs[NODES * t + 3 + k] = -1;
      else if (other >= 0 && other < s)
        dofs[NODES * t + 3 + k] = dofs[NODES * Math.floor(other / 3) + 3 + (other % 3)];
      else {
        dofs[NODES * t + 3 + k] = unknowns;
        unknowns += 1;
      }
    }
  }
  return { dofs, unknowns };
}

function floatingParts(dofs: Int32Array, unknowns: number): Int32Array[] {
  const sets = new DisjointSets(unknowns + 1);
  const held = unknowns;
  for (let e = 0; e < dofs.length; e += NODES) {
    let first = -1;
    let zero = false;
    for (let k = 0; k < NODES; k += 1) {
      const dof = dofs[e + k];
      if (dof < 0) zero = true;
      else if (first < 0) first = dof;
      else sets.unite(dof, first);
    }
    if (zero && first >= 0) sets.unite(first, held);
  }
  const root = sets.find(held);
  const lists = new Map<number, number[]>();
  for (let dof = 0; dof < unknowns; dof += 1) {
    const own = sets.find(dof);
    if (own === root) continue;
    const list = lists.get(own);
    if (list) list.push(dof);
    else lists.set(own, [dof]);
  }
  return [...lists.values()].map((list) => Int32Array.from(list));
}

/** Builds the unknowns of a mesh. F is Ez (TMz: zero on electric walls) or Hz (TEz: zero on magnetic walls). */
export function buildSpace(mesh: SectionMesh, polarization: ModePolarization): ElementSpace {
  const { count, corners, coordinates: xy, drawing, medium } = mesh;
  const numbered = numberNodes(mesh, polarization === "TMz" ? ELECTRIC : MAGNETIC);
  const { unknowns } = numbered;
  const numbers = new Float64Array(ELEMENT_NUMBERS * count);
  const centreX = new Float64Array(count);
  const centreY = new Float64Array(count);
  for (let t = 0; t < count; t += 1) {
    const [a, b, c] = [corners[3 * t], corners[3 * t + 1], corners[3 * t + 2]];
    const places = [xy[2 * a], xy[2 * a + 1], xy[2 * b], xy[2 * b + 1], xy[2 * c], xy[2 * c + 1]] as const;
    centreX[t] = (places[0] + places[2] + places[4]) / 3;
    centreY[t] = (places[1] + places[3] + places[5]) / 3;
    const fill = drawing.media[medium[t]];
    if (fill.kind !== "fill") throw new Error("An element lies in a conductor.");
    const [s, m] = polarization === "TMz" ? [1 / fill.mu, fill.epsilon] : [1 / fill.epsilon, fill.mu];
    elementNumbers([...places], s, m, numbers, ELEMENT_NUMBERS * t);
  }
  const { parts, newNumber } = dissect(numbered.dofs, NODES, unknowns, centreX, centreY);
  const dofs = numbered.dofs.map((dof) => (dof < 0 ? -1 : newNumber[dof]));
  return {
    mesh,
    polarization,
    unknowns,
    dofs,
    numbers,
    parts,
    floating: floatingParts(dofs, unknowns),
  };
}

/** K − shift·M, factored. shift in 1/mm². */
export function factorShifted(space: ElementSpace, shift: number): Factorization {
  const { parts, dofs, unknowns, numbers } = space;
  return new Factorization(parts, dofs, NODES, unknowns, (element, out) =>
    elementMatrix(numbers, ELEMENT_NUMBERS * element, 1, -shift, out),
  );
}

/** out = M x, by the mass matrix of `algebra/quadratic` with its sums taken once an element. */
export function multiplyMass(space: ElementSpace, x: Float64Array, out: Float64Array): void {
  const { dofs, numbers } = space;
  out.fill(0);
  for (let e = 0, at = 0; at < dofs.length; e += 1, at += NODES) {
    const c0 = dofs[at];
    const c1 = dofs[at + 1];
    const c2 = dofs[at + 2];
    const m0 = dofs[at + 3];
    const m1 = dofs[at + 4];
    const m2 = dofs[at + 5];
    const v0 = c0 < 0 ? 0 : x[c0];
    const v1 = c1 < 0 ? 0 : x[c1];
    const v2 = c2 < 0 ? 0 : x[c2];
    const w0 = m0 < 0 ? 0 : x[m0];
    const w1 = m1 < 0 ? 0 : x[m1];
    const w2 = m2 < 0 ? 0 : x[m2];
    const area = numbers[ELEMENT_NUMBERS * e + 3] / 180;
    const corners = v0 + v1 + v2;
    const middles = 16 * (w0 + w1 + w2);
    // Side k lies opposite to corner k + 2.
    if (c0 >= 0) out[c0] += area * (7 * v0 - corners - 4 * w1);
    if (c1 >= 0) out[c1] += area * (7 * v1 - corners - 4 * w2);
    if (c2 >= 0) out[c2] += area * (7 * v2 - corners - 4 * w0);
    if (m0 >= 0) out[m0] += area * (16 * w0 + middles - 4 * v2);
    if (m1 >= 0) out[m1] += area * (16 * w1 + middles - 4 * v0);
    if (m2 >= 0) out[m2] += area * (16 * w2 + middles - 4 * v1);
  }
}
