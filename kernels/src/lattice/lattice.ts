/**
 * One lattice for both polarizations.
 *
 * There is one out-of-plane field F and two in-plane fields Gx, Gy that live between its points:
 *
 *   - TMz: F = Ez on the mesh nodes,        Gx =  Hx, Gy =  Hy
 *   - TEz: F = Hz on the cell centres,      Gx = −Ex, Gy = −Ey
 *
 * (TEz is TMz with E → H, H → −E, ε ↔ μ, σ ↔ σ*.) With α the coefficient of F's equation (ε for TMz, μ for TEz) and κ
 * that of G's, both obey
 *
 *   κ ∂Gx/∂t = −∂F/∂y,   κ ∂Gy/∂t = ∂F/∂x,   α ∂F/∂t = ∂Gy/∂x − ∂Gx/∂y − J.
 *
 * The arrays hold F itself and G times the length of the mesh edge it circulates along, gx = Gx·Δx and gy = Gy·Δy,
 * so that one step is (K. S. Yee, IEEE Trans. Antennas Propag. 14 (1966) 302, in integral form)
 *
 *   gx[k] ← a·gx[k] − b·(F[k+S] − F[k])
 *   gy[k] ← a·gy[k] + b·(F[k+1] − F[k])
 *   F[k]  ← a·F[k]  + b·((gy[k] − gy[k−1]) − (gx[k] − gx[k−S]))
 *
 * with S the stride of a row. Points of F have columns 1…columns and rows 1…rows; the ring around them stays zero
 * unless an edge of the section needs it. gx of row j lies between F's rows j and j+1, gy of column i between F's
 * columns i and i+1. Absorbing layers are cells outside the section. F holds times nΔt, G times (n+½)Δt.
 */
import { C0 } from "./constants.js";

export type LatticePolarization = "TMz" | "TEz";
export type EdgeKind = "absorbing" | "electric" | "magnetic";
export type Side = "left" | "right" | "bottom" | "top";
export const SIDES: readonly Side[] = ["left", "right", "bottom", "top"];

export interface LatticeSpec {
  polarization: LatticePolarization;
  /** Cells of the section. */
  nx: number;
  ny: number;
  /** Cell size in metres. */
  dx: number;
  dy: number;
  edges: Readonly<Record<Side, EdgeKind>>;
  /** Thickness of an absorbing layer in cells; default 12. */
  layerCells?: number;
  /** Δt over the stability limit; default 0.99. */
  courant?: number;
}

export interface Lattice {
  readonly polarization: LatticePolarization;
  readonly nx: number;
  readonly ny: number;
  readonly dx: number;
  readonly dy: number;
  readonly edges: Readonly<Record<Side, EdgeKind>>;
  /** Cells outside the section on each side. */
  readonly layers: Readonly<Record<Side, number>>;
  /** Points of F per row and per column, layers included. */
  readonly columns: number;
  readonly rows: number;
  /** Numbers from one row to the next, and in a whole array: (rows + 2) × stride. */
  readonly stride: number;
  readonly size: number;
  /** 0 where F lies on the nodes (TMz), ½ where it lies on the cell centres (TEz). */
  readonly offset: 0 | 0.5;
  /** Seconds, and its ratio to the stability limit. */
  readonly dt: number;
  readonly courant: number;
}

export const DEFAULT_LAYER_CELLS = 12;
export const DEFAULT_COURANT = 0.99;

/** Rows start on multiples of 16 numbers, so that a vector engine finds them aligned. */
const ALIGNMENT = 16;

/** Largest stable Δt of the plain lattice in a medium of wave speed c, in seconds: 1/(c√(1/Δx² + 1/Δy²)). */
export const stabilityLimit = (dx: number, dy: number, speed: number = C0): number =>
  1 / (speed * Math.hypot(1 / dx, 1 / dy));

/** The lattice of a section. Throws a RangeError on a size that is no size. */
export function buildLattice(spec: LatticeSpec): Lattice {
  const { polarization, nx, ny, dx, dy, edges } = spec;
  const layerCells = spec.layerCells ?? DEFAULT_LAYER_CELLS;
  const courant = spec.courant ?? DEFAULT_COURANT;
  if (!Number.isInteger(nx) || !Number.isInteger(ny) || nx < 1 || ny < 1) {
    throw new RangeError(`A lattice needs at least one whole cell each way; ${nx} × ${ny} was asked for.`);
  }
  if (!(dx > 0) || !(dy > 0) || !Number.isFinite(dx) || !Number.isFinite(dy)) {
    throw new RangeError(`A lattice needs cells of positive size; ${dx} m × ${dy} m was asked for.`);
  }
  const cellsOf = (side: Side): number => (edges[side] === "absorbing" ? layerCells : 0);
  const layers = {
    left: cellsOf("left"),
    right: cellsOf("right"),
    bottom: cellsOf("bottom"),
    top: cellsOf("top"),
  };
  const onNodes = polarization === "TMz" ? 1 : 0;
  const columns = nx + layers.left + layers.right + onNodes;
  const rows = ny + layers.bottom + layers.top + onNodes;
  const stride = Math.ceil((columns + 2) / ALIGNMENT) * ALIGNMENT;
  return {
    polarization,
    nx,
    ny,
    dx,
    dy,
    edges,
    layers,
    columns,
    rows,
    stride,
    size: stride * (rows + 2),
    offset: polarization === "TMz" ? 0 : 0.5,
    dt: courant * stabilityLimit(dx, dy),
    courant,
  };
}

/** Position of F's column i in cells from the section's left edge; add ½ for gy of that column. */
export const cellOfColumn = (lattice: Lattice, i: number): number =>
  i - 1 - lattice.layers.left + lattice.offset;
/** Position of F's row j in cells from the section's bottom edge; add ½ for gx of that row. */
export const cellOfRow = (lattice: Lattice, j: number): number =>
  j - 1 - lattice.layers.bottom + lattice.offset;

/** First column of F that belongs to the section, and first row. */
export const firstColumn = (lattice: Lattice): number => 1 + lattice.layers.left;
export const firstRow = (lattice: Lattice): number => 1 + lattice.layers.bottom;
/** F's points of the section per row and per column: nx + 1 nodes (TMz) or nx centres (TEz). */
export const sectionColumns = (lattice: Lattice): number =>
  lattice.nx + (lattice.polarization === "TMz" ? 1 : 0);
export const sectionRows = (lattice: Lattice): number =>
  lattice.ny + (lattice.polarization === "TMz" ? 1 : 0);

/**
 * Share of a mesh edge or dual cell that lies in the section, for F's column i: ½ on a magnetic wall that runs
 * through F's points (TMz), else 1. Such a wall halves gx there, so that Hx = gx/(Δx·share).
 */
export function columnShare(lattice: Lattice, i: number): number {
  if (lattice.polarization !== "TMz") return 1;
  const onLeft = i === 1 && lattice.edges.left === "magnetic";
  const onRight = i === lattice.columns && lattice.edges.right === "magnetic";
  return onLeft || onRight ? 0.5 : 1;
}

/** The same for F's row j and gy. */
export function rowShare(lattice: Lattice, j: number): number {
  if (lattice.polarization !== "TMz") return 1;
  const onBottom = j === 1 && lattice.edges.bottom === "magnetic";
  const onTop = j === lattice.rows && lattice.edges.top === "magnetic";
  return onBottom || onTop ? 0.5 : 1;
}
