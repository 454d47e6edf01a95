/**
 * Nested dissection of a mesh: its elements are halved again and again by lines across the longer extent, and the unknowns that two
 * halves share are eliminated after both (A. George, SIAM J. Numer. Anal. 10 (1973) 345).
 */

/** One part of the mesh; parts come after the two they consist of. */
export interface Part {
  /** The two parts it consists of; none in a leaf. */
  children: readonly number[];
  /** Elements of a leaf; empty elsewhere. */
  elements: Int32Array;
  /** Unknowns eliminated here: from `first` on, `count` of them in the new numbering. */
  first: number;
  count: number;
  /** Unknowns that elements outside the part share, in the new numbering, rising. */
  border: Int32Array;
}

export interface Dissection {
  parts: Part[];
  /** New number of every unknown. */
  newNumber: Int32Array;
}

const LEAF_ELEMENTS = 8;
/** Places of the cut that are tried, as shares of the elements. */
const CUTS = [0.5, 0.46, 0.54, 0.42, 0.58];
/** Keys for sorting: a place and an element in one number below 2⁵³. */
const KEY_STEPS = 2 ** 26;
const MOST_ELEMENTS = 2 ** 26;

class Dissector {
  readonly parts: Part[] = [];
  readonly newNumber: Int32Array;
  private next = 0;
  private readonly shared: Int32Array;
  private readonly mark: Int32Array;
  private stamp = 0;

  constructor(
    private readonly dofs: Int32Array,
    private readonly perElement: number,
    unknowns: number,
    private readonly centreX: Float64Array,
    private readonly centreY: Float64Array,
  ) {
    this.newNumber = new Int32Array(unknowns).fill(-1);
    this.shared = new Int32Array(unknowns);
    this.mark = new Int32Array(unknowns);
    for (const dof of dofs) if (dof >= 0) this.shared[dof] += 1;
  }

  /** Splits the elements; returns the part's index and its border with the number of its elements at each unknown. */
  split(elements: Int32Array): { part: number; border: Int32Array; counts: Int32Array } {
    if (elements.length <= LEAF_ELEMENTS) {
      const counts = new Map<number, number>();
      for (const element of elements) {
        for (let k = 0; k < this.perElement; k += 1) {
          const dof = this.dofs[element * this.perElement + k];
          if (dof >= 0) counts.set(dof, (counts.get(dof) ?? 0) + 1);
        }
      }
      return this.close([], elements, counts);
    }
    const [low, high] = this.halves(elements);
    const a = this.split(low);
    const b = this.split(high);
    const counts = new Map<number, number>();
    for (const { border, counts: own } of [a, b])
      border.forEach((dof, n) => counts.set(dof, (counts.get(dof) ?? 0) + own[n]));
    return this.close([a.part, b.part], new Int32Array(0), counts);
  }

  private close(
    children: number[],
    elements: Int32Array,
    found: Map<number, number>,
  ): { part: number; border: Int32Array; counts: Int32Array } {
    const first = this.next;
    const border: number[] = [];
    const counts: number[] = [];
    for (const [dof, count] of found) {
      if (count === this.shared[dof]) {
        this.newNumber[dof] = this.next;
        this.next += 1;
      } else {
        border.push(dof);
        counts.push(count);
      }
    }
    this.parts.push({
      children,
      elements,
      first,
      count: this.next - first,
      border: Int32Array.from(border),
    });
    return {
      part: this.parts.length - 1,
      border: Int32Array.from(border),
      counts: Int32Array.from(counts),
    };
  }

  private halves(elements: Int32Array): [Int32Array, Int32Array] {
    const spread = (centre: Float64Array): number => {
      let low = Number.POSITIVE_INFINITY;
      let high = Number.NEGATIVE_INFINITY;
      for (const element of elements) {
        low = Math.min(low, centre[element]);
        high = Math.max(high, centre[element]);
      }
      return high - low;
    };
    const wide = spread(this.centreX);
    const tall = spread(this.centreY);
    const axes = [wide >= tall ? this.centreX : this.centreY];
    // Where neither extent is clearly the longer, the shorter separator decides.
    if (elements.length > 64 && Math.min(wide, tall) > 0.7 * Math.max(wide, tall))
      axes.push(wide >= tall ? this.centreY : this.centreX);
    let best: { sorted: Int32Array; at: number; size: number } | null = null;
    for (const centre of axes) {
      const sorted = sortedBy(elements, centre);
      for (const cut of elements.length > 32 ? CUTS : [0.5]) {
        const at = Math.round(cut * sorted.length);
        const size = this.separatorSize(sorted, at);
        if (best === null || size < best.size) best = { sorted, at, size };
      }
    }
    if (best === null) throw new Error("A part of the mesh has no extent.");
    return [best.sorted.slice(0, best.at), best.sorted.slice(best.at)];
  }

  private separatorSize(sorted: Int32Array, at: number): number {
    const { dofs, perElement, mark } = this;
    this.stamp += 2;
    const low = this.stamp;
    const counted = this.stamp + 1;
    let size = 0;
    for (let n = 0; n < sorted.length; n += 1) {
      const start = sorted[n] * perElement;
      for (let k = 0; k < perElement; k += 1) {
        const dof = dofs[start + k];
        if (dof < 0) continue;
        if (n < at) mark[dof] = low;
        else if (mark[dof] === low) {
          mark[dof] = counted;
          size += 1;
        }
      }
    }
    return size;
  }
}

/** Elements by rising centre, those of (nearly) the same centre by number. Keys are sorted, not called back for: that is slow. */
function sortedBy(elements: Int32Array, centre: Float64Array): Int32Array {
  let low = Number.POSITIVE_INFINITY;
  let high = Number.NEGATIVE_INFINITY;
  for (const element of elements) {
    low = Math.min(low, centre[element]);
    high = Math.max(high, centre[element]);
  }
  const scale = high > low ? KEY_STEPS / (high - low) : 0;
  const keys = new Float64Array(elements.length);
  for (let n = 0; n < keys.length; n += 1)
    keys[n] = Math.round((centre[elements[n]] - low) * scale) * MOST_ELEMENTS + elements[n];
  keys.sort();
  return Int32Array.from(keys, (key) => key % MOST_ELEMENTS);
}

/**
 * Dissects a mesh.
 *
 * @param dofs unknowns of each element, `perElement` of them, −1 where a value is fixed
 */
export function dissect(
  dofs: Int32Array,
  perElement: number,
  unknowns: number,
  centreX: Float64Array,
  centreY: Float64Array,
): Dissection {
  const dissector = new Dissector(dofs, perElement, unknowns, centreX, centreY);
  dissector.split(Int32Array.from({ length: centreX.length }, (_, n) => n));
  const { parts, newNumber } = dissector;
  for (const part of parts) part.border = part.border.map((dof) => newNumber[dof]).sort();
  return { parts, newNumber };
}
