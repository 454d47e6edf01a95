/**
 * The fast engine: fields, coefficients and layers in one shared memory, stepped by the WebAssembly kernel in many steps per sweep
 * and, where helpers can be had, by several threads. In float32; the bits do not depend on the number of threads nor on how
 * steps are dealt out.
 */
import type { AbsorbingLayers } from "../../boundaries/index.js";
import type { FieldArray, Lattice } from "../../lattice/index.js";
import type {
  Branch,
  CoefficientSource,
  Coupling,
  DrivePoint,
  Engine,
  EngineField,
  EngineFields,
  EngineSetup,
  RowCoefficients,
  Tap,
} from "../engine.js";
import { rowCoefficients } from "../engine.js";
import { branchDrives } from "../branch-memory.js";
import { packArrays, unpackArrays } from "../packing.js";
import { Arena } from "./arena.js";
import { BranchRows } from "./branch-rows.js";
import { checkOnLattice, checkOutsideLayers, driveShares } from "./drive-shares.js";
import { writeControl, writeLayers } from "./control.js";
import { Flushing } from "./flushing.js";
import * as at from "./layout.js";
import { MemoryRows } from "./memory-rows.js";
import { readRuns, RunCutter } from "./runs.js";
import { isLayerRow, layStrips, stripBytes } from "./strips.js";
import type { LayerStrips } from "./strips.js";
import type { KernelExports, KernelModule, SharedMemory } from "./web-assembly.js";
import { platform } from "./web-assembly.js";

/** Starts a thread that instantiates `module` on `memory` and calls its export `serve`, which returns after `quit`. */
export type SpawnHelper = (task: { module: KernelModule; memory: SharedMemory }) => void;

export interface WasmOptions {
  /** At most this many threads, the caller's own among them; 1 where `spawn` is missing. */
  threads?: number;
  spawn?: SpawnHelper;
  /** Most steps of one block; chosen by the size of a row where it is missing. */
  blockSteps?: number;
}

/** Rows that one block works on should stay in a core's own cache. */
const BLOCK_CACHE_BYTES = 1024 * 1024;
const MOST_BLOCK_STEPS = 32;
const MOST_THREADS = 64;
/** Most steps of one job, fewer where their records would take more room than this. */
const MOST_JOB_STEPS = 256;
const LEAST_JOB_STEPS = 32;
const RECORDS_BYTES = 8 * 1024 * 1024;
/** Looks at the memory before a waiting thread sleeps: some tens of microseconds. */
const SPINS = 20_000;
/** Epochs mark jobs in the upper half of a positive 32-bit number. */
const LAST_EPOCH = 32_767;

interface RowBlock {
  address: number;
  bytes: number;
}

export class WasmEngine implements Engine {
  readonly name = "wasm";
  readonly precision = "f32";
  readonly threads: number;
  readonly lattice: Lattice;
  readonly fields: EngineFields;
  private readonly arena: Arena;
  private readonly kernel: KernelExports;
  private readonly strips: LayerStrips;
  private readonly flushing: Flushing;
  private readonly cutter: RunCutter;
  private readonly memories: MemoryRows;
  private readonly branches: BranchRows;
  private readonly table: number;
  private readonly energySums: number;
  private readonly rowBlocks: (RowBlock | null)[];
  private readonly couplingBlocks: (RowBlock | null)[];
  private readonly layerRows: readonly boolean[];
  private readonly fieldAddresses: Readonly<Record<EngineField, number>>;
  private readonly blockSteps: number;
  private readonly records: number;
  private readonly jobSteps: number;
  private readonly layers: AbsorbingLayers;
  private readonly recordsAt: number;
  private drives: readonly DrivePoint[] = [];
  private drivesBlock: RowBlock | null = null;
  private signals = 0;
  private signalsBlock: RowBlock | null = null;
  private epoch = 0;
  private stepsTaken = 0;

