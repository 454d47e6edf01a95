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
 * Chosen by `layerReflectionDb`: −104 dB or better up to 60° from 20 cells per wavelength to twice the wavelength of the band's lower
 * edge, −100 dB at 75°. κ > 1 made 75° worse by 25 dB; α of the whole lower edge cost 16 dB there.
 */
export const DEFAULT_GRADING: LayerGrading = {
  order: 4,
  sigmaFactor: 1,
  kappaMax: 1,
  alphaFactor: 0.3,
  alphaOrder: 1,
};

/**
 * Across guides with a cut-off. What rings there below the cut-off (a dielectric post holds such a mode) reaches the layer as an
 * evanescent wave, on which the layer with less α has gain: a post in a guide grew by 0.5 dB per 1,000 steps, and decays so.
 * Reflection of travelling waves is −82 dB at 1.25 times the band's lower edge in place of −102 dB.
 */
export const GUIDE_GRADING: LayerGrading = { ...DEFAULT_GRADING, alphaFactor: 1 };

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
