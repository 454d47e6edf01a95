/**
 * What an absorbing edge reflects, computed from the layer's own coefficients: the exact discrete reflection of a plane wave
 * in the lattice, without a run.
 *
 * For one frequency, z = exp(jωΔt), the layer's recursion acts as the factor S = 1/κ + gain/(1 − decay/z) on each difference
 * along its normal, and a wave exp(−jk_t·t) along the layer gives the tangential second difference −4sin²(k_tΔ_t/2). The step
 * equations then become one three-term recurrence along the normal. It is started at the perfect conductor behind the layer,
 * run out into the section and split into the incoming and the outgoing lattice wave.
 */
import type { Lattice, Side } from "../lattice/index.js";
import { C0, latticeWaveNumber } from "../lattice/index.js";
import type { AbsorbingLayers, AxisStretch } from "./cpml.js";

type Complex = readonly [number, number];

const add = (a: Complex, b: Complex): Complex => [a[0] + b[0], a[1] + b[1]];
const subtract = (a: Complex, b: Complex): Complex => [a[0] - b[0], a[1] - b[1]];
const multiply = (a: Complex, b: Complex): Complex => [a[0] * b[0] - a[1] * b[1], a[0] * b[1] + a[1] * b[0]];
const divide = (a: Complex, b: Complex): Complex => {
  const norm = b[0] * b[0] + b[1] * b[1];
  return [(a[0] * b[0] + a[1] * b[1]) / norm, (a[1] * b[0] - a[0] * b[1]) / norm];
};

export interface ReflectionQuery {
  side: Side;
  hz: number;
  /** Angle of incidence from the layer's normal, in degrees, 0 ≤ angle < 90. */
  degrees: number;
  /** Refractive index of the lossless medium; 1 for air. */
  index?: number;
}

/** S of one point of the layer at z = exp(jωΔt). */
function stretchFactor(stretch: AxisStretch, i: number, omegaDt: number): Complex {
  const oneOverZ: Complex = [Math.cos(omegaDt), -Math.sin(omegaDt)];
  const memory = divide([stretch.gain[i], 0], subtract([1, 0], multiply([stretch.decay[i], 0], oneOverZ)));
  return [1 + stretch.stretch[i] + memory[0], memory[1]];
}

/** |reflected/incident| of F in dB; NaN where the lattice carries no wave of this frequency in this direction. */
export function layerReflectionDb(lattice: Lattice, layers: AbsorbingLayers, query: ReflectionQuery): number {
  const { side, hz, degrees, index = 1 } = query;
  const alongX = side === "left" || side === "right";
  const count = alongX ? lattice.columns : lattice.rows;
  const normal = alongX ? lattice.dx : lattice.dy;
  const tangential = alongX ? lattice.dy : lattice.dx;
  const speed = C0 / index;
  const omega = 2 * Math.PI * hz;
  const radians = (degrees * Math.PI) / 180;
  const k = latticeWaveNumber(lattice, speed, omega, alongX ? radians : Math.PI / 2 - radians);
  const kNormal = k * Math.cos(radians);
  const kTangential = k * Math.sin(radians);
  // With i counted outward from the section, half points lie beyond their point of F on the upper sides, before it on the lower.
  const upper = side === "right" || side === "top";
  const pointF = (n: number): number => (upper ? count - n : 1 + n);
  const halfG = (n: number): number => (upper ? count - n - 1 : 1 + n);
  const f = alongX ? layers.columnsF : layers.rowsF;
  const g = alongX ? layers.columnsG : layers.rowsG;
  const omegaDt = omega * lattice.dt;
  const thickness = lattice.layers[side];

  // (2j sin(ωΔt/2))² F = r_n·S'δ(SδF) − r_t·4sin²(k_tΔ_t/2)·F with r = (cΔt/Δ)².
  const rn = ((speed * lattice.dt) / normal) ** 2;
  const rt = ((speed * lattice.dt) / tangential) ** 2;
  const eigenvalue =
    (rt * 4 * Math.sin((kTangential * tangential) / 2) ** 2 - 4 * Math.sin(omegaDt / 2) ** 2) / rn;

  // n = 0 is the outermost point of F: zero itself (TMz), or with zero G beyond it (TEz).
  const onNodes = lattice.polarization === "TMz";
  let outer: Complex = onNodes ? [0, 0] : [1, 0];
  // S·(F_inner − F_outer), the flux through the half point between n − 1 and n.
  let flux: Complex = onNodes ? stretchFactor(g, halfG(0), omegaDt) : [0, 0];
  let inner: Complex = onNodes ? [1, 0] : [1, 0];
  let n = onNodes ? 1 : 0;
  const last = thickness + 4;
  for (; n < last; n += 1) {
    const fluxIn = add(flux, divide(multiply([eigenvalue, 0], inner), stretchFactor(f, pointF(n), omegaDt)));
    const next = add(inner, divide(fluxIn, stretchFactor(g, halfG(n), omegaDt)));
    outer = inner;
    inner = next;
    flux = fluxIn;
  }
  // Split two neighbours in the section: outward wave exp(+jkΔ) per step inward, reflected exp(−jkΔ).
  const turn = kNormal * normal;
  const plus: Complex = [Math.cos(turn), Math.sin(turn)];
  const minus: Complex = [Math.cos(turn), -Math.sin(turn)];
  const incident = subtract(inner, multiply(minus, outer));
  const reflected = subtract(inner, multiply(plus, outer));
  return 20 * Math.log10(Math.hypot(...reflected) / Math.hypot(...incident));
}
