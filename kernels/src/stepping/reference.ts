/**
 * The reference engine: plain loops, short enough to check by eye, in float64 or float32. Every faster engine is compared
 * with it field by field.
 *
 * One sweep over the rows per step. Row j of G needs F's rows j and j + 1 of the old time; row j of F needs G's rows j and
 * j − 1 of the new one; so after row j of G comes row j of F, and each array is read and written once.
 */
import type { FieldArray, Lattice } from "../lattice/index.js";
import { BranchMemory } from "./branch-memory.js";
import type {
  Branch,
  CoefficientSource,
  Coupling,
  DrivePoint,
  Engine,
  EngineFields,
  EngineSetup,
  RowCoefficients,
  Tap,
} from "./engine.js";
import { rowCoefficients } from "./engine.js";
import { LayerMemory } from "./layer-memory.js";
import { packArrays, unpackArrays } from "./packing.js";
import { PoleMemory } from "./pole-memory.js";

type Precision = "f64" | "f32";

const groupByRow = <T extends { row: number }>(
  items: readonly T[],
  rows: number,
): readonly (readonly T[])[] => {
  const groups: T[][] = Array.from({ length: rows + 2 }, () => []);
  for (const item of items) {
    if (item.row < 0 || item.row > rows + 1) {
      throw new RangeError(`Row ${item.row} lies outside the lattice of ${rows} rows.`);
    }
    groups[item.row].push(item);
  }
  return groups;
};

/** gx and gy of columns 0 … last of one row; `base` is the index of the row's column 0. */
function stepG(
  f: FieldArray,
  gx: FieldArray,
  gy: FieldArray,
  aGx: FieldArray,
  bGx: FieldArray,
  aGy: FieldArray,
  bGy: FieldArray,
  base: number,
  last: number,
  stride: number,
): void {
  const end = base + last;
  let here = f[base];
  for (let k = base; k <= end; k += 1) {
    const right = f[k + 1];
    const above = f[k + stride];
    gx[k] = aGx[k] * gx[k] - bGx[k] * (above - here);
    gy[k] = aGy[k] * gy[k] + bGy[k] * (right - here);
    here = right;
  }
}

/** What the couplings of one row add to its gx, its gy and the next row's gy (see `Coupling`). */
function couple(
  f: FieldArray,
  gx: FieldArray,
  gy: FieldArray,
  couplings: readonly Coupling[],
  base: number,
  stride: number,
): void {
  for (const { column, factor } of couplings) {
    const k = base + column;
    const above = k + stride;
    const alongX = f[k + 1] - f[k] + (f[above + 1] - f[above]);
    const alongY = f[above] - f[k] + (f[above + 1] - f[k + 1]);
    gx[k] = gx[k] + factor * alongX;
    gx[k + 1] = gx[k + 1] + factor * alongX;
    gy[k] = gy[k] - factor * alongY;
    gy[above] = gy[above] - factor * alongY;
  }
}

/** F of columns 1 … last of one row. */
function stepF(
  f: FieldArray,
  gx: FieldArray,
  gy: FieldArray,
  aF: FieldArray,
  bF: FieldArray,
  base: number,
  last: number,
  stride: number,
): void {
  const end = base + last;
  let left = gy[base];
  for (let k = base + 1; k <= end; k += 1) {
    const here = gy[k];
    f[k] = aF[k] * f[k] + bF[k] * (here - left - (gx[k] - gx[k - stride]));
    left = here;
  }
}

export class ReferenceEngine implements Engine {
  readonly name = "reference";
  readonly threads = 1;
  readonly precision: Precision;
  readonly lattice: Lattice;
  readonly fields: EngineFields;
  private readonly aF: FieldArray;
  private readonly bF: FieldArray;
  private readonly aGx: FieldArray;
  private readonly bGx: FieldArray;
  private readonly aGy: FieldArray;
  private readonly bGy: FieldArray;
  private readonly memory: LayerMemory;
  private readonly poles: PoleMemory;
  private readonly branches = new BranchMemory();
  private branchDrives: readonly (readonly DrivePoint[])[];
  private readonly tapsByRow: readonly (readonly Tap[])[];
  private readonly records: number;
  private drivesByRow: readonly (readonly DrivePoint[])[];
  private signals: number;
  private readonly couplings: (readonly Coupling[])[] = [];
  private stepsTaken = 0;

  constructor(setup: EngineSetup, precision: Precision = "f64") {
    const { lattice } = setup;
    this.precision = precision;
    this.lattice = lattice;
    const array = (size: number): FieldArray =>
      precision === "f64" ? new Float64Array(size) : new Float32Array(size);
    this.fields = { f: array(lattice.size), gx: array(lattice.size), gy: array(lattice.size) };
    this.aF = array(lattice.size);
    this.bF = array(lattice.size);
    this.aGx = array(lattice.size);
    this.bGx = array(lattice.size);
    this.aGy = array(lattice.size);
    this.bGy = array(lattice.size);
    this.memory = new LayerMemory(lattice, setup.layers, array);
    this.poles = new PoleMemory(lattice.rows, lattice.stride, array);
    this.tapsByRow = groupByRow(setup.taps, lattice.rows);
    this.records = setup.records;
    this.drivesByRow = groupByRow(setup.drives, lattice.rows);
    this.signals = setup.signals;
    this.branchDrives = this.branchesByRow(setup.branches ?? []);
    this.setRows(0, lattice.rows + 1, setup.coefficients);
  }

