/** Cuts a row of update coefficients into runs and back: what the kernel walks through, one loop for each run. */
import type { RowCoefficients } from "../engine.js";
import {
  LANES,
  LAYER_X,
  LAYER_Y,
  RUN_BYTES,
  RUN_FROM,
  RUN_HEADER_BYTES,
  RUN_KIND,
  RUN_LOSSLESS,
  RUN_PSI_SHIFT,
  RUN_UNIFORM,
  RUN_VARIED,
  RUN_ZERO,
  SCALARS_BYTES,
  TURN_VECTORS,
  VARIED_BYTES,
  VECTOR_BYTES,
} from "./layout.js";

/** Fewer equal vectors than this are not worth a loop of their own. */
const SHORTEST_UNIFORM = 8;

export interface RowPlace {
  /** Columns 0 … columns hold coefficients, the rest of a row none. */
  columns: number;
  /** Bytes from a vector's place in the row to its ψ in the strips along x; null outside the layers. By vector. */
  psiShifts: readonly (number | null)[];
}

const wordsOf = (kind: number, vectors: number): number => {
  const form = kind & 3;
  const numbers = form === RUN_VARIED ? vectors * VARIED_BYTES : form === RUN_ZERO ? 0 : SCALARS_BYTES;
  return (RUN_HEADER_BYTES + numbers) / 4;
};

export class RunCutter {
  /** The runs of the row cut last: `words` words of it. */
  readonly i32: Int32Array;
  readonly f32: Float32Array;
  words = 0;
  private readonly vectors: number;
  /** The row's six coefficients in single precision, in the kernel's order. */
  private readonly rounded: readonly Float32Array[];

  constructor(private readonly place: RowPlace) {
    this.vectors = Math.ceil((place.columns + 1) / LANES);
    this.rounded = Array.from({ length: 6 }, () => new Float32Array(this.vectors * LANES));
    // At worst every vector is a run of its own.
    const most = this.vectors * wordsOf(RUN_VARIED, 1);
    this.i32 = new Int32Array(most);
    this.f32 = new Float32Array(this.i32.buffer);
  }

  /** Cuts row `rowIndex`; `layerY`: it lies in a layer along y. */
  cut(row: RowCoefficients, rowIndex: number, layerY: boolean): void {
    this.round(row, rowIndex);
    this.words = 0;
    for (let from = 0; from < this.vectors; ) {
      const end = this.zoneUntil(from);
      this.cutZone(from, end, layerY);
      from = end;
    }
  }

  /** End of the zone of vectors from v: all in one strip of the layers along x, or all outside. */
  private zoneUntil(v: number): number {
    const { psiShifts } = this.place;
    let end = v + 1;
    while (end < this.vectors && psiShifts[end] === psiShifts[v]) end += 1;
    return end;
  }

  private cutZone(from: number, end: number, layerY: boolean): void {
    const inLayer = layerY || this.place.psiShifts[from] !== null;
    let open = from;
    for (let v = from; v < end; ) {
      const equal = this.equalUntil(v, end);
      const turned = inLayer ? equal : equal - ((equal - v) % TURN_VECTORS);
      if (turned - v >= SHORTEST_UNIFORM || (inLayer && v === from && equal === end)) {
        if (v > open) this.write(RUN_VARIED, open, v, layerY);
        this.write(this.uniformKind(v, inLayer), v, turned, layerY);
        open = turned;
      }
      v = Math.max(equal, v + 1);
    }
    if (end > open) this.write(RUN_VARIED, open, end, layerY);
  }

  private round(row: RowCoefficients, rowIndex: number): void {
    const all = [row.aGx, row.bGx, row.aGy, row.bGy, row.aF, row.bF];
    const count = this.place.columns + 1;
    all.forEach((values, index) => {
      const rounded = this.rounded[index];
      for (let i = 0; i < count; i += 1) rounded[i] = values[i];
    });
    // The ring of F is never stepped.
    for (const values of [this.rounded[4], this.rounded[5]]) {
      values[0] = 0;
      if (rowIndex === 0) values.fill(0);
    }
  }

  /** End of the stretch of vectors from v, at most `most`, that all hold the same six numbers; v itself where they differ. */
  private equalUntil(v: number, most: number): number {
    let end = most;
    for (const values of this.rounded) {
      const value = values[v * LANES];
      const limit = end * LANES;
      let i = v * LANES + 1;
      while (i < limit && values[i] === value) i += 1;
      end = Math.floor(i / LANES);
      if (end === v) return v;
    }
    return end;
  }

  private uniformKind(v: number, inLayer: boolean): number {
    if (inLayer) return RUN_UNIFORM;
    const [aGx, bGx, aGy, bGy, aF, bF] = this.rounded.map((values) => values[v * LANES]);
    if (aGx === 1 && aGy === 1 && aF === 1) return RUN_LOSSLESS;
    return [aGx, bGx, aGy, bGy, aF, bF].every((value) => value === 0) ? RUN_ZERO : RUN_UNIFORM;
  }

  private write(form: number, from: number, end: number, layerY: boolean): void {
    const shift = this.place.psiShifts[from];
    const kind = form + (shift === null ? 0 : LAYER_X) + (layerY ? LAYER_Y : 0);
    const at = this.words;
    this.i32[at + RUN_KIND / 4] = kind;
    this.i32[at + RUN_FROM / 4] = from * VECTOR_BYTES;
    this.i32[at + RUN_BYTES / 4] = (end - from) * VECTOR_BYTES;
    this.i32[at + RUN_PSI_SHIFT / 4] = shift ?? 0;
    const numbers = at + RUN_HEADER_BYTES / 4;
    if (form === RUN_VARIED) {
      for (let v = from; v < end; v += 1) {
        const place = numbers + ((v - from) * VARIED_BYTES) / 4;
        this.rounded.forEach((values, index) => {
          this.f32.set(values.subarray(v * LANES, (v + 1) * LANES), place + index * LANES);
        });
      }
    } else if (form !== RUN_ZERO) {
      this.rounded.forEach((values, index) => {
        this.f32[numbers + index] = values[from * LANES];
      });
    }
    this.words = at + wordsOf(kind, end - from);
  }
}

/** The coefficients of a row from its runs, in words `first` … `end` − 1 of the memory. */
export function readRuns(
  i32: Int32Array,
  f32: Float32Array,
  first: number,
  end: number,
  out: RowCoefficients,
): void {
  const all = [out.aGx, out.bGx, out.aGy, out.bGy, out.aF, out.bF];
  for (const values of all) values.fill(0);
  let at = first;
  while (at < end) {
    const kind = i32[at + RUN_KIND / 4];
    const from = i32[at + RUN_FROM / 4] / 4;
    const count = i32[at + RUN_BYTES / 4] / 4;
    const numbers = at + RUN_HEADER_BYTES / 4;
    if ((kind & 3) === RUN_VARIED) {
      for (let i = 0; i < count; i += 1) {
        const place = numbers + Math.floor(i / LANES) * 6 * LANES + (i % LANES);
        for (let index = 0; index < 6; index += 1) all[index][from + i] = f32[place + index * LANES];
      }
    } else if ((kind & 3) !== RUN_ZERO) {
      all.forEach((values, index) => values.fill(f32[numbers + index], from, from + count));
    }
    at += wordsOf(kind, count / LANES);
  }
}
