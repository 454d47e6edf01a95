/**
 * Update coefficients of a storage with loss, semi-implicit in the loss (A. Taflove and S. C. Hagness, Computational
 * Electrodynamics, 3rd ed. (2005), ch. 3; from memory):
 *
 *   v ← a·v + b·(circulation),   a = (1 − s)/(1 + s),   b = (Δt/M)/(1 + s),   s = loss·Δt/(2·storage),
 *
 * with M the storage times area over length² of the field point. This form is kept for every s. It is the trapezoidal rule,
 * stable for all s > 0, and at angular frequency ω it acts as the loss σ·cos(ωΔt/2), independent of s: second order also
 * in a medium with s ≫ 1, where the exponential form would turn the phase of σ by ωΔt/2. Only a field that is already there
 * when such a loss appears would ring at the step rate; a live edit clears it (see `solving`).
 *
 * The two numbers keep everything: M/Δt = (1 + a)/(2b) and loss = (1 − a)/b, which energy and loss density use.
 */
import type { Pair } from "./properties.js";

export interface Update {
  a: number;
  b: number;
}

/** A field that stays zero: on a perfect conductor or wall. */
export const FIXED: Update = { a: 0, b: 0 };

/**
 * @param geometry 1/M over 1/storage: length² over area of the field point (1/(Δx·Δy) for F, Δx/Δy for gx, Δy/Δx for gy)
 */
export function updateOf(pair: Pair, dt: number, geometry: number): Update {
  const s = (pair.loss * dt) / (2 * pair.storage);
  return { a: (1 - s) / (1 + s), b: ((dt / pair.storage) * geometry) / (1 + s) };
}

/** ½·M of a field point from its coefficients: energy is this times v². Zero on a conductor. */
export const halfStorage = (a: number, b: number, dt: number): number =>
  b === 0 ? 0 : (dt * (1 + a)) / (4 * b);

/** Loss of a field point from its coefficients: dissipated power is this times v². Zero on a conductor. */
export const lossOf = (a: number, b: number): number => (b === 0 ? 0 : (1 - a) / b);

/** The update with `factor` times the storage, and times the loss too where that is meant. */
export function scaledStorage({ a, b }: Update, factor: number, withLoss: boolean): Update {
  if (withLoss) return { a, b: b / factor };
  // In units of Δt/2: M = (1 + a)/b and loss = (1 − a)/b.
  const storage = ((1 + a) / b) * factor;
  const loss = (1 - a) / b;
  return { a: (storage - loss) / (storage + loss), b: 2 / (storage + loss) };
}

/** The update with a loss added, in units of (1 − a)/b. */
export function addedLoss({ a, b }: Update, added: number): Update {
  const storage = (1 + a) / b;
  const loss = (1 - a) / b + added;
  return { a: (storage - loss) / (storage + loss), b: 2 / (storage + loss) };
}
