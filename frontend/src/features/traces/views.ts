/** The views that the spectrum panel has of a result, and what each draws. */
import type { Limit, ProbeResult, SolveResult } from "@heddle/kernels/scene";
import type { PlotCurve, ValueRange } from "./curves";
import { rangeOf } from "./curves";
import type { LimitLine } from "./limit-lines";
import { limitLines } from "./limit-lines";
import type { SQuantity } from "./s-curves";
import { passivityWords, sCurves, sRange } from "./s-curves";
import { isCompleted, probeCurves, shieldingCurves } from "./spectrum";

/** Probes of one unit at a time: V/m and J/m share no axis. */
export type ViewKind = SQuantity | "shielding" | `probes ${string}`;

const VIEW_NAMES = { level: "|S|", phase: "Phase", delay: "Delay", shielding: "Shielding" };

const isOfProbes = (kind: ViewKind): kind is `probes ${string}` => kind.startsWith("probes ");
const unitOf = (kind: `probes ${string}`): string => kind.slice("probes ".length);

/** What the view is called among those that there are. */
export const viewName = (kind: ViewKind, kinds: readonly ViewKind[]): string => {
  if (!isOfProbes(kind)) return VIEW_NAMES[kind];
  return kinds.filter(isOfProbes).length === 1 ? "Probes" : unitOf(kind);
};

export interface PlotView {
  title: string;
  unit: string;
  decimals: number;
  /** Values turn over by this much (phases); null: they do not. */
  turn: number | null;
  range: ValueRange | null;
  curves: PlotCurve[];
  before: PlotCurve[];
  limits: LimitLine[];
  notes: string[];
}

/** S first where there are ports, then shielding and probes, where there are spectra of them. */
export function viewKinds(result: SolveResult): ViewKind[] {
  const kinds: ViewKind[] = [];
  if (result.ports !== undefined) kinds.push("level", "phase", "delay");
  if (result.shielding !== undefined && result.shielding.length > 0) kinds.push("shielding");
  const units = result.probes.flatMap(({ spectrum, unit }) => (spectrum === null ? [] : [unit]));
  return [...kinds, ...[...new Set(units)].map((unit): ViewKind => `probes ${unit}`)];
}

export interface ViewInput {
  result: SolveResult;
  /** The clean result before this one. */
  previous: SolveResult | null;
  limits: readonly Limit[];
  nameOf: (probe: string) => string;
  selected: string | null;
}

const COMPLETED_NOTE = "Some traces had not died away at the stop and were completed by their fitted poles.";

/** Limits are part of the picture as far as the curves' own range goes, and a little further. */
function withLimits(range: ValueRange | null, limits: readonly LimitLine[]): ValueRange | null {
  if (range === null) return null;
  const levels = limits.flatMap(({ points }) => points.map(({ dB }) => dB));
  if (levels.length === 0) return range;
  return {
    low: Math.min(range.low, 10 * Math.floor((Math.min(...levels) - 1) / 10)),
    high: Math.max(range.high, 10 * Math.ceil((Math.max(...levels) + 1) / 10)),
  };
}

function sView(kind: SQuantity, { result, previous, limits }: ViewInput): PlotView {
  const lines =
    kind === "level" ? limitLines(limits, result.limits, (of) => "s" in of && isPair(result, of.s)) : [];
  const curves = sCurves(result, kind);
  const passivity = result.ports === undefined ? null : passivityWords(result.ports);
  const range = sRange(result, kind);
  return {
    ...{
      level: { title: "|S|, dB", unit: "dB", decimals: 2, turn: null },
      phase: { title: "Phase of S, degrees", unit: "°", decimals: 1, turn: 360 },
      delay: { title: "Group delay, ns", unit: "ns", decimals: 3, turn: null },
    }[kind],
    range: kind === "level" ? withLimits(range, lines) : range,
    curves,
    before: previous === null ? [] : sCurves(previous, kind),
    limits: lines,
    notes: passivity === null ? [] : [passivity],
  };
}

const isPair = ({ ports }: SolveResult, [to, from]: readonly [string, string]): boolean =>
  ports?.s.some((pair) => pair.to === to && pair.from === from) ?? false;

const ofUnit = (result: SolveResult, unit: string): SolveResult => ({
  ...result,
  probes: result.probes.filter((probe) => probe.unit === unit),
});

function probesView(unit: string, input: ViewInput): PlotView {
  const { limits, nameOf, selected } = input;
  const result = ofUnit(input.result, unit);
  const previous = input.previous && ofUnit(input.previous, unit);
  // An area's halves are told where it alone is looked at: they would crowd a plot of many.
  const split = (probe: ProbeResult): boolean => probe.id === selected || result.probes.length === 1;
  const curves = probeCurves(result, nameOf, split);
  const before = previous === null ? [] : probeCurves(previous, nameOf);
  const measured = new Set(result.probes.map(({ id }) => id));
  const lines = limitLines(limits, result.limits, (of) => "probe" in of && measured.has(of.probe));
  return {
    title: `Level, dB re 1 ${unit}, per unit source`,
    unit: "dB",
    decimals: 1,
    turn: null,
    range: withLimits(curves.length === 0 ? null : rangeOf([...curves, ...before]), lines),
    curves,
    before,
    limits: lines,
    notes: isCompleted(result) ? [COMPLETED_NOTE] : [],
  };
}

function shieldingView({ result, previous, limits, nameOf }: ViewInput): PlotView {
  const curves = shieldingCurves(result, nameOf);
  const before = previous === null ? [] : shieldingCurves(previous, nameOf);
  const lines = limitLines(limits, result.limits, (of) => "shielding" in of);
  return {
    title: "Shielding, dB",
    unit: "dB",
    decimals: 1,
    turn: null,
    range: withLimits(curves.length === 0 ? null : rangeOf([...curves, ...before]), lines),
    curves,
    before,
    limits: lines,
    notes: [],
  };
}

export function viewOf(kind: ViewKind, input: ViewInput): PlotView {
  if (isOfProbes(kind)) return probesView(unitOf(kind), input);
  return kind === "shielding" ? shieldingView(input) : sView(kind, input);
}
