/** Branches in the kernel's form: by row what they draw and which of them end there. */
import { BRANCH_NUMBERS, BRANCH_POINTS, branchDrives, carryBranches, rowOf } from "../branch-memory.js";
import type { Branch, Engine, EngineField } from "../engine.js";
import type { Arena } from "./arena.js";
import type { DriveShare } from "./drive-shares.js";
import { driveShares } from "./drive-shares.js";
import * as at from "./layout.js";

interface Block {
  address: number;
  bytes: number;
}

export class BranchRows {
  /** BRANCH_NUMBERS of each branch. */
  state: Float64Array = new Float64Array(0);
  private branches: readonly Branch[] = [];
  private stateBlock: Block | null = null;
  private block: Block | null = null;

  constructor(
    private readonly arena: Arena,
    private readonly engine: Pick<Engine, "lattice" | "readCoefficients">,
    private readonly table: number,
    private readonly fields: Readonly<Record<EngineField, number>>,
  ) {}

  set(branches: readonly Branch[]): void {
    if (branches.some(({ points }) => points.length > BRANCH_POINTS))
      throw new RangeError(`A branch has at most ${BRANCH_POINTS} points.`);
    const carried = carryBranches(this.branches, this.state, branches);
    if (this.stateBlock) this.arena.release(this.stateBlock.address, this.stateBlock.bytes);
    const bytes = carried.byteLength;
    this.stateBlock = { address: this.arena.take(bytes), bytes };
    this.state = new Float64Array(this.arena.memory.buffer, this.stateBlock.address, carried.length);
    this.state.set(carried);
    this.branches = branches;
    this.write();
  }

  /** To be called again when coefficients have changed: what is drawn goes by the points' own b. */
  write(): void {
    const { arena, branches } = this;
    if (this.block) {
      for (let j = 0; j <= this.engine.lattice.rows + 1; j += 1) this.setEntry(j, 0);
      arena.release(this.block.address, this.block.bytes);
      this.block = null;
    }
    if (branches.length === 0 || !this.stateBlock) return;
    const drives = [...branchDrives(branches)].sort((a, b) => a.row - b.row);
    const byRow = new Map<number, { draws: DriveShare[]; ends: number[] }>();
    const rowAt = (row: number): { draws: DriveShare[]; ends: number[] } => {
      const found = byRow.get(row) ?? { draws: [], ends: [] };
      byRow.set(row, found);
      return found;
    };
    const shares = driveShares(this.engine, drives);
    for (const share of shares) rowAt(share.row).draws.push(share);
    branches.forEach((branch, index) => rowAt(rowOf(branch)).ends.push(index));
    const bytes =
      byRow.size * at.BRANCHES_HEADER_BYTES +
      shares.length * at.DRIVE_BYTES +
      branches.length * at.BRANCH_BYTES;
    this.block = { address: arena.take(bytes), bytes };
    const { i32 } = arena;
    let next = this.block.address;
    for (const [row, { draws, ends }] of byRow) {
      const header = next;
      this.setEntry(row, header);
      next += at.BRANCHES_HEADER_BYTES;
      i32[(header + at.BRANCHES_DRAWS) / 4] = next;
      for (const draw of draws) next = this.writeDraw(next, draw, this.stateBlock.address);
      i32[(header + at.BRANCHES_DRAWS_END) / 4] = next;
      i32[(header + at.BRANCHES_FIRST) / 4] = next;
      for (const index of ends) next = this.writeBranch(next, index, this.stateBlock.address);
      i32[(header + at.BRANCHES_END) / 4] = next;
    }
  }

  private setEntry(row: number, address: number): void {
    this.arena.i32[(this.table + row * at.ENTRY_BYTES + at.ENTRY_BRANCHES) / 4] = address;
  }

  private addressOf(field: EngineField, row: number, column: number): number {
    return this.fields[field] + (row * this.engine.lattice.stride + column) * 4;
  }

  private writeDraw(
    entry: number,
    { field, row, column, signal, factor }: DriveShare,
    state: number,
  ): number {
    const { i32, f64 } = this.arena;
    i32[entry / 4] = this.addressOf(field, row, column);
    i32[entry / 4 + 1] = state + signal * 8;
    f64[entry / 8 + 1] = factor;
    return entry + at.DRIVE_BYTES;
  }

  private writeBranch(entry: number, index: number, state: number): number {
    const { i32, f64 } = this.arena;
    const { points, decay, conductance } = this.branches[index];
    for (let n = 0; n < BRANCH_POINTS; n += 1) {
      const { field, row, column } = points[Math.min(n, points.length - 1)];
      i32[entry / 4 + n] = this.addressOf(field, row, column);
      f64[(entry + at.BRANCH_WEIGHTS) / 8 + n] = n < points.length ? points[n].weight : 0;
    }
    i32[(entry + at.BRANCH_STATE) / 4] = state + index * BRANCH_NUMBERS * 8;
    f64[(entry + at.BRANCH_DECAY) / 8] = decay;
    f64[(entry + at.BRANCH_CONDUCTANCE) / 8] = conductance;
    f64[(entry + at.BRANCH_TOTAL) / 8] = points.reduce((sum, { weight }) => sum + Math.abs(weight), 0);
    return entry + at.BRANCH_BYTES;
  }
}
