/** Two-ports as impedance inverters between two lengths of line: what a filter of irises is designed by. */
import type { SolveResult } from "../scene/index.js";

type PortsBlock = NonNullable<SolveResult["ports"]>;
type Entry = PortsBlock["s"][number];
type Inverters = NonNullable<PortsBlock["inverters"]>;

/** What |S₁₁|² + |S₂₁|² may lack of 1. */
const LOST = 0.01;

const degrees = (radians: number): number => (radians * 180) / Math.PI;
/** To (−180, 180]. */
const wrapped = (angle: number): number => 180 - ((((180 - angle) % 360) + 360) % 360);

/**
 * K/√(Z₁Z₂) and φ of a lossless two-port. An inverter alone has S₁₁ = (K² − 1)/(K² + 1), |S₂₁| = 2K/(K² + 1) with K in units of Z, so that
 * K = |S₂₁|/(1 + |S₁₁|). The part becomes one with a line of φ/2 added at each port, which turns its S₁₁ by −φ: φ = arg S₁₁ − π, negative
 * for an inductive iris. For a symmetric part K is the |tan(φ/2 + atan X_s)| of its T-circuit (G. L. Matthaei, L. Young, E. M. T. Jones, Microwave Filters, Impedance-Matching Networks, and
 * Coupling Structures, 1964, sec. 8.03; from memory); derived here from S, where it holds for unequal ports too.
 */
function inverterAt(own: Entry, other: Entry, through: Entry, n: number): [number, number, number] | null {
  const [re, im, re2, im2] = [own.re[n], own.im[n], other.re[n], other.im[n]];
  const [reT, imT] = [through.re[n], through.im[n]];
  if (re === null || im === null || re2 === null || im2 === null || reT === null || imT === null) return null;
  const [reflected, reflected2, passed] = [Math.hypot(re, im), Math.hypot(re2, im2), Math.hypot(reT, imT)];
  const missing = [reflected, reflected2].map((one) => Math.abs(1 - one ** 2 - passed ** 2));
  if (missing.some((share) => share > LOST)) return null;
  const phases = [Math.atan2(im, re), Math.atan2(im2, re2)].map((angle) => wrapped(degrees(angle) - 180));
  return [passed / (1 + (reflected + reflected2) / 2), phases[0], phases[1]];
}

/** Of every pair of ports that were both driven; undefined where none passes on all it is sent at any frequency. */
export function invertersOf(s: readonly Entry[]): Inverters | undefined {
  const find = (to: string, from: string): Entry | undefined =>
    s.find((one) => one.to === to && one.from === from);
  const found = s.flatMap(({ to, from }, index): Inverters => {
    const [own, other, through] = [find(from, from), find(to, to), find(to, from)];
    const back = s.findIndex((one) => one.to === from && one.from === to);
    // Each pair once, in the order in which its ports were driven.
    if (to === from || back < index || !own || !other || !through) return [];
    const at = own.re.map((_, n) => inverterAt(own, other, through, n));
    if (at.every((value) => value === null)) return [];
    const part = (of: 0 | 1 | 2): (number | null)[] => at.map((value) => value && value[of]);
    return [{ between: [from, to], k: part(0), phaseDeg: [part(1), part(2)] }];
  });
  return found.length > 0 ? found : undefined;
}
