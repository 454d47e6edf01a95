/**
 * Debye and Lorentz poles as memories of a field point (see `PoleTerm` in `stepping`).
 *
 * A pole adds ε₀·dP/dt to the current, where P follows the point's field v by
 *
 *   Debye    τ dP/dt + P = Δ·v                         P = x
 *   Lorentz  d²P/dt² + δ dP/dt + ω₀²P = Δω₀²·v         P = x₀,  dx₀/dt = ω₀x₁,  dx₁/dt = −ω₀x₀ − δx₁ + Δω₀v
 *
 * that is dx/dt = A·x + B·v. The trapezoidal rule gives x⁺ = K·x + g·(v⁺ + v) with K = (1 − AΔt/2)⁻¹(1 + AΔt/2) and g = (1 − AΔt/2)⁻¹BΔt/2.
 * With x = R + g·v no old field is needed:
 *
 *   R⁺ = K·R + h·v,  h = (K + 1)·g,      P⁺ − P = (R₀⁺ − R₀) + g₀·(v⁺ − v).
 *
 * The second part is a storage ε₀g₀, which goes into the update's a and b beside ε; the first is known before the step and takes
 * (ε₀/(ε + ε₀g₀ + σΔt/2))·(R₀⁺ − R₀) off v. The rule maps the right half-plane of s onto the outside of the unit circle, so that what is
 * passive stays passive, and with ε ≥ ε₀ the step's limit is that of vacuum.
 *
 * Trapezoidal frequencies are (2/Δt)·tan(ωΔt/2). So that a pole p lies where it should, it is given as (2/Δt)·tanh(pΔt/2), which keeps
 * ω₀² > 0 and δ ≥ 0; Δ stays, and with it the static value. Poles with |p|Δt > 1, far above every band, are taken as they stand.
 *
 * Derived here; the trapezoidal treatment of dispersive media is that of C. Hulse and A. Knoesen, J. Opt. Soc. Am. A 11 (1994) 1802 (from memory).
 */
import type { Pole } from "../scene/schema-media.js";
import type { PoleDynamics } from "../stepping/index.js";

export interface PoleModel {
  pole: Pole;
  dynamics: PoleDynamics;
  /** g₀: what the pole adds at once to the relative permittivity or permeability. */
  instant: number;
}

/** Poles with |p|Δt beyond this are not moved. */
const MOVED_BELOW = 1;

function debyeModel(pole: Extract<Pole, { kind: "debye" }>, dt: number): PoleModel {
  const rate = dt / (pole.tauNs * 1e-9);
  // pΔt/2 of the pole as it is given to the rule.
  const half = rate < MOVED_BELOW ? Math.tanh(rate / 2) : rate / 2;
  const instant = (pole.delta * half) / (1 + half);
  const step = (-2 * half) / (1 + half);
  return { pole, instant, dynamics: { order: 1, step: [step], feed: [(step + 2) * instant] } };
}

/** (ω₀Δt/2)² and δΔt/2 of a resonance as it is given to the rule. */
function halvesOf(resonance: number, damping: number, dt: number): { square: number; loss: number } {
  const w = (resonance * dt) / 2;
  const d = (damping * dt) / 4;
  const root = d * d - w * w;
  // The poles are d ± √(d² − w²), in units of 2/Δt; the larger magnitude decides.
  const largest = root > 0 ? d + Math.sqrt(root) : w;
  if (2 * largest >= MOVED_BELOW) return { square: w * w, loss: 2 * d };
  if (root > 0) {
    const slow = Math.tanh((w * w) / largest);
    const fast = Math.tanh(largest);
    return { square: slow * fast, loss: slow + fast };
  }
  // tanh(d ± jb) = (sinh 2d ± j sin 2b)/(cosh 2d + cos 2b).
  const b = Math.sqrt(-root);
  const scale = Math.cosh(2 * d) + Math.cos(2 * b);
  const re = Math.sinh(2 * d) / scale;
  const im = Math.sin(2 * b) / scale;
  return { square: re * re + im * im, loss: 2 * re };
}

function lorentzModel(pole: Extract<Pole, { kind: "lorentz" }>, dt: number): PoleModel {
  const { square, loss } = halvesOf(2e9 * Math.PI * pole.resonanceGHz, 2e9 * Math.PI * pole.dampingGHz, dt);
  const x = Math.sqrt(square);
  const determinant = 1 + loss + square;
  // 1 − AΔt/2 = [[1, −x], [x, 1 + loss]].
  const g0 = (pole.delta * square) / determinant;
  const g1 = (pole.delta * x) / determinant;
  const [s00, s01] = [(-2 * square) / determinant, (2 * x) / determinant];
  const [s10, s11] = [(-2 * x) / determinant, (-2 * (square + loss)) / determinant];
  const feed = [(s00 + 2) * g0 + s01 * g1, s10 * g0 + (s11 + 2) * g1];
  return { pole, instant: g0, dynamics: { order: 2, step: [s00, s01, s10, s11], feed } };
}

/** @param dt s */
export const poleModel = (pole: Pole, dt: number): PoleModel =>
  pole.kind === "debye" ? debyeModel(pole, dt) : lorentzModel(pole, dt);
