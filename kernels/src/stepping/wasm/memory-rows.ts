/** Memories of rows in the kernel's form: one block of memory a row, which the row table points to. */
import type { FieldArray } from "../../lattice/index.js";
import type { EngineField, PoleTerm, RowCoefficients } from "../engine.js";
import type { PoleRow, TermMemory } from "../pole-memory.js";
import { carryMemories } from "../pole-memory.js";
import { Arena } from "./arena.js";
import * as at from "./layout.js";

const FIELD_ADDRESS: Readonly<Record<EngineField, number>> = {
  f: at.FIELD_F,
  gx: at.FIELD_GX,
  gy: at.FIELD_GY,
};

interface Span {
  first: number;
  columns: number;
}

interface Block {
  address: number;
  bytes: number;
  row: PoleRow;
  /** All numbers that change, for snapshots. */
  state: FieldArray;
}

const whole = (first: number, end: number): Span => {
  const from = Math.floor(first / at.LANES) * at.LANES;
  return { first: from, columns: Math.ceil(end / at.LANES) * at.LANES - from };
};

const spanOf = ({ firstColumn, weights }: PoleTerm): Span => whole(firstColumn, firstColumn + weights.length);

/** All columns that the terms correct: gy's go into the F to their right. */
function reachOf(terms: readonly PoleTerm[]): Span {
  const first = Math.min(...terms.map((term) => term.firstColumn));
  const ends = terms.map(
    ({ field, firstColumn, weights }) => firstColumn + weights.length + (field === "gy" ? 1 : 0),
  );
  return whole(first, Math.max(...ends));
}

export class MemoryRows {
  private readonly blocks: (Block | null)[];

  constructor(
    private readonly arena: Arena,
    rows: number,
  ) {
    this.blocks = Array.from({ length: rows + 2 }, () => null);
  }

  /** State of all rows, for snapshots. */
  get arrays(): Float32Array[] {
    return this.blocks.flatMap((block) => (block ? [block.state as Float32Array] : []));
  }

  /** Replaces the memories of row j; gives the address of their block, 0 where there are none. */
  place(j: number, coefficients: RowCoefficients): number {
    const { terms } = coefficients;
    const before = this.blocks[j];
    const after = terms.length > 0 ? this.write(terms, coefficients.bF) : null;
    if (before && after) carryMemories(before.row, after.row);
    if (before) this.arena.release(before.address, before.bytes);
    this.blocks[j] = after;
    return after ? after.address : 0;
  }

  private write(terms: readonly PoleTerm[], bF: Float64Array): Block {
    const reach = reachOf(terms);
    const spans = terms.map(spanOf);
    const constant = reach.columns + spans.reduce((sum, span) => sum + span.columns, 0);
    const changing =
      3 * reach.columns + spans.reduce((sum, span, n) => sum + span.columns * terms[n].dynamics.order, 0);
    const head = at.MEMORIES_HEADER_BYTES + terms.length * at.TERM_BYTES;
    const bytes = head + 4 * (constant + changing);
    const address = this.arena.take(bytes);
    const { i32, f32 } = this.arena;
    f32.fill(0, address / 4, (address + bytes) / 4);
    let next = address + head;
    const line = (columns: number): number => {
      const start = next;
      next += 4 * columns;
      return start;
    };
    const view = (start: number, columns: number): Float32Array =>
      new Float32Array(this.arena.memory.buffer, start, columns);
    const bFAt = line(reach.columns);
    view(bFAt, reach.columns).set(bF.subarray(reach.first, reach.first + reach.columns));
    const weightsAt = spans.map((span, n) => {
      const start = line(span.columns);
      view(start, span.columns).set(terms[n].weights, terms[n].firstColumn - span.first);
      return start;
    });
    const state = view(next, changing);
    const pendingAt = { gx: line(reach.columns), gy: line(reach.columns), f: line(reach.columns) };
    i32[(address + at.MEMORIES_FROM) / 4] = reach.first * 4;
    i32[(address + at.MEMORIES_BYTES) / 4] = reach.columns * 4;
    i32[(address + at.MEMORIES_PENDING_GX) / 4] = pendingAt.gx;
    i32[(address + at.MEMORIES_PENDING_GY) / 4] = pendingAt.gy;
    i32[(address + at.MEMORIES_PENDING_F) / 4] = pendingAt.f;
    i32[(address + at.MEMORIES_B_F) / 4] = bFAt;
    i32[(address + at.MEMORIES_TERMS) / 4] = terms.length;
    const memories = terms.map((term, n): TermMemory => {
      const { field, dynamics } = term;
      const span = spans[n];
      const entry = address + at.MEMORIES_HEADER_BYTES + n * at.TERM_BYTES;
      const statesAt = dynamics.feed.map(() => line(span.columns));
      i32[(entry + at.TERM_FIELD) / 4] = FIELD_ADDRESS[field];
      i32[(entry + at.TERM_FROM) / 4] = span.first * 4;
      i32[(entry + at.TERM_LENGTH) / 4] = span.columns * 4;
      i32[(entry + at.TERM_PENDING) / 4] = pendingAt[field] + (span.first - reach.first) * 4;
      i32[(entry + at.TERM_WEIGHTS) / 4] = weightsAt[n];
      i32[(entry + at.TERM_FIRST) / 4] = statesAt[0];
      i32[(entry + at.TERM_SECOND) / 4] = dynamics.order === 2 ? statesAt[1] : 0;
      f32.set(dynamics.step, (entry + at.TERM_STEP) / 4);
      f32.set(dynamics.feed, (entry + at.TERM_FEED) / 4);
      return {
        term: { ...term, weights: term.weights.slice() },
        first: span.first,
        states: statesAt.map((start) => view(start, span.columns)),
      };
    });
    const pending = {
      gx: view(pendingAt.gx, reach.columns),
      gy: view(pendingAt.gy, reach.columns),
      f: view(pendingAt.f, reach.columns),
    };
    return { address, bytes, state, row: { memories, first: reach.first, pending } };
  }
}
