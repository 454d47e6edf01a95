/**
 * The absorbing layers' memory ψ, one strip per side and derivative, and the corrections it makes row by row.
 * Strips along x hold only the layers' columns of every row; strips along y only the layers' rows.
 */
import type { AbsorbingLayers, AxisStretch } from "../boundaries/index.js";
import type { FieldArray, Lattice } from "../lattice/index.js";
import type { EngineFields } from "./engine.js";

type MakeArray = (size: number) => FieldArray;

/** Where each row of a y-layer keeps its ψ: −1 outside the layers, else the index of the row's column 0. */
function rowOffsets(
  stretch: AxisStretch,
  rows: number,
  stride: number,
): { offsets: Int32Array; size: number } {
  const offsets = new Int32Array(rows + 2).fill(-1);
  let size = 0;
  for (const [first, last] of stretch.ranges) {
    for (let j = first; j <= last; j += 1) {
      offsets[j] = size;
      size += stride;
    }
  }
  return { offsets, size };
}

const widthOf = (stretch: AxisStretch): number =>
  stretch.ranges.reduce((sum, [first, last]) => sum + last - first + 1, 0);

export class LayerMemory {
  /** All of ψ, for snapshots. */
  readonly arrays: readonly FieldArray[];
  private readonly columnsF: FieldArray;
  private readonly columnsG: FieldArray;
  private readonly rowsF: FieldArray;
  private readonly rowsG: FieldArray;
  private readonly offsetsF: Int32Array;
  private readonly offsetsG: Int32Array;
  private readonly widthF: number;
  private readonly widthG: number;

  constructor(
    private readonly lattice: Lattice,
    private readonly layers: AbsorbingLayers,
    makeArray: MakeArray,
  ) {
    this.widthF = widthOf(layers.columnsF);
    this.widthG = widthOf(layers.columnsG);
    this.columnsF = makeArray(this.widthF * (lattice.rows + 2));
    this.columnsG = makeArray(this.widthG * (lattice.rows + 2));
    const rowsF = rowOffsets(layers.rowsF, lattice.rows, lattice.stride);
    const rowsG = rowOffsets(layers.rowsG, lattice.rows, lattice.stride);
    this.offsetsF = rowsF.offsets;
    this.offsetsG = rowsG.offsets;
    this.rowsF = makeArray(rowsF.size);
    this.rowsG = makeArray(rowsG.size);
    this.arrays = [this.columnsF, this.columnsG, this.rowsF, this.rowsG];
  }

  /** After row j of G: adds the layers' share of ∂F/∂x to gy and of ∂F/∂y to gx. F is still at its old time. */
  correctG(j: number, fields: EngineFields, bGx: FieldArray, bGy: FieldArray): void {
    const { f, gx, gy } = fields;
    const { stride, columns } = this.lattice;
    const base = j * stride;
    if (this.widthG > 0) {
      const { decay, gain, stretch, ranges } = this.layers.columnsG;
      let p = j * this.widthG;
      for (const [first, last] of ranges) {
        for (let i = first; i <= last; i += 1, p += 1) {
          const k = base + i;
          const difference = f[k + 1] - f[k];
          const psi = decay[i] * this.columnsG[p] + gain[i] * difference;
          this.columnsG[p] = psi;
          gy[k] = gy[k] + bGy[k] * (psi + stretch[i] * difference);
        }
      }
    }
    const offset = this.offsetsG[j];
    if (offset >= 0) {
      const decay = this.layers.rowsG.decay[j];
      const gain = this.layers.rowsG.gain[j];
      const stretch = this.layers.rowsG.stretch[j];
      const memory = this.rowsG;
      for (let i = 1; i <= columns; i += 1) {
        const k = base + i;
        const difference = f[k + stride] - f[k];
        const psi = decay * memory[offset + i] + gain * difference;
        memory[offset + i] = psi;
        gx[k] = gx[k] - bGx[k] * (psi + stretch * difference);
      }
    }
  }

  /** After row j of F: adds the layers' share of ∂Gy/∂x and ∂Gx/∂y. G is already at its new time. */
  correctF(j: number, fields: EngineFields, bF: FieldArray): void {
    const { f, gx, gy } = fields;
    const { stride, columns } = this.lattice;
    const base = j * stride;
    if (this.widthF > 0) {
      const { decay, gain, stretch, ranges } = this.layers.columnsF;
      let p = j * this.widthF;
      for (const [first, last] of ranges) {
        for (let i = first; i <= last; i += 1, p += 1) {
          const k = base + i;
          const difference = gy[k] - gy[k - 1];
          const psi = decay[i] * this.columnsF[p] + gain[i] * difference;
          this.columnsF[p] = psi;
          f[k] = f[k] + bF[k] * (psi + stretch[i] * difference);
        }
      }
    }
    const offset = this.offsetsF[j];
    if (offset >= 0) {
      const decay = this.layers.rowsF.decay[j];
      const gain = this.layers.rowsF.gain[j];
      const stretch = this.layers.rowsF.stretch[j];
      const memory = this.rowsF;
      for (let i = 1; i <= columns; i += 1) {
        const k = base + i;
        const difference = gx[k] - gx[k - stride];
        const psi = decay * memory[offset + i] + gain * difference;
        memory[offset + i] = psi;
        f[k] = f[k] - bF[k] * (psi + stretch * difference);
      }
    }
  }
}
