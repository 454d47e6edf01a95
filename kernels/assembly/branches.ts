/**
 * Branches: a resistor and an inductor in series between points of a row and the row before it. What a branch draws in a step is known
 * when the step before has ended; its arithmetic is that of the reference engine, in float64 but for the fields.
 */
import {
  BRANCHES_DRAWS,
  BRANCHES_DRAWS_END,
  BRANCHES_END,
  BRANCHES_FIRST,
  BRANCH_BYTES,
  BRANCH_CONDUCTANCE,
  BRANCH_DECAY,
  BRANCH_STATE,
  BRANCH_TOTAL,
  BRANCH_WEIGHTS,
  DRIVE_BYTES,
} from "../src/stepping/wasm/layout";

/** Currents of the four points, u of the step before, S. */
const BEFORE: usize = 32;
const MEMORY: usize = 64;
const POINTS: usize = 4;

/** Takes off the row's points what its branches draw. */
export function drawBranches(branches: usize): void {
  const end = load<usize>(branches, BRANCHES_DRAWS_END);
  for (let draw = load<usize>(branches, BRANCHES_DRAWS); draw < end; draw += DRIVE_BYTES) {
    const at = load<usize>(draw);
    const current = load<f64>(load<usize>(draw, 4));
    store<f32>(at, <f32>(<f64>load<f32>(at) - load<f64>(draw, 8) * current));
  }
}

/** When the row is final: the branches take in their voltages and settle what they draw in the next step. */
export function advanceBranches(branches: usize): void {
  const end = load<usize>(branches, BRANCHES_END);
  for (let branch = load<usize>(branches, BRANCHES_FIRST); branch < end; branch += BRANCH_BYTES) {
    const state = load<usize>(branch, BRANCH_STATE);
    const q = load<f64>(branch, BRANCH_CONDUCTANCE);
    const decay = load<f64>(branch, BRANCH_DECAY);
    const total = load<f64>(branch, BRANCH_TOTAL);
    let voltage: f64 = 0;
    for (let n: usize = 0; n < POINTS; n++) {
      const weight = load<f64>(branch + (n << 3), BRANCH_WEIGHTS);
      voltage += weight * <f64>load<f32>(load<usize>(branch + (n << 2)));
    }
    const before = load<f64>(state + MEMORY);
    const after = decay * before + q * (1 + decay) * voltage;
    store<f64>(state + MEMORY, after);
    for (let n: usize = 0; n < POINTS; n++) {
      const weight = load<f64>(branch + (n << 3), BRANCH_WEIGHTS);
      const v: f64 = load<f32>(load<usize>(branch + (n << 2)));
      const u = q * (Math.abs(weight) * total * v - weight * voltage);
      const last = state + BEFORE + (n << 3);
      store<f64>(state + (n << 3), weight * 0.5 * (after + before) - 0.5 * (u + load<f64>(last)));
      store<f64>(last, u);
    }
  }
}
