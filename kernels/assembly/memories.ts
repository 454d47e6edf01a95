/**
 * Memories of a row's points. The loops of the runs step a row as if it had none; what they answer to the step before is known by
 * then and is added afterwards, and with a correction of gx and gy goes F's answer, which is linear in both:
 *
 *   F += bF·((δgy − δgy[left]) − δgx).   F of the row above comes later and feels the corrected gx.
 *
 * When the row is final, each memory takes in its field and leaves its answer for the next step:
 *
 *   ΔR = S·R + h·v,   R ← R + ΔR,   pending −= weight·ΔR₀.
 */
import {
  MEMORIES_B_F,
  MEMORIES_BYTES,
  MEMORIES_FROM,
  MEMORIES_HEADER_BYTES,
  MEMORIES_PENDING_F,
  MEMORIES_PENDING_GX,
  MEMORIES_PENDING_GY,
  MEMORIES_TERMS,
  TERM_BYTES,
  TERM_FEED,
  TERM_FIELD,
  TERM_FIRST,
  TERM_FROM,
  TERM_LENGTH,
  TERM_PENDING,
  TERM_SECOND,
  TERM_STEP,
  TERM_WEIGHTS,
  VECTOR_BYTES,
} from "../src/stepping/wasm/layout";

/** Adds what waits, and leaves zeros in its place. */
export function correctRow(memories: usize, f0: usize, gx0: usize, gy0: usize): void {
  const from = load<usize>(memories, MEMORIES_FROM);
  const bytes = load<usize>(memories, MEMORIES_BYTES);
  const pendingGx = load<usize>(memories, MEMORIES_PENDING_GX);
  const pendingGy = load<usize>(memories, MEMORIES_PENDING_GY);
  const pendingF = load<usize>(memories, MEMORIES_PENDING_F);
  const bF = load<usize>(memories, MEMORIES_B_F);
  const f = f0 + from;
  const gx = gx0 + from;
  const gy = gy0 + from;
  const zero = f32x4.splat(0);
  let left = zero;
  for (let at: usize = 0; at < bytes; at += VECTOR_BYTES) {
    const x = v128.load(pendingGx + at);
    const y = v128.load(pendingGy + at);
    const z = v128.load(pendingF + at);
    v128.store(pendingGx + at, zero);
    v128.store(pendingGy + at, zero);
    v128.store(pendingF + at, zero);
    v128.store(gx + at, f32x4.add(v128.load(gx + at), x));
    v128.store(gy + at, f32x4.add(v128.load(gy + at), y));
    const curl = f32x4.sub(f32x4.sub(y, v128.shuffle<f32>(left, y, 3, 4, 5, 6)), x);
    const answer = f32x4.add(f32x4.mul(v128.load(bF + at), curl), z);
    v128.store(f + at, f32x4.add(v128.load(f + at), answer));
    left = y;
  }
}

/** @param base bytes from a field's start to the row */
export function advanceMemories(memories: usize, base: usize): void {
  const terms = load<i32>(memories, MEMORIES_TERMS);
  for (let n = 0; n < terms; n++) {
    const term = memories + MEMORIES_HEADER_BYTES + n * TERM_BYTES;
    const v = load<usize>(load<usize>(term, TERM_FIELD)) + base + load<usize>(term, TERM_FROM);
    const pending = load<usize>(term, TERM_PENDING);
    const weights = load<usize>(term, TERM_WEIGHTS);
    const first = load<usize>(term, TERM_FIRST);
    const second = load<usize>(term, TERM_SECOND);
    const bytes = load<usize>(term, TERM_LENGTH);
    if (second == 0) one(v, pending, weights, first, bytes, term);
    else two(v, pending, weights, first, second, bytes, term);
  }
}

function one(v: usize, pending: usize, weights: usize, first: usize, bytes: usize, term: usize): void {
  const step = v128.load32_splat(term, TERM_STEP);
  const feed = v128.load32_splat(term, TERM_FEED);
  for (let at: usize = 0; at < bytes; at += VECTOR_BYTES) {
    const r = v128.load(first + at);
    const d = f32x4.add(f32x4.mul(step, r), f32x4.mul(feed, v128.load(v + at)));
    v128.store(first + at, f32x4.add(r, d));
    const answer = f32x4.mul(v128.load(weights + at), d);
    v128.store(pending + at, f32x4.sub(v128.load(pending + at), answer));
  }
}

function two(
  v: usize,
  pending: usize,
  weights: usize,
  first: usize,
  second: usize,
  bytes: usize,
  term: usize,
): void {
  const s00 = v128.load32_splat(term, TERM_STEP);
  const s01 = v128.load32_splat(term, TERM_STEP + 4);
  const s10 = v128.load32_splat(term, TERM_STEP + 8);
  const s11 = v128.load32_splat(term, TERM_STEP + 12);
  const feed0 = v128.load32_splat(term, TERM_FEED);
  const feed1 = v128.load32_splat(term, TERM_FEED + 4);
  for (let at: usize = 0; at < bytes; at += VECTOR_BYTES) {
    const value = v128.load(v + at);
    const r0 = v128.load(first + at);
    const r1 = v128.load(second + at);
    const d0 = f32x4.add(f32x4.add(f32x4.mul(s00, r0), f32x4.mul(s01, r1)), f32x4.mul(feed0, value));
    const d1 = f32x4.add(f32x4.add(f32x4.mul(s10, r0), f32x4.mul(s11, r1)), f32x4.mul(feed1, value));
    v128.store(first + at, f32x4.add(r0, d0));
    v128.store(second + at, f32x4.add(r1, d1));
    const answer = f32x4.mul(v128.load(weights + at), d0);
    v128.store(pending + at, f32x4.sub(v128.load(pending + at), answer));
  }
}
