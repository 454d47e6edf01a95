/**
 * Q of a mode by perturbation: the fields of the lossless mode, and what walls and media take from them per cycle
 * (J. C. Slater, Rev. Mod. Phys. 18 (1946) 441; D. M. Pozar, Microwave Engineering, 4th ed. 2012, §6.1–6.3).
 *
 * With W = ¼∫μ|H|² = ¼∫ε|E|², Q = 2ωW/P; walls take P = ½R_s∮|H_t|²dl with R_s = √(ωμ₀/2σ), media
 * P = ½∫σ|E|² + ½∫σ*|H|², films ½∮|E_t|²/R dl. Good while Q is well above 1; see
 * `damped` for media that change the mode itself.
 */
import { EPS0, MU0 } from "../lattice/index.js";
import { elementMatrix, ELEMENT_NUMBERS } from "./algebra/quadratic.js";
import { ELECTRIC } from "./mesh/section-mesh.js";
import type { ElementSpace } from "./space.js";

const NODES = 6;
/** Two points carry the square of a linear function over a side exactly (Gauss and Legendre). */
const GAUSS = [0.5 - Math.sqrt(1 / 12), 0.5 + Math.sqrt(1 / 12)];
/** Metres in a millimetre. */
const MM = 1e-3;

export interface ModeLosses {
  /** null: no wall conductivity, no electric wall, or (TM) a thin wall with a free end, where the integral diverges. */
  wallQ: number | null;
  /** null: nothing in the section has σ, σ* or is a film. */
  mediaQ: number | null;
}

function localValues(space: ElementSpace, vector: Float64Array, element: number, out: Float64Array): void {
  for (let k = 0; k < NODES; k += 1) {
    const dof = space.dofs[NODES * element + k];
    out[k] = dof < 0 ? 0 : vector[dof];
  }
}

/** Derivative of F along the outward normal (1/mm) at a share of side k. */
function normalDerivative(
  space: ElementSpace,
  element: number,
  k: number,
  u: Float64Array,
  at: number,
): number {
  const { coordinates: xy, corners } = space.mesh;
  const place = [0, 1, 2].map((n) => corners[3 * element + n]);
  const x = place.map((vertex) => xy[2 * vertex]);
  const y = place.map((vertex) => xy[2 * vertex + 1]);
  const twice = (x[1] - x[0]) * (y[2] - y[0]) - (x[2] - x[0]) * (y[1] - y[0]);
  const l = [0, 0, 0];
  const next = (k + 1) % 3;
  l[k] = 1 - at;
  l[next] = at;
  let gx = 0;
  let gy = 0;
  for (let n = 0; n < 3; n += 1) {
    const p = (n + 1) % 3;
    const q = (n + 2) % 3;
    const lx = (y[p] - y[q]) / twice;
    const ly = (x[q] - x[p]) / twice;
    // dF/dL_n from the corner's own function and from the middles of its two sides.
    const weight = u[n] * (4 * l[n] - 1) + 4 * u[3 + n] * l[p] + 4 * u[3 + q] * l[q];
    gx += weight * lx;
    gy += weight * ly;
  }
  const dx = x[next] - x[k];
  const dy = y[next] - y[k];
  return (gx * dy - gy * dx) / Math.hypot(dx, dy);
}

/** ∫|F|² dl (mm) and ∫|∂F/∂n|² dl (1/mm) along side k. */
function sideIntegrals(
  space: ElementSpace,
  element: number,
  k: number,
  u: Float64Array,
): { value: number; slope: number } {
  const { coordinates: xy, corners } = space.mesh;
  const a = corners[3 * element + k];
  const b = corners[3 * element + ((k + 1) % 3)];
  const length = Math.hypot(xy[2 * b] - xy[2 * a], xy[2 * b + 1] - xy[2 * a + 1]);
  const p = u[k];
  const q = u[(k + 1) % 3];
  const m = u[3 + k];
  // ∫ of the square of the parabola through p, m, q.
  const value = (length / 30) * (4 * p * p + 4 * q * q + 16 * m * m + 4 * p * m + 4 * q * m - 2 * p * q);
  let slope = 0;
  for (const at of GAUSS) slope += (length / 2) * normalDerivative(space, element, k, u, at) ** 2;
  return { value, slope };
}

