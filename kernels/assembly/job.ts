/**
 * How threads share a job. The steps of a job are cut into blocks, each a wavefront of a few steps over all rows, and a thread
 * that is free claims the next block. Row j of step t needs row j + 1 of step t − 1 and row j − 1 of step t, nothing else: within
 * a block the steps follow each other one row apart, and a block follows the block before it by that block's progress. So
 * each number is computed by the same operations whoever computes it, and rows stay in a core's cache for a block's steps.
 */
import {
  DONE,
  ENERGY_FIRST_ROW,
  ENERGY_LAST_ROW,
  ENERGY_PART_ROWS,
  FLUSH_BYTES,
  FLUSH_LIMIT_F,
  FLUSHES,
  CACHE_LINE_BYTES,
  COMMAND,
  JOB,
  JOB_STEPS,
  LAST_ROW,
  LIMIT,
  NEXT,
  PROGRESS,
  QUIT,
  RECORDS,
  RECORD_BYTES,
  SIGNALS,
  SIGNAL_BYTES,
  SPINS,
  STEPS,
  WAITING,
} from "../src/stepping/wasm/layout";
import { rowEnergy } from "./energy";
import { flushRow } from "./flush";
import { stepRow } from "./row";

/** Nobody sleeps longer than this without a look, in ns: a guard, not a way to be woken. */
const NAP: i64 = 20_000_000;

/** Waits until the counter at `address` is at least `wanted`; gives what it is. */
function waitFor(address: usize, wanted: i32): i32 {
  const spins = load<i32>(SPINS);
  for (let look = 0; look < spins; look++) {
    const value = atomic.load<i32>(address);
    if (value >= wanted) return value;
  }
  let value: i32;
  while (true) {
    atomic.store<i32>(address + WAITING, 1);
    value = atomic.load<i32>(address);
    if (value >= wanted) break;
    atomic.wait<i32>(address, value, NAP);
  }
  atomic.store<i32>(address + WAITING, 0);
  return value;
}

function announce(address: usize, value: i32): void {
  atomic.store<i32>(address, value);
  if (atomic.load<i32>(address + WAITING) != 0) atomic.notify(address, 1);
}

/** Steps `first` … `last` − 1 over all rows as one wavefront. */
function stepBlock(block: i32, first: i32, last: i32): void {
  const lastRow = load<i32>(LAST_ROW);
  const signalBytes: usize = load<usize>(SIGNAL_BYTES);
  const recordBytes: usize = load<usize>(RECORD_BYTES);
  const signals = load<usize>(SIGNALS) + <usize>first * signalBytes;
  const records = load<usize>(RECORDS) + <usize>first * recordBytes;
  const plans = load<usize>(FLUSHES) + <usize>first * FLUSH_BYTES;
  const progress: usize = PROGRESS + block * CACHE_LINE_BYTES;
  const before: usize = progress - CACHE_LINE_BYTES;
  const count = last - first;
  let seen = block == 0 ? lastRow + 1 : 0;
  for (let wave = 0; wave < lastRow + count; wave++) {
    if (wave <= lastRow) {
      // Progress counts rows: row `wave` + 1 of the step before is done when it says `wave` + 2.
      const wanted = min(wave + 2, lastRow + 1);
      if (seen < wanted) seen = waitFor(before, wanted);
    }
    const from = max(0, wave - lastRow);
    const to = min(count - 1, wave);
    for (let step = from; step <= to; step++) {
      const row: usize = wave - step;
      stepRow(row, signals + <usize>step * signalBytes, records + <usize>step * recordBytes);
      const plan = plans + <usize>step * FLUSH_BYTES;
      if (load<f32>(plan, FLUSH_LIMIT_F) > 0) flushRow(row, plan);
    }
    if (wave >= count - 1) announce(progress, wave - count + 2);
  }
}

function energyPart(part: i32): void {
  const first = load<i32>(ENERGY_FIRST_ROW) + part * ENERGY_PART_ROWS;
  const last = min(load<i32>(ENERGY_LAST_ROW), first + ENERGY_PART_ROWS - 1);
  for (let row = first; row <= last; row++) rowEnergy(row);
  atomic.add<i32>(DONE, 1);
  if (atomic.load<i32>(DONE + WAITING) != 0) atomic.notify(DONE, 1);
}

/** Claims and does parts of the current job until none is left. */
function work(): void {
  for (;;) {
    const claim = atomic.add<i32>(NEXT, 1);
    const limit = atomic.load<i32>(LIMIT);
    const part = claim & 0xffff;
    const parts = limit & 0xffff;
    // A claim that a newer job has overtaken belongs to no job.
    if (claim >> 16 != limit >> 16 || part >= parts) return;
    if (atomic.load<i32>(JOB) == JOB_STEPS) {
      const steps = load<i32>(STEPS);
      stepBlock(part, (steps * part) / parts, (steps * (part + 1)) / parts);
    } else {
      energyPart(part);
    }
  }
}

/** A helper thread's whole life: sleeps on the command, works, returns when told to quit. */
export function serve(): void {
  let command = 0;
  for (;;) {
    const spins = load<i32>(SPINS);
    let now = atomic.load<i32>(COMMAND);
    for (let look = 0; look < spins && now == command; look++) now = atomic.load<i32>(COMMAND);
    if (now == command) {
      atomic.wait<i32>(COMMAND, command, -1);
      continue;
    }
    command = now;
    if (atomic.load<i32>(QUIT) != 0) return;
    work();
  }
}

/** Publishes the job whose parameters are written, takes part in it, and returns when all of it is done. */
export function run(epoch: i32, parts: i32): void {
  const steps = atomic.load<i32>(JOB) == JOB_STEPS;
  if (steps) {
    for (let part = 0; part < parts; part++) atomic.store<i32>(PROGRESS + part * CACHE_LINE_BYTES, 0);
  }
  atomic.store<i32>(DONE, 0);
  atomic.store<i32>(LIMIT, (epoch << 16) | parts);
  atomic.store<i32>(NEXT, epoch << 16);
  atomic.store<i32>(COMMAND, epoch);
  if (parts > 1) atomic.notify(COMMAND, -1);
  work();
  if (steps) waitFor(PROGRESS + (parts - 1) * CACHE_LINE_BYTES, load<i32>(LAST_ROW) + 1);
  else waitFor(DONE, parts);
}

/** Tells the helpers to return. */
export function quit(): void {
  atomic.store<i32>(QUIT, 1);
  atomic.add<i32>(COMMAND, 1);
  atomic.notify(COMMAND, -1);
}