  constructor(module: KernelModule, setup: EngineSetup, options: WasmOptions = {}) {
    if (!platform) throw new RangeError("This platform has no WebAssembly.");
    const { lattice, layers } = setup;
    const { rows, stride, size } = lattice;
    this.lattice = lattice;
    this.threads = options.spawn ? Math.min(MOST_THREADS, Math.max(1, Math.floor(options.threads ?? 1))) : 1;
    this.records = setup.records;
    this.layers = layers;
    const fitting = Math.floor(RECORDS_BYTES / (8 * Math.max(1, setup.records)));
    this.jobSteps = Math.max(LEAST_JOB_STEPS, Math.min(MOST_JOB_STEPS, fitting));
    const rowBytes = stride * 4;
    this.blockSteps =
      options.blockSteps ??
      Math.max(2, Math.min(MOST_BLOCK_STEPS, Math.floor(BLOCK_CACHE_BYTES / (3 * rowBytes))));

    const tableBytes = (rows + 2) * at.ENTRY_BYTES;
    const recordBytes = this.jobSteps * setup.records * 8;
    const known =
      this.jobSteps * at.FLUSH_BYTES +
      3 * (size * 4 + 2 * rowBytes + 4096) +
      stripBytes(lattice, layers) +
      tableBytes +
      recordBytes +
      rows * 8;
    const arena = new Arena(at.CONTROL_END, known + 4096);
    this.arena = arena;
    this.table = arena.reserve(tableBytes, at.CACHE_LINE_BYTES);
    this.energySums = arena.reserve((rows + 2) * 8, at.CACHE_LINE_BYTES);
    this.recordsAt = arena.reserve(recordBytes, at.CACHE_LINE_BYTES);
    this.strips = layStrips(arena, lattice, layers);
    this.flushing = new Flushing(arena, lattice, this.jobSteps, this.strips.stripBytes);
    this.fieldAddresses = { f: this.reserveField(0), gx: this.reserveField(1), gy: this.reserveField(2) };
    const view = (address: number): FieldArray => new Float32Array(arena.memory.buffer, address, size);
    const { f, gx, gy } = this.fieldAddresses;
    this.fields = { f: view(f), gx: view(gx), gy: view(gy) };

    this.layerRows = Array.from({ length: rows + 2 }, (_, j) => isLayerRow(layers, j));
    this.rowBlocks = Array.from({ length: rows + 2 }, () => null);
    this.couplingBlocks = Array.from({ length: rows + 2 }, () => null);
    this.cutter = new RunCutter({ columns: lattice.columns, psiShifts: this.strips.psiShifts });
    this.memories = new MemoryRows(arena, rows);
    this.branches = new BranchRows(arena, this, this.table, this.fieldAddresses);
    writeControl(arena, lattice, {
      fields: this.fieldAddresses,
      table: this.table,
      records: this.recordsAt,
      recordBytes: setup.records * 8,
      energySums: this.energySums,
      spins: this.threads > 1 ? SPINS : 0,
    });
    writeLayers(arena, lattice, this.table, this.strips);
    this.setRows(0, rows + 1, setup.coefficients);
    this.writeTaps(setup.taps);
    this.setDrives(setup.drives, setup.signals);
    this.setBranches(setup.branches ?? []);

    this.kernel = new platform.Instance(module, { env: { memory: arena.memory } }).exports;
    for (let helper = 1; helper < this.threads; helper += 1)
      options.spawn?.({ module, memory: arena.memory });
  }

  get step(): number {
    return this.stepsTaken;
  }

  /** Bytes of memory that the engine has taken. */
  get bytes(): number {
    return this.arena.used;
  }

  /** A field with a row of zeros before and after it, its start a third of a page from the field before. */
  private reserveField(index: number): number {
    const rowBytes = this.lattice.stride * 4;
    const third = 21 * at.CACHE_LINE_BYTES;
    const block = this.arena.reserve(this.lattice.size * 4 + 2 * rowBytes + 2 * third, 4096);
    return block + index * third + rowBytes;
  }

  private entryWord(row: number, field: number): number {
    return (this.table + row * at.ENTRY_BYTES + field) / 4;
  }

  setRows(first: number, last: number, source: CoefficientSource): void {
    const row = rowCoefficients(this.lattice.stride);
    for (let j = first; j <= last; j += 1) {
      row.terms = [];
      row.couplings = [];
      source(j, row);
      this.placeCouplings(j, row.couplings);
      this.cutter.cut(row, j, this.layerRows[j]);
      this.placeRuns(j);
      const memories = this.memories.place(j, row);
      this.arena.i32[this.entryWord(j, at.ENTRY_MEMORIES)] = memories;
    }
    if (this.drives.length > 0) this.writeDrives();
    this.branches.write();
  }

