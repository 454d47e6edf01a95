/**
 * The painted section on quarter cells: a raster of 2nx × 2ny, so that the cell around every field point (nodes, edges, centres)
 * is made of four of them. Outside the section the outermost quarters repeat: what touches an absorbing edge goes on.
 */
import type { PaintedArea } from "../geometry/index.js";
import { CoverageSweep } from "../geometry/index.js";
import type { Quarter } from "./averaging.js";
import type { SolverMedium } from "./properties.js";

export interface QuarterRow {
  /** By quarter column: index of the only medium, or −1 where several meet. */
  medium: Int32Array;
  /** By quarter column: the first column after it with another medium. */
  runEnd: Int32Array;
  /** The quarters that are −1 above. */
  mixed: Map<number, Quarter>;
}

const KEPT_ROWS = 8;

function runEndsOf(medium: Int32Array): Int32Array {
  const ends = new Int32Array(medium.length);
  let end = medium.length;
  for (let x = medium.length - 1; x >= 0; x -= 1) {
    if (x + 1 < medium.length && medium[x] !== medium[x + 1]) end = x + 1;
    ends[x] = end;
  }
  return ends;
}

export class QuarterRaster {
  private readonly sweep: CoverageSweep;
  private readonly kept = new Map<number, QuarterRow>();
  private readonly uniform: readonly Quarter[];

  constructor(
    areas: readonly PaintedArea[],
    background: number,
    private readonly media: readonly SolverMedium[],
    section: { widthMm: number; heightMm: number; nx: number; ny: number },
  ) {
    const { widthMm, heightMm, nx, ny } = section;
    this.sweep = new CoverageSweep(areas, background, { widthMm, heightMm, columns: 2 * nx, rows: 2 * ny });
    this.uniform = media.map((medium) => ({
      shares: medium.kind === "fill" ? [{ share: 1, properties: medium.properties }] : [],
    }));
  }

  get columns(): number {
    return this.sweep.columns;
  }

  /** Row of quarters at index y, repeated outward beyond the section. */
  row(y: number): QuarterRow {
    const r = Math.min(this.sweep.rows - 1, Math.max(0, y));
    const known = this.kept.get(r);
    if (known) return known;
    const painted = this.sweep.row(r);
    const medium = painted.medium.slice();
    const mixed = new Map<number, Quarter>();
    for (const cell of painted.cut) {
      const shares = painted.shares(cell).flatMap((entry) => {
        const kind = this.media[entry.medium];
        return kind.kind === "fill" ? [{ share: entry.share, properties: kind.properties }] : [];
      });
      mixed.set(cell, { shares });
    }
    const row = { medium, runEnd: runEndsOf(medium), mixed };
    this.kept.set(r, row);
    if (this.kept.size > KEPT_ROWS) this.kept.delete(this.kept.keys().next().value ?? r);
    return row;
  }

  quarter(row: QuarterRow, x: number): Quarter {
    const cell = Math.min(this.columns - 1, Math.max(0, x));
    const index = row.medium[cell];
    return index >= 0 ? this.uniform[index] : (row.mixed.get(cell) ?? { shares: [] });
  }
}
