/** Segments by the squares of a grid that they may touch: for finding what lies near without looking at everything. */

export class SegmentBuckets {
  private readonly columns: number;
  private readonly rows: number;
  private readonly lists = new Map<number, number[]>();

  constructor(
    widthMm: number,
    heightMm: number,
    private readonly sizeMm: number,
  ) {
    this.columns = Math.max(1, Math.ceil(widthMm / sizeMm));
    this.rows = Math.max(1, Math.ceil(heightMm / sizeMm));
  }

  private column(x: number): number {
    return Math.min(this.columns - 1, Math.max(0, Math.floor(x / this.sizeMm)));
  }

  private row(y: number): number {
    return Math.min(this.rows - 1, Math.max(0, Math.floor(y / this.sizeMm)));
  }

  /** Calls back for every square that the segment, widened by `marginMm`, touches. */
  private visit(
    ax: number,
    ay: number,
    bx: number,
    by: number,
    marginMm: number,
    each: (key: number) => void,
  ): void {
    const first = this.row(Math.min(ay, by) - marginMm);
    const last = this.row(Math.max(ay, by) + marginMm);
    const low = Math.min(ax, bx);
    const high = Math.max(ax, bx);
    for (let r = first; r <= last; r += 1) {
      let from = low;
      let to = high;
      if (ay !== by) {
        // Where the segment passes between the row's lower and upper line, both moved out by the margin.
        const bottom = (r * this.sizeMm - marginMm - ay) / (by - ay);
        const top = ((r + 1) * this.sizeMm + marginMm - ay) / (by - ay);
        const open = r === 0 || r === this.rows - 1;
        const s = open ? 0 : Math.min(1, Math.max(0, Math.min(bottom, top)));
        const t = open ? 1 : Math.min(1, Math.max(0, Math.max(bottom, top)));
        from = Math.max(low, Math.min(ax + (bx - ax) * s, ax + (bx - ax) * t));
        to = Math.min(high, Math.max(ax + (bx - ax) * s, ax + (bx - ax) * t));
      }
      const lastColumn = this.column(to + marginMm);
      for (let c = this.column(from - marginMm); c <= lastColumn; c += 1) each(r * this.columns + c);
    }
  }

  add(index: number, ax: number, ay: number, bx: number, by: number, marginMm: number): void {
    this.visit(ax, ay, bx, by, marginMm, (key) => {
      const list = this.lists.get(key);
      if (list) list.push(index);
      else this.lists.set(key, [index]);
    });
  }

  /** Every list of segments that share a square. */
  groups(): Iterable<readonly number[]> {
    return this.lists.values();
  }

  /** Segments that may lie in the square of a point. */
  at(x: number, y: number): readonly number[] {
    return this.lists.get(this.row(y) * this.columns + this.column(x)) ?? [];
  }
}

/** Distance from a point to a segment. */
export function distanceToSegment(
  x: number,
  y: number,
  ax: number,
  ay: number,
  bx: number,
  by: number,
): number {
  const dx = bx - ax;
  const dy = by - ay;
  const length2 = dx * dx + dy * dy;
  const along = length2 === 0 ? 0 : Math.min(1, Math.max(0, ((x - ax) * dx + (y - ay) * dy) / length2));
  return Math.hypot(x - ax - along * dx, y - ay - along * dy);
}
