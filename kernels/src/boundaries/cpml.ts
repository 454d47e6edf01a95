/**
 * Convolutional perfectly matched layers (J. A. Roden and S. D. Gedney, Microw. Opt. Technol. Lett. 27 (2000) 334).
 *
 * Derivatives along the layer's normal are divided by s = κ + σ/(α + jω), where σ and α are rates in 1/s (σ/ε₀ and α/ε₀
 * of the usual notation, so that they do not depend on the medium). In time, ∂u/∂x becomes ∂u/∂x·(1/κ) + ψ with
 *
 *   ψ ← decay·ψ + gain·∂u/∂x,   decay = exp(−(σ/κ + α)Δt),   gain = σ/(κ(σ + κα))·(decay − 1).
 *
 * σ and κ grow from the layer's face as (depth/thickness)^m, α falls to zero at the outer end, which is a perfect conductor.
 */
import type { Lattice } from "../lattice/index.js";
import { C0, cellOfColumn, cellOfRow } from "../lattice/index.js";

export interface LayerGrading {
  /** Exponent of σ and κ. */
  order: number;
  /** σ at the outer end, over the customary optimum 0.8(m + 1)c/(n·cell) for a medium of refractive index n. */
  sigmaFactor: number;
  kappaMax: number;
  /** α at the layer's face over 2π times the band's lower edge. */
  alphaFactor: number;
  alphaOrder: number;
}

/**
 * Chosen by `layerReflectionDb` and `evanescentReflection`: −89 dB or better up to 60° from 20 cells per wavelength to the wavelength of the
 * band's lower edge, −83 dB at 75°, at a band from 200 cells per wavelength.
 *
 * Nothing a layer of absorption does is passive: under an evanescent wave of k_n = −jg·ω/c it answers with exp(−2Ag + 2jBg), B being the absorption
 * of travelling waves in nepers and A the layer's real depth in radians, and where 2Bg lies between π and 2π it gives power back. A mode that a
 * lossless guide holds just below a cut-off lives there, and grows. So α falls late (as √(1 − depth)), which adds to A without B,
 * and layers across guides are deeper.
 */
export const DEFAULT_GRADING: LayerGrading = {
  order: 3,
  sigmaFactor: 1.3,
  kappaMax: 1,
  alphaFactor: 0.6,
  alphaOrder: 0.5,
};

/**
 * For layers of GUIDE_CELLS across guides, which have the room for twice the α: −108 dB or better up to 75°, and no growth that was found of
 * posts' modes.
 */
export const GUIDE_GRADING: LayerGrading = {
  ...DEFAULT_GRADING,
  order: 3.5,
  sigmaFactor: 1.7,
  alphaFactor: 1,
};

/** What a layer does to the points of one axis, at F's points or at the half points between them. */
export interface AxisStretch {
  /** By column (or row) index: ψ's decay and gain, and 1/κ − 1. All zero outside the layers. */
  readonly decay: Float64Array;
  readonly gain: Float64Array;
  readonly stretch: Float64Array;
  /** Columns (or rows) with a layer: [first, last] inclusive, at most one range at each end. */
  readonly ranges: readonly (readonly [number, number])[];
}

export interface AbsorbingLayers {
  /** Along x: at F's columns (for ∂Gy/∂x) and at the half columns of gy (for ∂F/∂x). */
  readonly columnsF: AxisStretch;
  readonly columnsG: AxisStretch;
  /** Along y: at F's rows (for ∂Gx/∂y) and at the half rows of gx (for ∂F/∂y). */
  readonly rowsF: AxisStretch;
  readonly rowsG: AxisStretch;
}

interface Axis {
  count: number;
  cells: number;
  cellSize: number;
  thickness: readonly [number, number];
  /** Refractive index behind the lower and the upper side. */
  index: readonly [number, number];
  position: (index: number) => number;
}

function stretchAxis(axis: Axis, dt: number, alphaRate: number, grading: LayerGrading): AxisStretch {
  const length = axis.count + 2;
  const decay = new Float64Array(length);
  const gain = new Float64Array(length);
  const stretch = new Float64Array(length);
  const ranges: (readonly [number, number])[] = [];
  let open = -1;
  for (let i = 0; i < length; i += 1) {
    const position = axis.position(i);
    const below = -position;
    const above = position - axis.cells;
    const upper = above > below;
    const thickness = axis.thickness[upper ? 1 : 0];
    const depth = thickness > 0 ? Math.max(below, above) / thickness : 0;
    const inLayer = depth > 1e-9 && depth <= 1 + 1e-9;
    if (inLayer) {
      const optimum = (0.8 * (grading.order + 1) * C0) / (axis.index[upper ? 1 : 0] * axis.cellSize);
      const sigma = grading.sigmaFactor * optimum * depth ** grading.order;
      const kappa = 1 + (grading.kappaMax - 1) * depth ** grading.order;
      const alpha = alphaRate * grading.alphaFactor * Math.max(0, 1 - depth) ** grading.alphaOrder;
      const d = Math.exp(-(sigma / kappa + alpha) * dt);
      decay[i] = d;
      gain[i] = ((d - 1) * sigma) / (kappa * (sigma + kappa * alpha));
      stretch[i] = 1 / kappa - 1;
      if (open < 0) open = i;
    }
    if (!inLayer && open >= 0) {
      ranges.push([open, i - 1]);
      open = -1;
    }
  }
  if (open >= 0) ranges.push([open, length - 1]);
  return { decay, gain, stretch, ranges };
}

export interface LayerMedia {
  /** Refractive index √(εμ) behind each side; 1 for air. */
  left: number;
  right: number;
  bottom: number;
  top: number;
}

/**
 * The layers of a lattice's absorbing edges.
 *
 * @param bandFromHz lower edge of the band in Hz, which scales α
 * @param media refractive index behind each side
 */
export function absorbingLayers(
  lattice: Lattice,
  bandFromHz: number,
  media: LayerMedia = { left: 1, right: 1, bottom: 1, top: 1 },
  grading: LayerGrading = DEFAULT_GRADING,
): AbsorbingLayers {
  const alphaRate = 2 * Math.PI * bandFromHz;
  const { layers, dt } = lattice;
  const x = {
    count: lattice.columns,
    cells: lattice.nx,
    cellSize: lattice.dx,
    thickness: [layers.left, layers.right] as const,
    index: [media.left, media.right] as const,
  };
  const y = {
    count: lattice.rows,
    cells: lattice.ny,
    cellSize: lattice.dy,
    thickness: [layers.bottom, layers.top] as const,
    index: [media.bottom, media.top] as const,
  };
  const make = (axis: Axis): AxisStretch => stretchAxis(axis, dt, alphaRate, grading);
  return {
    columnsF: make({ ...x, position: (i) => cellOfColumn(lattice, i) }),
    columnsG: make({ ...x, position: (i) => cellOfColumn(lattice, i) + 0.5 }),
    rowsF: make({ ...y, position: (j) => cellOfRow(lattice, j) }),
    rowsG: make({ ...y, position: (j) => cellOfRow(lattice, j) + 0.5 }),
  };
}
