/** Which painted area lies on top while a line is walked from left to right. */
import type { EdgeTable } from "./edge-table.js";

export class CoverStack {
  private readonly winding: Int32Array;
  /** Patches that contain the current place, in no order; few at a time. */
  private readonly inside: number[] = [];
  private top = -1;

  constructor(
    private readonly table: EdgeTable,
    private readonly background: number,
  ) {
    this.winding = new Int32Array(table.medium.length);
  }

  /** Before the first edge of a line: in the background. */
  reset(): void {
    if (this.inside.length > 0) {
      this.winding.fill(0);
      this.inside.length = 0;
    }
    this.top = -1;
  }

  get medium(): number {
    return this.top < 0 ? this.background : this.table.medium[this.top];
  }

  /** Steps over an edge rightward. */
  cross(edge: number): void {
    const patch = this.table.patch[edge];
    const before = this.winding[patch];
    const after = before + this.table.turn[edge];
    this.winding[patch] = after;
    const evenOdd = this.table.evenOdd[patch] === 1;
    const was = evenOdd ? before % 2 !== 0 : before !== 0;
    const is = evenOdd ? after % 2 !== 0 : after !== 0;
    if (is && !was) {
      this.inside.push(patch);
      if (patch > this.top) this.top = patch;
    } else if (was && !is) {
      const { inside } = this;
      inside[inside.indexOf(patch)] = inside[inside.length - 1];
      inside.length -= 1;
      if (patch === this.top) {
        this.top = -1;
        for (const other of inside) if (other > this.top) this.top = other;
      }
    }
  }
}