  get step(): number {
    return this.stepsTaken;
  }

  setRows(first: number, last: number, source: CoefficientSource): void {
    const row = rowCoefficients(this.lattice.stride);
    for (let j = first; j <= last; j += 1) {
      row.terms = [];
      row.couplings = [];
      source(j, row);
      this.couplings[j] = row.couplings;
      this.poles.setRow(j, row.terms);
      const base = j * this.lattice.stride;
      this.aF.set(row.aF, base);
      this.bF.set(row.bF, base);
      this.aGx.set(row.aGx, base);
      this.bGx.set(row.bGx, base);
      this.aGy.set(row.aGy, base);
      this.bGy.set(row.bGy, base);
    }
  }

  readCoefficients(row: number, out: RowCoefficients): void {
    const base = row * this.lattice.stride;
    const end = base + this.lattice.stride;
    out.aF.set(this.aF.subarray(base, end));
    out.bF.set(this.bF.subarray(base, end));
    out.aGx.set(this.aGx.subarray(base, end));
    out.bGx.set(this.bGx.subarray(base, end));
    out.aGy.set(this.aGy.subarray(base, end));
    out.bGy.set(this.bGy.subarray(base, end));
  }

  setDrives(drives: readonly DrivePoint[], signals: number): void {
    this.drivesByRow = groupByRow(drives, this.lattice.rows);
    this.signals = signals;
  }

  setBranches(branches: readonly Branch[]): void {
    this.branchDrives = this.branchesByRow(branches);
  }

  private branchesByRow(branches: readonly Branch[]): readonly (readonly DrivePoint[])[] {
    this.branches.set(branches);
    return groupByRow(this.branches.drives, this.lattice.rows);
  }

  advance(steps: number, signals: Float64Array, records: Float64Array): void {
    if (signals.length < steps * this.signals || records.length < steps * this.records) {
      throw new RangeError(
        `advance(${steps}) needs ${steps * this.signals} signals and room for ${steps * this.records} records.`,
      );
    }
    records.fill(0, 0, steps * this.records);
    for (let t = 0; t < steps; t += 1) this.takeStep(signals, t * this.signals, records, t * this.records);
  }

  private takeStep(
    signals: Float64Array,
    signalBase: number,
    records: Float64Array,
    recordBase: number,
  ): void {
    const { f, gx, gy } = this.fields;
    const { aF, bF, aGx, bGx, aGy, bGy, memory, poles } = this;
    const { stride, columns, rows } = this.lattice;
    const own = signals.subarray(signalBase, signalBase + this.signals);
    for (let j = 0; j <= rows; j += 1) {
      const base = j * stride;
      couple(f, gx, gy, this.couplings[j], base, stride);
      stepG(f, gx, gy, aGx, bGx, aGy, bGy, base, columns, stride);
      memory.correctG(j, this.fields, bGx, bGy);
      poles.correct(j, "gx", this.fields);
      poles.correct(j, "gy", this.fields);
      this.driveG(j, this.drivesByRow[j], own);
      this.driveG(j, this.branchDrives[j], this.branches.currents);
      if (j > 0) {
        stepF(f, gx, gy, aF, bF, base, columns, stride);
        memory.correctF(j, this.fields, bF);
        poles.correct(j, "f", this.fields);
        this.driveF(j, this.drivesByRow[j], own);
        this.driveF(j, this.branchDrives[j], this.branches.currents);
      }
      poles.advance(j, this.fields);
      this.branches.advance(j, this.fields, stride);
      for (const tap of this.tapsByRow[j]) {
        const index = recordBase + tap.record;
        const value = this.fields[tap.field][base + tap.column];
        records[index] = records[index] + tap.weight * value;
      }
    }
    this.stepsTaken += 1;
  }

  private driveG(j: number, drives: readonly DrivePoint[], signals: Float64Array): void {
    for (const { field, column, weight, signal } of drives) {
      if (field === undefined || field === "f") continue;
      const b = field === "gx" ? this.bGx : this.bGy;
      const values = this.fields[field];
      const k = j * this.lattice.stride + column;
      values[k] = values[k] - b[k] * weight * signals[signal];
    }
  }

  private driveF(j: number, drives: readonly DrivePoint[], signals: Float64Array): void {
    const { f } = this.fields;
    for (const { field, column, weight, signal } of drives) {
      if (field === "gx" || field === "gy") continue;
      const k = j * this.lattice.stride + column;
      f[k] = f[k] - this.bF[k] * weight * signals[signal];
    }
  }

  save(): Uint8Array {
    const { f, gx, gy } = this.fields;
    return packArrays([
      Float64Array.of(this.stepsTaken),
      f,
      gx,
      gy,
      ...this.memory.arrays,
      ...this.poles.arrays,
      this.branches.state,
    ]);
  }

  load(bytes: Uint8Array): void {
    const { f, gx, gy } = this.fields;
    const step = new Float64Array(1);
    unpackArrays(bytes, [step, f, gx, gy, ...this.memory.arrays, ...this.poles.arrays, this.branches.state]);
    this.stepsTaken = step[0];
  }

  dispose(): void {
    // Plain arrays: the garbage collector frees them with the engine.
  }
}
