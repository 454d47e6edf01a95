/**
 * The engine: it owns the three fields, the coefficients and the absorbing layers' memory, and steps them. It knows rows,
 * so that a faster one may take many steps per sweep; whatever needs a whole frame (energy, pictures, edits) asks
 * between two calls of `advance`.
 */
import type { AbsorbingLayers } from "../boundaries/index.js";
import type { FieldArray, Lattice } from "../lattice/index.js";

/**
 * A memory R of one or two numbers that a field point feeds with its own v, and that answers with a step of its first number. Between two
 * steps of v, with S = `step` (row by row) and h = `feed`,
 *
 *   ΔR = S·R + h·v,   R ← R + ΔR,   and the next step adds −weight·ΔR₀ to v.
 *
 * How a medium's pole becomes one stands in `media`.
 */
export interface PoleDynamics {
  /** Numbers in R. */
  order: 1 | 2;
  /** order × order numbers, without unit. */
  step: readonly number[];
  /** order numbers, without unit. */
  feed: readonly number[];
}

/** The same memory at neighbouring points of one row. */
export interface PoleTerm {
  field: EngineField;
  dynamics: PoleDynamics;
  firstColumn: number;
  /** By column from `firstColumn`; without unit, 0 where the term does not act. */
  weights: Float64Array;
}

/**
 * What an oblique interface adds where four G's meet, gx of columns k, k + 1 and gy of this row and the next: before the row is stepped,
 *
 *   gx[k], gx[k+1] += factor·(F[k+1] − F[k] + F[k+S+1] − F[k+S]),   gy[k], gy[k+S] −= factor·(F[k+S] − F[k] + F[k+S+1] − F[k+1]).
 *
 * The four have a = 1 and lie outside the absorbing layers.
 */
export interface Coupling {
  column: number;
  factor: number;
}

/** Update coefficients of one row, each of the lattice's stride (index 0 is the ring). */
export interface RowCoefficients {
  aF: Float64Array;
  bF: Float64Array;
  aGx: Float64Array;
  bGx: Float64Array;
  aGy: Float64Array;
  bGy: Float64Array;
  /** Memories of the row's points. None lie in the absorbing layers, nor on a G beside an F that does. */
  terms: PoleTerm[];
  /** Couplings of this row of G with the next. */
  couplings: Coupling[];
}

/** Writes the coefficients of row j (0 … rows + 1) into `out`; `terms` are empty before. */
export type CoefficientSource = (row: number, out: RowCoefficients) => void;

/**
 * A share of a source at one field point: v −= b·weight·signal with the point's own b.
 *
 * On F the signal is a line current in A (TMz) or V (TEz) at (n+½)Δt, taken off at the end of the step. On gx or gy it is what the
 * difference of F along the field lacks, at nΔt, and F of the same step already feels it: so an incident field is put on
 * one side of a line. Points of gx and gy must lie outside the absorbing layers.
 */
export interface DrivePoint {
  /** Default: F. */
  field?: EngineField;
  row: number;
  column: number;
  weight: number;
  /** Index into the signals of a step. */
  signal: number;
}

export type EngineField = "f" | "gx" | "gy";

/** A share of a recorded quantity: record += weight·field[row, column], after the step. */
export interface Tap {
  row: number;
  column: number;
  field: EngineField;
  weight: number;
  /** Index into the records of a step. */
  record: number;
}

/** A point of a branch: the branch's voltage takes weight·v of it, and weight times the branch's current is drawn from it. */
export interface BranchPoint {
  field: EngineField;
  row: number;
  column: number;
  weight: number;
}

/**
 * A resistor and an inductor in series that feel V = Σ weight·v of one to four points of one row, or of two neighbouring rows. By the
 * trapezoidal rule its current is I⁺ = κI + q(V⁺ + V), with κ = `decay` and q = `conductance`. What of it needs fields that are not there yet
 * stands in the coefficients, as a loss q·|w|·Σ|w| of each point; see `BranchMemory` for the rest. Points lie outside the
 * absorbing layers.
 */
export interface Branch {
  points: readonly BranchPoint[];
  decay: number;
  conductance: number;
}

export interface EngineSetup {
  lattice: Lattice;
  coefficients: CoefficientSource;
  layers: AbsorbingLayers;
  drives: readonly DrivePoint[];
  signals: number;
  /** Default: none. */
  branches?: readonly Branch[];
  taps: readonly Tap[];
  records: number;
}

export interface EngineFields {
  readonly f: FieldArray;
  readonly gx: FieldArray;
  readonly gy: FieldArray;
}

export interface Engine {
  readonly name: "reference" | "wasm";
  readonly precision: "f64" | "f32";
  readonly threads: number;
  readonly lattice: Lattice;
  /** Steps taken: F holds time step·Δt, G (step − ½)·Δt. */
  readonly step: number;
  /** The fields as they are between two calls; written to by tests and edits, read by everyone. */
  readonly fields: EngineFields;
  /** a and b of one row as the engine uses them, in its precision; `terms` and `couplings` are left alone. */
  readCoefficients(row: number, out: RowCoefficients): void;

  /**
   * Takes `steps` steps.
   *
   * @param signals step-major: steps × signals numbers, the drives at (n+½)Δt
   * @param records step-major: steps × records numbers, overwritten with what the taps read
   */
  advance(steps: number, signals: Float64Array, records: Float64Array): void;
  /**
   * New coefficients for rows first … last, from the next step on. Fields stay as they are, and so does the memory of points whose
   * terms do not change; elsewhere memories start empty, as in a medium that is polarized by the field of one instant only.
   */
  setRows(first: number, last: number, source: CoefficientSource): void;
  setDrives(drives: readonly DrivePoint[], signals: number): void;
  /** New branches from the next step on; those that stay as they were keep their currents. */
  setBranches(branches: readonly Branch[]): void;
  /** Fields, layers', media's and branches' memory and step: with the same coefficients the run goes on bit for bit. */
  save(): Uint8Array;
  /** Throws a RangeError where the bytes do not fit this engine. */
  load(bytes: Uint8Array): void;
  /**
   * Σ ½M·v² of all three fields over rows and columns, both ends counted, in J/m; missing where the engine has no quicker way than
   * to read fields and coefficients.
   */
  energyOf?(firstRow: number, lastRow: number, firstColumn: number, lastColumn: number): number;
  dispose(): void;
}

export const rowCoefficients = (stride: number): RowCoefficients => ({
  aF: new Float64Array(stride),
  bF: new Float64Array(stride),
  aGx: new Float64Array(stride),
  bGx: new Float64Array(stride),
  aGy: new Float64Array(stride),
  bGy: new Float64Array(stride),
  terms: [],
  couplings: [],
});
