/** The unknowns of a mesh: quadratic elements, cut apart along thin walls, zero where the wall says so. */
import { dissect } from "./algebra/dissection.js";
import type { Part } from "./algebra/dissection.js";
import { Factorization } from "./algebra/factorization.js";
import { ELEMENT_NUMBERS, elementMatrix, elementNumbers, MASS } from "./algebra/quadratic.js";
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

/** out = M x. */
export function multiplyMass(space: ElementSpace, x: Float64Array, out: Float64Array): void {
  const { dofs, numbers } = space;
  const m = MASS;
  out.fill(0);
  const local = new Float64Array(NODES);
  for (let e = 0, at = 0; at < dofs.length; e += 1, at += NODES) {
    const area = numbers[ELEMENT_NUMBERS * e + 3];
    for (let k = 0; k < NODES; k += 1) {
      const dof = dofs[at + k];
      local[k] = dof < 0 ? 0 : area * x[dof];
    }
    for (let k = 0; k < NODES; k += 1) {
      const dof = dofs[at + k];
      if (dof < 0) continue;
      const row = NODES * k;
      out[dof] +=
        m[row] * local[0] +
        m[row + 1] * local[1] +
        m[row + 2] * local[2] +
        m[row + 3] * local[3] +
        m[row + 4] * local[4] +
        m[row + 5] * local[5];
    }
  }
}
