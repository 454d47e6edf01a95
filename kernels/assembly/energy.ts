/**
 * Stored energy of one row: Σ ½M·v² over the section's columns, with ½M = Δt(1 + a)/(4b), zero where b is. One sum for each row
 * is kept, so that the whole does not depend on who computed which row.
 */
import {
  ENERGY_FIRST_COLUMN,
  ENERGY_FIRST_ROW,
  ENERGY_LAST_COLUMN,
  ENERGY_SUMS,
  ENTRY_BYTES,
  ENTRY_RUNS,
  ENTRY_RUNS_END,
  FIELD_F,
  FIELD_GX,
  FIELD_GY,
  QUARTER_STEP,
  ROW_BYTES,
  RUN_BYTES,
  RUN_FROM,
  RUN_HEADER_BYTES,
  RUN_KIND,
  RUN_VARIED,
  RUN_ZERO,
  TABLE,
  VARIED_BYTES,
  VECTOR_BYTES,
} from "../src/stepping/wasm/layout";
import { numbersBytes } from "./row";

function storage(a: f32, b: f32): f64 {
  return b == 0 ? 0 : (load<f64>(QUARTER_STEP) * (1 + <f64>a)) / <f64>b;
}

/** Σ v² of the columns from … end, in bytes of the row. */
function squares(field: usize, from: usize, end: usize): f64 {
  let at = from;
  let sum: f64 = 0;
  for (; at < end && (at & (VECTOR_BYTES - 1)) != 0; at += 4) {
    const value: f64 = load<f32>(field + at);
    sum += value * value;
  }
  // Four sums side by side, for an addition must wait for the one before it.
  let s0 = f64x2.splat(0);
  let s1 = s0;
  let s2 = s0;
  let s3 = s0;
  for (; at + 2 * VECTOR_BYTES <= end; at += 2 * VECTOR_BYTES) {
    const first = v128.load(field + at);
    const second = v128.load(field + at, VECTOR_BYTES);
    const v0 = f64x2.promote_low_f32x4(first);
    const v1 = f64x2.promote_low_f32x4(v128.shuffle<i64>(first, first, 1, 0));
    const v2 = f64x2.promote_low_f32x4(second);
    const v3 = f64x2.promote_low_f32x4(v128.shuffle<i64>(second, second, 1, 0));
    s0 = f64x2.add(s0, f64x2.mul(v0, v0));
    s1 = f64x2.add(s1, f64x2.mul(v1, v1));
    s2 = f64x2.add(s2, f64x2.mul(v2, v2));
    s3 = f64x2.add(s3, f64x2.mul(v3, v3));
  }
  const both = f64x2.add(f64x2.add(s0, s1), f64x2.add(s2, s3));
  sum += f64x2.extract_lane(both, 0) + f64x2.extract_lane(both, 1);
  for (; at < end; at += 4) {
    const value: f64 = load<f32>(field + at);
    sum += value * value;
  }
  return sum;
}

/** One column of a run of varied coefficients, `at` bytes from the run's first. */
function varied(numbers: usize, at: usize, f: f32, gx: f32, gy: f32): f64 {
  const vector = numbers + (at >> 4) * VARIED_BYTES + (at & (VECTOR_BYTES - 1));
  const x: f64 = gx;
  const y: f64 = gy;
  const v: f64 = f;
  return (
    storage(load<f32>(vector), load<f32>(vector, 16)) * x * x +
    storage(load<f32>(vector, 32), load<f32>(vector, 48)) * y * y +
    storage(load<f32>(vector, 64), load<f32>(vector, 80)) * v * v
  );
}

export function rowEnergy(row: i32): void {
  const base = <usize>row * load<usize>(ROW_BYTES);
  const f = load<usize>(FIELD_F) + base;
  const gx = load<usize>(FIELD_GX) + base;
  const gy = load<usize>(FIELD_GY) + base;
  const first: usize = load<usize>(ENERGY_FIRST_COLUMN) << 2;
  const last: usize = (load<usize>(ENERGY_LAST_COLUMN) + 1) << 2;
  const entry: usize = load<usize>(TABLE) + row * ENTRY_BYTES;
  const runsEnd: usize = load<usize>(entry, ENTRY_RUNS_END);
  let run: usize = load<usize>(entry, ENTRY_RUNS);
  let sum: f64 = 0;
  while (run < runsEnd) {
    const kind = load<i32>(run, RUN_KIND);
    const begin: usize = load<usize>(run, RUN_FROM);
    const bytes: usize = load<usize>(run, RUN_BYTES);
    const numbers = run + RUN_HEADER_BYTES;
    const from = max(first, begin);
    const end = min(last, begin + bytes);
    if (from < end && (kind & 3) == RUN_VARIED) {
      for (let at = from; at < end; at += 4) {
        sum += varied(numbers, at - begin, load<f32>(f + at), load<f32>(gx + at), load<f32>(gy + at));
      }
    } else if (from < end && (kind & 3) != RUN_ZERO) {
      sum += storage(load<f32>(numbers), load<f32>(numbers, 4)) * squares(gx, from, end);
      sum += storage(load<f32>(numbers, 8), load<f32>(numbers, 12)) * squares(gy, from, end);
      sum += storage(load<f32>(numbers, 16), load<f32>(numbers, 20)) * squares(f, from, end);
    }
    run = numbers + numbersBytes(kind, bytes);
  }
  store<f64>(load<usize>(ENERGY_SUMS) + ((row - load<i32>(ENERGY_FIRST_ROW)) << 3), sum);
}