  setBranches(branches: readonly Branch[]): void {
    for (const { points } of branches) checkOnLattice(points, this.lattice);
    checkOutsideLayers(branchDrives(branches), this.layers);
    this.branches.set(branches);
  }

  private placeRuns(row: number): void {
    const bytes = this.cutter.words * 4;
    const block = this.fitting(this.rowBlocks[row], bytes);
    this.rowBlocks[row] = block;
    const { i32 } = this.arena;
    i32.set(this.cutter.i32.subarray(0, this.cutter.words), block.address / 4);
    i32[this.entryWord(row, at.ENTRY_RUNS)] = block.address;
    i32[this.entryWord(row, at.ENTRY_RUNS_END)] = block.address + bytes;
  }

  private placeCouplings(row: number, couplings: readonly Coupling[]): void {
    const bytes = couplings.length * at.COUPLING_BYTES;
    const block = bytes > 0 ? this.fitting(this.couplingBlocks[row], bytes) : this.couplingBlocks[row];
    this.couplingBlocks[row] = block;
    const address = block?.address ?? 0;
    const { i32, f32 } = this.arena;
    couplings.forEach(({ column, factor }, index) => {
      const word = (address + index * at.COUPLING_BYTES) / 4;
      i32[word] = this.addressOf("f", row, column);
      i32[word + 1] = this.addressOf("gx", row, column);
      i32[word + 2] = this.addressOf("gy", row, column);
      f32[word + 3] = factor;
    });
    i32[this.entryWord(row, at.ENTRY_COUPLINGS)] = address;
    i32[this.entryWord(row, at.ENTRY_COUPLINGS_END)] = address + bytes;
  }

  /** The block itself where `bytes` fit into it, else another, the old one given back. */
  private fitting(block: RowBlock | null, bytes: number): RowBlock {
    if (block && bytes <= Arena.sizeOf(block.bytes)) return block;
    if (block) this.arena.release(block.address, block.bytes);
    return { address: this.arena.take(bytes), bytes };
  }

  readCoefficients(row: number, out: RowCoefficients): void {
    const { i32, f32 } = this.arena;
    const first = i32[this.entryWord(row, at.ENTRY_RUNS)] / 4;
    const end = i32[this.entryWord(row, at.ENTRY_RUNS_END)] / 4;
    readRuns(i32, f32, first, end, out);
  }

  setDrives(drives: readonly DrivePoint[], signals: number): void {
    checkOnLattice(drives, this.lattice);
    checkOutsideLayers(drives, this.layers);
    this.drives = [...drives].sort((a, b) => a.row - b.row);
    this.signals = signals;
    this.signalsBlock = this.fitting(this.signalsBlock, this.jobSteps * signals * 8);
    const { i32 } = this.arena;
    i32[at.SIGNALS / 4] = this.signalsBlock.address;
    i32[at.SIGNAL_BYTES / 4] = signals * 8;
    this.writeDrives();
  }

  /** Drives as what they take off of single numbers, which the coefficients of their rows decide. */
  private writeDrives(): void {
    const shares = driveShares(this, this.drives);
    this.flushing.setDrives(shares, this.signals);
    this.drivesBlock = this.fitting(this.drivesBlock, shares.length * at.DRIVE_BYTES);
    const { address } = this.drivesBlock;
    const { i32, f64 } = this.arena;
    shares.forEach(({ field, row, column, signal, factor }, index) => {
      const entry = address + index * at.DRIVE_BYTES;
      i32[entry / 4] = this.addressOf(field, row, column);
      i32[entry / 4 + 1] = signal * 8;
      f64[entry / 8 + 1] = factor;
    });
    this.writeRanges(shares, address, at.DRIVE_BYTES, at.ENTRY_DRIVES, at.ENTRY_DRIVES_END);
  }

  private writeTaps(taps: readonly Tap[]): void {
    checkOnLattice(taps, this.lattice);
    const sorted = [...taps].sort((a, b) => a.row - b.row);
    const address = this.arena.take(sorted.length * at.TAP_BYTES);
    const { i32, f64 } = this.arena;
    sorted.forEach((tap, index) => {
      const entry = address + index * at.TAP_BYTES;
      i32[entry / 4] = this.addressOf(tap.field, tap.row, tap.column);
      i32[entry / 4 + 1] = tap.record * 8;
      f64[entry / 8 + 1] = tap.weight;
    });
    this.writeRanges(sorted, address, at.TAP_BYTES, at.ENTRY_TAPS, at.ENTRY_TAPS_END);
  }

