/**
 * Memories of a row's points (see `PoleTerm`): what both engines keep of them, and what survives an edit. An engine says where the
 * numbers lie; v of every point here is corrected by `pending`, the answer of all its memories to the step before.
 */
import type { FieldArray } from "../lattice/index.js";
import type { EngineField, EngineFields, PoleDynamics, PoleTerm } from "./engine.js";

export interface TermMemory {
  term: PoleTerm;
  /** Column of index 0 of the arrays. */
  first: number;
  /** `order` arrays by column. */
  states: readonly FieldArray[];
}

export interface PoleRow {
  memories: readonly TermMemory[];
  /** Column of index 0 of `pending`. */
  first: number;
  pending: Readonly<Record<EngineField, FieldArray>>;
}

const sameNumbers = (a: readonly number[], b: readonly number[]): boolean =>
  a.length === b.length && a.every((value, index) => value === b[index]);

const sameDynamics = (a: PoleDynamics, b: PoleDynamics): boolean =>
  a === b || (a.order === b.order && sameNumbers(a.step, b.step) && sameNumbers(a.feed, b.feed));

const weightAt = ({ weights, firstColumn }: PoleTerm, column: number): number =>
  weights[column - firstColumn] ?? 0;

const FIELDS: readonly EngineField[] = ["gx", "gy", "f"];

/** Copies what `from` remembers into `to`, at points whose memories are the same in both; the rest of `to` stays. */
export function carryMemories(from: PoleRow, to: PoleRow): void {
  for (const field of FIELDS) {
    const old = from.memories.filter(({ term }) => term.field === field);
    const now = to.memories.filter(({ term }) => term.field === field);
    if (old.length === 0 || now.length === 0) continue;
    const first = Math.min(...now.map((memory) => memory.term.firstColumn));
    const end = Math.max(...now.map(({ term }) => term.firstColumn + term.weights.length));
    for (let column = first; column < end; column += 1) {
      const acting = (memories: readonly TermMemory[]): TermMemory[] =>
        memories.filter(({ term }) => weightAt(term, column) !== 0);
      const [before, after] = [acting(old), acting(now)];
      const unchanged =
        before.length === after.length &&
        before.every(
          ({ term }, index) =>
            sameDynamics(term.dynamics, after[index].term.dynamics) &&
            weightAt(term, column) === weightAt(after[index].term, column),
        );
      if (!unchanged) continue;
      to.pending[field][column - to.first] = from.pending[field][column - from.first];
      before.forEach((memory, index) => {
        memory.states.forEach((values, n) => {
          after[index].states[n][column - after[index].first] = values[column - memory.first];
        });
      });
    }
  }
}

/** The memories of the reference engine, row by row. */
export class PoleMemory {
  private readonly rows: (PoleRow | null)[];

  constructor(
    rows: number,
    private readonly stride: number,
    private readonly makeArray: (size: number) => FieldArray,
  ) {
    this.rows = Array.from({ length: rows + 2 }, () => null);
  }

  /** All numbers that are kept, for snapshots. */
  get arrays(): FieldArray[] {
    return this.rows.flatMap((row) =>
      row
        ? [...FIELDS.map((field) => row.pending[field]), ...row.memories.flatMap(({ states }) => states)]
        : [],
    );
  }

  setRow(j: number, terms: readonly PoleTerm[]): void {
    const before = this.rows[j];
    this.rows[j] = null;
    if (terms.length === 0) return;
    const line = (): FieldArray => this.makeArray(this.stride);
    const row: PoleRow = {
      first: 0,
      pending: { gx: line(), gy: line(), f: line() },
      memories: terms.map((term) => ({
        term: { ...term, weights: term.weights.slice() },
        first: term.firstColumn,
        states: term.dynamics.feed.map(() => this.makeArray(term.weights.length)),
      })),
    };
    if (before) carryMemories(before, row);
    this.rows[j] = row;
  }

  /** After row j of a field has been stepped without its memories: adds what they answer. */
  correct(j: number, field: EngineField, fields: EngineFields): void {
    const row = this.rows[j];
    if (!row) return;
    const values = fields[field];
    const pending = row.pending[field];
    const base = j * this.stride;
    for (let i = 0; i < this.stride; i += 1) values[base + i] = values[base + i] + pending[i];
  }

  /** When row j is final for this step: the memories take it in, and what they will answer is summed. */
  advance(j: number, fields: EngineFields): void {
    const row = this.rows[j];
    if (!row) return;
    for (const field of FIELDS) row.pending[field].fill(0);
    for (const { term, states } of row.memories) {
      const { field, dynamics, firstColumn, weights } = term;
      const { order, step, feed } = dynamics;
      const values = fields[field];
      const pending = row.pending[field];
      const base = j * this.stride + firstColumn;
      const [first, second] = states;
      for (let n = 0; n < weights.length; n += 1) {
        const v = values[base + n];
        const [r0, r1] = [first[n], order === 2 ? second[n] : 0];
        const d0 = order === 2 ? step[0] * r0 + step[1] * r1 + feed[0] * v : step[0] * r0 + feed[0] * v;
        if (order === 2) second[n] = r1 + (step[2] * r0 + step[3] * r1 + feed[1] * v);
        first[n] = r0 + d0;
        pending[firstColumn + n] = pending[firstColumn + n] - weights[n] * d0;
      }
    }
  }
}
