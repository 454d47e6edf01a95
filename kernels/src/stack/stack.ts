/**
 * Plane waves and layers: what a stack of layers and films reflects, passes and keeps, at any angle, in both polarizations.
 *
 * The tangential fields (E, H) at a face follow from those at the next face by the two waves in between, from the back of the stack to
 * its front; the growing wave's factor exp(jk_x d) is taken out and counted apart, so that only decaying exponentials
 * are computed and layers may be thick and lossy (L. M. Brekhovskikh, Waves in Layered Media, 2nd ed. 1980, §3; the recursion is
 * written out anew). Time factor exp(+jωt); a passive medium has Im k_x ≤ 0.
 */
import { EPS0, MU0 } from "../lattice/index.js";
import type { Complex, FillMedium } from "../scene/index.js";
import { AIR, complexPermeability, complexPermittivity } from "../scene/index.js";
import {
  add,
  complex,
  decayingRoot,
  divide,
  exponential,
  magnitude,
  multiply,
  scale,
  subtract,
} from "./complex.js";

export type StackElement =
  | { kind: "layer"; medium: FillMedium; thicknessMm: number }
  /** An infinitely thin resistive film. */
  | { kind: "film"; ohmsPerSquare: number };

export interface Stack {
  /** In the order in which the wave meets them. */
  elements: readonly StackElement[];
  /** What lies behind: a medium without end, or a perfect electric conductor. */
  backing: FillMedium | "metal";
  /** Where the wave comes from: lossless, without poles; default air. */
  front?: FillMedium;
}

export interface StackWave {
  /** TMz: E along z ("perpendicular"); TEz: H along z ("parallel"). */
  polarization: "TMz" | "TEz";
  /** From the normal, 0 to below 90. */
  angleDeg: number;
  frequencyGHz: number;
}

export interface StackResponse {
  /**
   * Ratios of the tangential electric field, as scattering parameters count: reflected at the front face, and at the exit face over
   * the incident at the front. Metal gives −1 and, behind it, null.
   */
  reflection: Complex;
  transmission: Complex | null;
  /** The same as ratios of the field along z: Ez (equal to the above) or Hz (metal +1). */
  fieldReflection: Complex;
  fieldTransmission: Complex | null;
  /** Shares of the incident power per area; they sum to 1. */
  reflected: number;
  transmitted: number;
  absorbed: number;
  /** Tangential E over tangential H at the front face, Ω. */
  surfaceImpedanceOhm: Complex;
}

/** Layers thinner than this phase are taken to first order: their two waves would cancel. */
const THIN = 1e-8;
const J = complex(0, 1);

interface Waves {
  /** Wave number across the layers, 1/m. */
  kx: Complex;
  /** Tangential H over tangential E of the forward wave, S. */
  admittance: Complex;
  /** E's and H's growth along −x for thin layers: dE = jk_x/Y·H dx, dH = jk_xY·E dx. */
  series: Complex;
  shunt: Complex;
}

/** ε/ε₀ and μ/μ₀ at f, with the constants of the solver. */
function properties(medium: FillMedium, frequencyGHz: number): { epsilon: Complex; mu: Complex } {
  const omega = 2e9 * Math.PI * frequencyGHz;
  const lossless = { ...medium, conductivity: 0, magneticLoss: 0 };
  const epsilon = complexPermittivity(lossless, frequencyGHz);
  const mu = complexPermeability(lossless, frequencyGHz);
  return {
    epsilon: subtract(epsilon, complex(0, medium.conductivity / (omega * EPS0))),
    mu: subtract(mu, complex(0, medium.magneticLoss / (omega * MU0))),
  };
}

/** @param ky2 square of the wave number along the layers over ω²ε₀μ₀ */
function wavesIn(medium: FillMedium, wave: StackWave, ky2: number): Waves {
  const omega = 2e9 * Math.PI * wave.frequencyGHz;
  const { epsilon, mu } = properties(medium, wave.frequencyGHz);
  const square = subtract(multiply(epsilon, mu), complex(ky2));
  const kx = scale(decayingRoot(square), omega * Math.sqrt(EPS0 * MU0));
  const electric = scale(epsilon, omega * EPS0);
  const magnetic = scale(mu, omega * MU0);
  const kx2 = multiply(kx, kx);
  return wave.polarization === "TMz"
    ? { kx, admittance: divide(kx, magnetic), series: magnetic, shunt: divide(kx2, magnetic) }
    : { kx, admittance: divide(electric, kx), series: divide(kx2, electric), shunt: electric };
}