  private addressOf(field: EngineField, row: number, column: number): number {
    return this.fieldAddresses[field] + (row * this.lattice.stride + column) * 4;
  }

  /** Tells every row which entries of a list sorted by rows are its own. */
  private writeRanges(
    sorted: readonly { row: number }[],
    address: number,
    entryBytes: number,
    first: number,
    end: number,
  ): void {
    const { i32 } = this.arena;
    let next = 0;
    for (let j = 0; j <= this.lattice.rows + 1; j += 1) {
      i32[this.entryWord(j, first)] = address + next * entryBytes;
      while (next < sorted.length && sorted[next].row === j) next += 1;
      i32[this.entryWord(j, end)] = address + next * entryBytes;
    }
  }

  advance(steps: number, signals: Float64Array, records: Float64Array): void {
    if (signals.length < steps * this.signals || records.length < steps * this.records) {
      throw new RangeError(
        `advance(${steps}) needs ${steps * this.signals} signals and room for ${steps * this.records} records.`,
      );
    }
    for (let done = 0; done < steps; done += this.jobSteps) {
      this.runSteps(done, Math.min(this.jobSteps, steps - done), signals, records);
    }
  }

  private runSteps(done: number, steps: number, signals: Float64Array, records: Float64Array): void {
    const { i32, f64 } = this.arena;
    const signalsAt = (this.signalsBlock?.address ?? 0) / 8;
    const own = signals.subarray(done * this.signals, (done + steps) * this.signals);
    f64.set(own, signalsAt);
    this.flushing.plan(this.stepsTaken, steps, own);
    const kept = f64.subarray(this.recordsAt / 8, this.recordsAt / 8 + steps * this.records);
    kept.fill(0);
    i32[at.JOB / 4] = at.JOB_STEPS;
    i32[at.STEPS / 4] = steps;
    this.runJob(this.blocksOf(steps));
    records.set(kept, done * this.records);
    this.stepsTaken += steps;
  }

  /** Blocks of about equal length, as many for each thread. */
  private blocksOf(steps: number): number {
    const turns = Math.ceil(steps / (this.blockSteps * this.threads));
    return Math.min(steps, turns * this.threads, at.MOST_BLOCKS);
  }

  private runJob(parts: number): void {
    this.epoch = this.epoch === LAST_EPOCH ? 1 : this.epoch + 1;
    this.kernel.run(this.epoch, parts);
  }

  energyOf(firstRow: number, lastRow: number, firstColumn: number, lastColumn: number): number {
    const { i32, f64 } = this.arena;
    i32[at.JOB / 4] = at.JOB_ENERGY;
    i32[at.ENERGY_FIRST_ROW / 4] = firstRow;
    i32[at.ENERGY_LAST_ROW / 4] = lastRow;
    i32[at.ENERGY_FIRST_COLUMN / 4] = firstColumn;
    i32[at.ENERGY_LAST_COLUMN / 4] = lastColumn;
    this.runJob(Math.ceil((lastRow - firstRow + 1) / at.ENERGY_PART_ROWS));
    const sums = f64.subarray(this.energySums / 8, this.energySums / 8 + lastRow - firstRow + 1);
    return sums.reduce((energy, sum) => energy + sum, 0);
  }

  save(): Uint8Array {
    const { f, gx, gy } = this.fields;
    return packArrays([
      Float64Array.of(this.stepsTaken),
      f,
      gx,
      gy,
      ...this.strips.memory,
      ...this.memories.arrays,
      this.branches.state,
      this.flushing.largest,
    ]);
  }

  load(bytes: Uint8Array): void {
    const { f, gx, gy } = this.fields;
    const step = new Float64Array(1);
    unpackArrays(bytes, [
      step,
      f,
      gx,
      gy,
      ...this.strips.memory,
      ...this.memories.arrays,
      this.branches.state,
      this.flushing.largest,
    ]);
    this.stepsTaken = step[0];
  }

  dispose(): void {
    if (this.threads > 1) this.kernel.quit();
  }
}
