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

interface EdgeQuery {
  side: Side;
  hz: number;
  /** Refractive index of the lossless medium; 1 for air. */
  index?: number;
}

export interface ReflectionQuery extends EdgeQuery {
  /** Angle of incidence from the layer's normal, in degrees, 0 ≤ angle < 90. */
  degrees: number;
}

interface EvanescentQuery extends EdgeQuery {
  /** Wave number along the layer over that of a free wave, above 1: the wave decays toward the layer. */
  tangential: number;
}

/** S of one point of the layer at z = exp(jωΔt). */
function stretchFactor(stretch: AxisStretch, i: number, omegaDt: number): Complex {
  const oneOverZ: Complex = [Math.cos(omegaDt), -Math.sin(omegaDt)];
  const memory = divide([stretch.gain[i], 0], subtract([1, 0], multiply([stretch.decay[i], 0], oneOverZ)));
  return [1 + stretch.stretch[i] + memory[0], memory[1]];
}

/** Points of F from the layer's last one inward to where the incoming wave is told from the one sent back. */
const SPLIT_POINTS = 4;

const isAlongX = (side: Side): boolean => side === "left" || side === "right";

/** |reflected/incident| of F in dB; NaN where the lattice carries no wave of this frequency in this direction. */
export function layerReflectionDb(lattice: Lattice, layers: AbsorbingLayers, query: ReflectionQuery): number {
  const { side, hz, degrees, index = 1 } = query;
  const radians = (degrees * Math.PI) / 180;
  const angle = isAlongX(side) ? radians : Math.PI / 2 - radians;
  const k = latticeWaveNumber(lattice, C0 / index, 2 * Math.PI * hz, angle);
  const turn = k * Math.cos(radians) * (isAlongX(side) ? lattice.dx : lattice.dy);
  const turned: Complex = [Math.cos(turn), Math.sin(turn)];
  return 20 * Math.log10(Math.hypot(...reflection(lattice, layers, query, k * Math.sin(radians), turned)));
}

/** Of a wave that decays toward the layer: |reflected/incident| of F in dB, both at the section's edge; NaN where there is no such wave. */
export const evanescentReflectionDb = (
  lattice: Lattice,
  layers: AbsorbingLayers,
  query: EvanescentQuery,
): number => 20 * Math.log10(Math.hypot(...evanescentReflection(lattice, layers, query)));

/**
 * R of a wave that decays toward the layer, both taken at the section's edge; NaN where the lattice has no such wave. It grows
 * inward by exp(αΔ) a cell with sinh²(αΔ/2)/Δ² = sin²(k_tΔ_t/2)/Δ_t² − sin²(ωΔt/2)/(cΔt)².
 *
 * The flux into the layer is ∝ −Im(F*·F one cell outward) = −2·sinh(αΔ)·Im R: where Im R > 0 the layer feeds the section.
 */
export function evanescentReflection(
  lattice: Lattice,
  layers: AbsorbingLayers,
  query: EvanescentQuery,
): Complex {
  const { side, hz, tangential, index = 1 } = query;
  const [normal, along] = isAlongX(side) ? [lattice.dx, lattice.dy] : [lattice.dy, lattice.dx];
  const speed = C0 / index;
  const omega = 2 * Math.PI * hz;
  const k = (tangential * omega) / speed;
  const squared =
    (Math.sin((k * along) / 2) / along) ** 2 -
    (Math.sin((omega * lattice.dt) / 2) / (speed * lattice.dt)) ** 2;
  const growth = Math.exp(2 * Math.asinh(Math.sqrt(squared) * normal));
  // On its way from the edge to where the waves are split and back, the wave has changed by growth² a cell.
  const cells = SPLIT_POINTS - 1 + lattice.offset;
  const [re, im] = reflection(lattice, layers, query, k, [growth, 0]);
  return [re * growth ** (2 * cells), im * growth ** (2 * cells)];
}

/**
 * R where the waves are split.
 *
 * @param kTangential wave number along the layer
 * @param inward by what the incident wave turns or grows from one of F's points to the next one inward
 */
function reflection(
  lattice: Lattice,
  layers: AbsorbingLayers,
  { side, hz, index = 1 }: EdgeQuery,
  kTangential: number,
  inward: Complex,
): Complex {
  const alongX = isAlongX(side);
  const count = alongX ? lattice.columns : lattice.rows;
  const normal = alongX ? lattice.dx : lattice.dy;
  const tangential = alongX ? lattice.dy : lattice.dx;
  const speed = C0 / index;
  const omega = 2 * Math.PI * hz;
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
  const last = thickness + SPLIT_POINTS;
  for (; n < last; n += 1) {
    const fluxIn = add(flux, divide(multiply([eigenvalue, 0], inner), stretchFactor(f, pointF(n), omegaDt)));
    const next = add(inner, divide(fluxIn, stretchFactor(g, halfG(n), omegaDt)));
    outer = inner;
    inner = next;
    flux = fluxIn;
  }
  // Split two neighbours in the section into the wave that comes and the one that is sent back.
  const outward = divide([1, 0], inward);
  const incident = subtract(inner, multiply(outward, outer));
  const reflected = subtract(inner, multiply(inward, outer));
  return divide(reflected, incident);
}