interface Faces {
  e: Complex;
  h: Complex;
  /** What was taken out: the true fields are exp(out) times these. */
  out: Complex;
}

function throughLayer(faces: Faces, waves: Waves, thickness: number): Faces {
  const { e, h, out } = faces;
  const phase = scale(waves.kx, thickness);
  if (magnitude(phase) < THIN) {
    const step = scale(J, thickness);
    return {
      e: add(e, multiply(multiply(step, waves.series), h)),
      h: add(h, multiply(multiply(step, waves.shunt), e)),
      out,
    };
  }
  const y = waves.admittance;
  const forward = scale(add(e, divide(h, y)), 0.5);
  const backward = scale(subtract(e, divide(h, y)), 0.5);
  // Both over exp(jk_x d): the backward wave has fallen by exp(−2jk_x d).
  const returned = multiply(backward, exponential(multiply(J, scale(phase, -2))));
  return {
    e: add(forward, returned),
    h: multiply(y, subtract(forward, returned)),
    out: add(out, multiply(J, phase)),
  };
}

/** The reason why a stack or a wave cannot be computed, as a sentence; null where it can. */
function refusal(stack: Stack, wave: StackWave): string | null {
  if (!(wave.angleDeg >= 0 && wave.angleDeg < 90))
    return `The angle from the normal is ${String(wave.angleDeg)}°; give 0 to below 90.`;
  if (!(wave.frequencyGHz > 0 && Number.isFinite(wave.frequencyGHz)))
    return `The frequency is ${String(wave.frequencyGHz)} GHz; give one above 0.`;
  const { front } = stack;
  if (
    front &&
    (front.conductivity > 0 ||
      front.magneticLoss > 0 ||
      front.electricPoles.length > 0 ||
      front.magneticPoles.length > 0)
  )
    return `The wave comes from "${front.id}", which is lossy or dispersive; an angle of incidence needs a lossless medium.`;
  for (const [index, element] of stack.elements.entries()) {
    if (element.kind === "layer" && !(element.thicknessMm >= 0 && Number.isFinite(element.thicknessMm)))
      return `Layer ${String(index + 1)} is ${String(element.thicknessMm)} mm thick; give a thickness of 0 or more.`;
    if (element.kind === "film" && !(element.ohmsPerSquare > 0))
      return `Film ${String(index + 1)} has ${String(element.ohmsPerSquare)} Ω per square; give a value above 0.`;
  }
  return null;
}

/** What a stack does to a plane wave. Throws a RangeError with a sentence where a value is out of range. */
export function stackResponse(stack: Stack, wave: StackWave): StackResponse {
  const why = refusal(stack, wave);
  if (why !== null) throw new RangeError(why);
  const front = stack.front ?? AIR;
  const sine = Math.sin((wave.angleDeg * Math.PI) / 180);
  const ky2 = front.relativePermittivity * front.relativePermeability * sine * sine;
  const before = wavesIn(front, wave, ky2);
  const behind = stack.backing === "metal" ? null : wavesIn(stack.backing, wave, ky2);
  let faces: Faces = behind
    ? { e: complex(1), h: behind.admittance, out: complex(0) }
    : { e: complex(0), h: complex(1), out: complex(0) };
  for (const element of [...stack.elements].reverse()) {
    if (element.kind === "layer")
      faces = throughLayer(faces, wavesIn(element.medium, wave, ky2), element.thicknessMm * 1e-3);
    else faces = { ...faces, h: add(faces.h, scale(faces.e, 1 / element.ohmsPerSquare)) };
  }
  const incoming = scale(add(faces.e, divide(faces.h, before.admittance)), 0.5);
  const outgoing = scale(subtract(faces.e, divide(faces.h, before.admittance)), 0.5);
  const reflection = divide(outgoing, incoming);
  const parallel = wave.polarization === "TEz";
  const transmission = behind ? divide(exponential(scale(faces.out, -1)), incoming) : null;
  const ratio = behind ? divide(behind.admittance, before.admittance) : complex(0);
  const reflected = magnitude(reflection) ** 2;
  const transmitted =
    transmission && behind ? (magnitude(transmission) ** 2 * behind.admittance.re) / before.admittance.re : 0;
  return {
    reflection,
    transmission,
    fieldReflection: parallel ? scale(reflection, -1) : reflection,
    fieldTransmission: transmission && parallel ? multiply(transmission, ratio) : transmission,
    reflected,
    transmitted,
    absorbed: 1 - reflected - transmitted,
    surfaceImpedanceOhm: divide(faces.e, faces.h),
  };
}
