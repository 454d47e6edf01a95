/** Where the absorbing layers keep their memory ψ, and their parameters in the kernel's form. */
import type { AbsorbingLayers, AxisStretch } from "../../boundaries/index.js";
import type { Lattice } from "../../lattice/index.js";
import type { Arena } from "./arena.js";
import { CACHE_LINE_BYTES, LANES, VARIED_BYTES, VECTOR_BYTES } from "./layout.js";

const inRanges = (stretch: AxisStretch, index: number): boolean =>
  stretch.ranges.some(([first, last]) => index >= first && index <= last);

export interface LayerStrips {
  /** By vector of a row: bytes from its place in the row to its ψ in a row of the strips; null outside the layers along x. */
  readonly psiShifts: readonly (number | null)[];
  /** Bytes of a row's strips along x. */
  readonly stripBytes: number;
  /** Address of the parameters along x. */
  readonly columnParameters: number;
  /** Row j's strips along x: address of what belongs to vector 0 at shift 0. */
  readonly psiGyOf: (row: number) => number;
  readonly psiFxOf: (row: number) => number;
  /** Row j's strips along y; 0 outside these layers. */
  readonly psiGxOf: (row: number) => number;
  readonly psiFyOf: (row: number) => number;
  /** decay, gain and stretch of gx and of F in row j. */
  readonly rowParameters: (row: number) => readonly number[];
  /** All of ψ, for snapshots. */
  readonly memory: readonly Float32Array[];
}

export const isLayerRow = (layers: AbsorbingLayers, row: number): boolean =>
  inRanges(layers.rowsF, row) || inRanges(layers.rowsG, row);

/** Vectors of a row that hold a column of a layer along x. */
const layerVectors = (lattice: Lattice, layers: AbsorbingLayers): boolean[] =>
  Array.from({ length: lattice.stride / LANES }, (_, v) => {
    const columns = Array.from({ length: LANES }, (__, lane) => v * LANES + lane);
    return columns.some((i) => inRanges(layers.columnsF, i) || inRanges(layers.columnsG, i));
  });

/** Bytes that `layStrips` will take, at most. */
export function stripBytes(lattice: Lattice, layers: AbsorbingLayers): number {
  const width = layerVectors(lattice, layers).filter(Boolean).length * VECTOR_BYTES;
  const rowBytes = lattice.stride * 4;
  let rows = 0;
  for (let j = 0; j <= lattice.rows + 1; j += 1) if (isLayerRow(layers, j)) rows += 1;
  return 2 * width * (lattice.rows + 2) + 2 * rows * rowBytes + 6 * rowBytes + 5 * CACHE_LINE_BYTES;
}

export function layStrips(arena: Arena, lattice: Lattice, layers: AbsorbingLayers): LayerStrips {
  const { rows, stride } = lattice;
  const rowBytes = stride * 4;
  const inLayer = layerVectors(lattice, layers);
  let width = 0;
  const psiShifts = inLayer.map((inside, v) => {
    if (!inside) return null;
    const shift = width - v * VECTOR_BYTES;
    width += VECTOR_BYTES;
    return shift;
  });

  const columnParameters = arena.reserve(6 * rowBytes, CACHE_LINE_BYTES);
  const psiGy = arena.reserve(width * (rows + 2), CACHE_LINE_BYTES);
  const psiFx = arena.reserve(width * (rows + 2), CACHE_LINE_BYTES);
  const placeOf = new Map<number, number>();
  for (let j = 0; j <= rows + 1; j += 1) if (isLayerRow(layers, j)) placeOf.set(j, placeOf.size);
  const psiGx = arena.reserve(placeOf.size * rowBytes, CACHE_LINE_BYTES);
  const psiFy = arena.reserve(placeOf.size * rowBytes, CACHE_LINE_BYTES);

  // The kernel knows 1/κ itself, the layers tell 1/κ − 1.
  const whole = (stretch: Float64Array): Float64Array => stretch.map((value) => 1 + value);
  const { columnsG, columnsF } = layers;
  const wholeG = whole(columnsG.stretch);
  const wholeF = whole(columnsF.stretch);
  const along = [columnsG.decay, columnsG.gain, wholeG, columnsF.decay, columnsF.gain, wholeF];
  for (let i = 0; i < Math.min(stride, columnsG.decay.length); i += 1) {
    const word = (columnParameters + Math.floor(i / LANES) * VARIED_BYTES) / 4 + (i % LANES);
    along.forEach((values, index) => {
      arena.f32[word + index * LANES] = values[i];
    });
  }
  const view = (address: number, bytes: number): Float32Array =>
    new Float32Array(arena.memory.buffer, address, bytes / 4);
  const inRow = (address: number, row: number): number => {
    const place = placeOf.get(row);
    return place === undefined ? 0 : address + place * rowBytes;
  };
  const { rowsG, rowsF } = layers;
  return {
    psiShifts,
    stripBytes: width,
    columnParameters,
    psiGyOf: (row) => psiGy + row * width,
    psiFxOf: (row) => psiFx + row * width,
    psiGxOf: (row) => inRow(psiGx, row),
    psiFyOf: (row) => inRow(psiFy, row),
    rowParameters: (row) => [
      ...[rowsG.decay[row], rowsG.gain[row], 1 + rowsG.stretch[row]],
      ...[rowsF.decay[row], rowsF.gain[row], 1 + rowsF.stretch[row]],
    ],
    memory: [
      view(psiGy, width * (rows + 2)),
      view(psiFx, width * (rows + 2)),
      view(psiGx, placeOf.size * rowBytes),
      view(psiFy, placeOf.size * rowBytes),
    ],
  };
}
