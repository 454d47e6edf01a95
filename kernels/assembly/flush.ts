/**
 * Sets numbers to zero that are too small to matter. Ahead of every wave front, and deep in what absorbs, fields fall through the
 * numbers that a processor handles a hundred times more slowly (below 1.2e-38); the limit lies far enough above that the
 * steps until the next flush do not get there.
 */
import {
  ENTRY_BYTES,
  ENTRY_MEMORIES,
  ENTRY_PSI_FX,
  ENTRY_PSI_FY,
  ENTRY_PSI_GX,
  ENTRY_PSI_GY,
  FIELD_F,
  FIELD_GX,
  FIELD_GY,
  FLUSH_LIMIT_F,
  FLUSH_LIMIT_GX,
  FLUSH_LIMIT_GY,
  MEMORIES_BYTES,
  MEMORIES_HEADER_BYTES,
  MEMORIES_PENDING_F,
  MEMORIES_PENDING_GX,
  MEMORIES_PENDING_GY,
  MEMORIES_TERMS,
  ROW_BYTES,
  STRIP_BYTES,
  TABLE,
  TERM_BYTES,
  TERM_FIELD,
  TERM_FIRST,
  TERM_LENGTH,
  TERM_SECOND,
  VECTOR_BYTES,
} from "../src/stepping/wasm/layout";

function flush(from: usize, bytes: usize, limit: f32): void {
  const limits = f32x4.splat(limit);
  for (let at = from; at < from + bytes; at += VECTOR_BYTES) {
    const values = v128.load(at);
    // What is not a number is not smaller than anything, and stays.
    v128.store(at, v128.andnot(values, f32x4.lt(f32x4.abs(values), limits)));
  }
}

/** Memories have the unit of the field that feeds them. */
function flushMemories(memories: usize, limitF: f32, limitGx: f32, limitGy: f32): void {
  const span = load<usize>(memories, MEMORIES_BYTES);
  flush(load<usize>(memories, MEMORIES_PENDING_GX), span, limitGx);
  flush(load<usize>(memories, MEMORIES_PENDING_GY), span, limitGy);
  flush(load<usize>(memories, MEMORIES_PENDING_F), span, limitF);
  const terms = load<i32>(memories, MEMORIES_TERMS);
  for (let n = 0; n < terms; n++) {
    const term = memories + MEMORIES_HEADER_BYTES + n * TERM_BYTES;
    const field = load<usize>(term, TERM_FIELD);
    const limit = field == FIELD_F ? limitF : field == FIELD_GX ? limitGx : limitGy;
    flush(load<usize>(term, TERM_FIRST), load<usize>(term, TERM_LENGTH), limit);
    const second = load<usize>(term, TERM_SECOND);
    if (second != 0) flush(second, load<usize>(term, TERM_LENGTH), limit);
  }
}

/** Row j after a step, by the step's plan. */
export function flushRow(row: usize, plan: usize): void {
  const bytes = load<usize>(ROW_BYTES);
  const base = row * bytes;
  const entry = load<usize>(TABLE) + row * ENTRY_BYTES;
  const strip = load<usize>(STRIP_BYTES);
  const limitF = load<f32>(plan, FLUSH_LIMIT_F);
  const limitGx = load<f32>(plan, FLUSH_LIMIT_GX);
  const limitGy = load<f32>(plan, FLUSH_LIMIT_GY);
  flush(load<usize>(FIELD_F) + base, bytes, limitF);
  flush(load<usize>(FIELD_GX) + base, bytes, limitGx);
  flush(load<usize>(FIELD_GY) + base, bytes, limitGy);
  // The layers' memory has the unit of the difference that it follows.
  flush(load<usize>(entry, ENTRY_PSI_GY), strip, limitF);
  flush(load<usize>(entry, ENTRY_PSI_FX), strip, limitGy);
  if (load<usize>(entry, ENTRY_PSI_GX) != 0) {
    flush(load<usize>(entry, ENTRY_PSI_GX), bytes, limitF);
    flush(load<usize>(entry, ENTRY_PSI_FY), bytes, limitGx);
  }
  const memories = load<usize>(entry, ENTRY_MEMORIES);
  if (memories != 0) flushMemories(memories, limitF, limitGx, limitGy);
}