/** ∫F² (mm²) and ∫|∇F|² over an element. */
function areaIntegrals(
  space: ElementSpace,
  element: number,
  u: Float64Array,
  matrix: Float64Array,
): { value: number; slope: number } {
  const { mesh, numbers, polarization } = space;
  const fill = mesh.drawing.media[mesh.medium[element]];
  if (fill.kind !== "fill") return { value: 0, slope: 0 };
  const stiffness = polarization === "TMz" ? 1 / fill.mu : 1 / fill.epsilon;
  const mass = polarization === "TMz" ? fill.epsilon : fill.mu;
  const quadratic = (): number => {
    let sum = 0;
    for (let i = 0; i < NODES; i += 1)
      for (let j = 0; j < NODES; j += 1) sum += u[i] * matrix[NODES * i + j] * u[j];
    return sum;
  };
  elementMatrix(numbers, ELEMENT_NUMBERS * element, 0, 1 / mass, matrix);
  const value = quadratic();
  elementMatrix(numbers, ELEMENT_NUMBERS * element, 1 / stiffness, 0, matrix);
  return { value, slope: quadratic() };
}

/**
 * Q of walls and of media of one mode.
 *
 * @param vector F with ∫εF² (TM) or ∫μF² (TE) equal to 1 mm², relative ε and μ
 * @param omega 2π times its frequency, in 1/s
 * @param wallConductivity S/m; undefined: walls without loss
 */
export function modeLosses(
  space: ElementSpace,
  vector: Float64Array,
  omega: number,
  wallConductivity: number | undefined,
): ModeLosses {
  const { mesh, polarization } = space;
  const electric = polarization === "TMz";
  const u = new Float64Array(NODES);
  const matrix = new Float64Array(NODES * NODES);
  // ½|other field|² = ½(∂F/∂n)²/(ω·storage)²: of H from Ez (storage μ), of E from Hz (storage ε).
  let walls = 0;
  let media = 0;
  for (let e = 0; e < mesh.count; e += 1) {
    const fill = mesh.drawing.media[mesh.medium[e]];
    if (fill.kind !== "fill") continue;
    const storage = omega * (electric ? MU0 * fill.mu : EPS0 * fill.epsilon);
    const lossOfF = electric ? fill.sigma : fill.sigmaStar;
    const lossOfOther = electric ? fill.sigmaStar : fill.sigma;
    localValues(space, vector, e, u);
    if (lossOfF > 0 || lossOfOther > 0) {
      const { value, slope } = areaIntegrals(space, e, u, matrix);
      media += 0.5 * lossOfF * value * MM * MM + (0.5 * lossOfOther * slope) / storage ** 2;
    }
    for (let side = 0; side < 3; side += 1) {
      const s = 3 * e + side;
      const film = mesh.films[s];
      if (mesh.walls[s] !== ELECTRIC && film === 0) continue;
      const { value, slope } = sideIntegrals(space, e, side, u);
      if (mesh.walls[s] === ELECTRIC)
        walls += electric ? (0.5 * slope) / MM / storage ** 2 : 0.5 * value * MM;
      // A film inside belongs to two elements, each with half; one on a wall is shorted there.
      else media += (electric ? 0.25 * value * MM : (0.25 * slope) / MM / storage ** 2) / film;
    }
  }
  const stored = 0.25 * (electric ? EPS0 : MU0) * MM * MM;
  const q = (power: number): number | null => (power > 0 ? (2 * omega * stored) / power : null);
  const surface = wallConductivity === undefined ? 0 : Math.sqrt((omega * MU0) / (2 * wallConductivity));
  const diverges = electric && mesh.freeWallEnds;
  return { wallQ: diverges ? null : q(surface * walls), mediaQ: q(media) };
}
