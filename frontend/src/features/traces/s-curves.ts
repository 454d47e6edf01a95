/** S-parameters of a result as the panel draws them. */
import type { SolveResult } from "@heddle/kernels/scene";
import { figure, frequency, THIN_SPACE } from "../../lib/figures";
import type { PlotCurve, ValueRange } from "./curves";
import { amplitudeDb, barOf, extremesOf, magnitudeOf, rangeOf } from "./curves";
import { ticks } from "./decimate";

type Ports = NonNullable<SolveResult["ports"]>;
type Pair = Ports["s"][number];
export type SQuantity = "level" | "phase" | "delay";

/** "out ← in": what leaves at one port of what enters at another. */
export const pairName = (to: string, from: string): string => `${to} ← ${from}`;

const phaseOf = (pair: Pair, index: number): number | null => {
  const [re, im] = [pair.re[index] ?? null, pair.im[index] ?? null];
  return re === null || im === null || (re === 0 && im === 0) ? null : (Math.atan2(im, re) * 180) / Math.PI;
};

function valuesOf(pair: Pair, quantity: SQuantity): (number | null)[] {
  switch (quantity) {
    case "level":
      return pair.re.map((_, index) => amplitudeDb(magnitudeOf(pair, index)));
    case "phase":
      return pair.re.map((_, index) => phaseOf(pair, index));
    case "delay":
      return pair.groupDelayNs;
  }
}

/** One curve a pair of ports: |S| in dB, the phase in degrees from −180 to 180, or the group delay in ns. */
export function sCurves(result: SolveResult, quantity: SQuantity): PlotCurve[] {
  const { ports } = result;
  return (ports?.s ?? []).map((pair): PlotCurve => {
    const { to, from } = pair;
    const curve = {
      key: `${to} ${from}`,
      label: pairName(to, from),
      GHz: ports?.GHz ?? [],
      values: valuesOf(pair, quantity),
    };
    const finer = result.extrapolation?.s.find((one) => one.to === to && one.from === from);
    if (finer === undefined || quantity !== "level") return curve;
    const magnitudes = finer.re.map((_, index) => magnitudeOf(finer, index));
    return { ...curve, bar: barOf(finer.GHz, magnitudes, finer.uncertainty, amplitudeDb) };
  });
}

/** Of what passes as little as this, phase and delay say nothing: they do not set the range. */
const FAINT_DB = -40;
const DEEPEST_DB = 60;
/** Room over 0 dB, where passive parts end. */
const OVER_DB = 2;

/** What the plot spans. */
export function sRange(result: SolveResult, quantity: SQuantity): ValueRange | null {
  const curves = sCurves(result, quantity);
  if (quantity === "phase") return extremesOf(curves) && { low: -180, high: 180 };
  if (quantity === "level") {
    const held = extremesOf(curves);
    if (held === null || held.high > OVER_DB) return rangeOf(curves, DEEPEST_DB);
    const low = Math.min(-20, Math.max(-DEEPEST_DB, 10 * Math.floor((held.low - 1) / 10)));
    return { low, high: OVER_DB };
  }
  const levels = sCurves(result, "level");
  const heard = curves.map((curve, pair) => ({
    values: curve.values.map((value, index) =>
      (levels[pair]?.values[index] ?? Number.NEGATIVE_INFINITY) < FAINT_DB ? null : value,
    ),
  }));
  const held = extremesOf(heard) ?? extremesOf(curves);
  if (held === null) return null;
  const spread = Math.max(held.high - held.low, 1e-3 * Math.abs(held.high), 1e-6);
  return { low: Math.min(0, held.low - spread / 20), high: held.high + spread / 20 };
}

/** The largest gain over power of all that may enter, in words; null where nothing was judged. */
export function passivityWords({ passivity: { worst, atGHz } }: Ports): string | null {
  if (worst === null || atGHz === null) return null;
  const at = `at ${frequency(atGHz, 4)}`;
  return worst <= 1
    ? `Passive: at most ${figure(100 * worst, 5)}${THIN_SPACE}% of the power comes out, ${at}.`
    : `Up to ${figure(100 * (worst - 1), 2)}${THIN_SPACE}% more power comes out than enters, ${at}.`;
}

export interface GuideTick {
  /** Where on the section's axis. */
  GHz: number;
  guideGHz: number;
}

/** Round frequencies of the guide whose E-plane section was solved, each at the section's frequency that stands for it. */
export function guideTicks({ GHz, guideGHz }: Ports, wanted: number): GuideTick[] {
  const [first, last] = [guideGHz?.at(0), guideGHz?.at(-1)];
  if (guideGHz === undefined || first === undefined || last === undefined) return [];
  return ticks(first, last, wanted).flatMap((wantedGHz) => {
    const above = guideGHz.findIndex((value) => value >= wantedGHz);
    const [f1, g1] = above < 0 ? [] : [GHz.at(above), guideGHz.at(above)];
    if (f1 === undefined || g1 === undefined) return [];
    const [f0, g0] = [GHz[above - 1] ?? f1, guideGHz[above - 1] ?? g1];
    const share = g1 === g0 ? 0 : (wantedGHz - g0) / (g1 - g0);
    return [{ GHz: f0 + share * (f1 - f0), guideGHz: wantedGHz }];
  });
}
