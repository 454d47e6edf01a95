/** The power balance of a run as its result tells it, and the limits on shares of it. */
import { fourierSum } from "../analysis/index.js";
import type { LimitResult, ProbeResult, ResolvedScene, SolveResult } from "../scene/index.js";
import type { SpectrumInput } from "./spectra.js";
import { waveformSignal } from "./spectra.js";

type Balance = NonNullable<SolveResult["balance"]>;

const defined = (values: Float64Array): (number | null)[] =>
  Array.from(values, (value) => (Number.isFinite(value) ? value : null));

/** Null where the run kept none, its sources differ, or it was stopped while they still drove. */
export function balanceInDocument(input: SpectrumInput): Balance | null {
  const { frames, drives, frequenciesGHz } = input;
  const first = drives.sources.at(0);
  if (!frames?.balance || !first || input.steps === 0) return null;
  if (drives.sources.some(({ waveformText }) => waveformText !== first.waveformText)) return null;
  if ((drives.firstStep + input.steps) * input.dt < drives.endSeconds) return null;
  const GHz = [...frames.balanceGHz];
  const sent = input.sent;
  const sum = sent
    ? {
        re: Float64Array.from(GHz, (frequency) => sent.re[frequenciesGHz.indexOf(frequency)]),
        im: Float64Array.from(GHz, (frequency) => sent.im[frequenciesGHz.indexOf(frequency)]),
      }
    : fourierSum(
        waveformSignal(input),
        GHz.map((frequency) => frequency * 1e9),
      );
  const divisor = sum.re.map((re, n) => re ** 2 + sum.im[n] ** 2);
  const figures = frames.balance.figures();
  const perUnit = (values: Float64Array): Float64Array => values.map((value, n) => value / divisor[n]);
  const { input: inward, absorbed, leaving } = figures;
  return {
    GHz,
    input: defined(perUnit(inward)),
    absorbed: defined(perUnit(absorbed)),
    leaving: defined(perUnit(leaving)),
    mismatch: defined(inward.map((value, n) => (value - absorbed[n] - leaving[n]) / value)),
  };
}

/** Limits on an area's share of the input, at the worst of the balance's frequencies; not judged without a balance. */
export function judgeShares(
  scene: ResolvedScene,
  results: readonly ProbeResult[],
  balance: Balance | undefined,
  unfinished: ReadonlySet<string>,
): LimitResult[] {
  return scene.limits.flatMap((limit): LimitResult[] => {
    if (!("value" in limit) || !("absorbedShare" in limit.of)) return [];
    const id = limit.of.absorbedShare;
    const unjudged = { id: limit.id, holds: null, margin: null, atGHz: null, uncertainty: null };
    const spectrum = results.find((probe) => probe.id === id)?.spectrum;
    if (!balance || !spectrum || !("value" in spectrum) || unfinished.has(id)) return [unjudged];
    let worst: { margin: number; atGHz: number; uncertainty: number } | null = null;
    for (const [n, atGHz] of balance.GHz.entries()) {
      const absorbed = spectrum.value[spectrum.GHz.indexOf(atGHz)];
      const [input, mismatch] = [balance.input[n], balance.mismatch[n]];
      if (absorbed === null || input === null || mismatch === null) return [{ ...unjudged, atGHz }];
      const share = absorbed / input;
      const margin = limit.sense === "below" ? limit.value - share : share - limit.value;
      if (!worst || margin < worst.margin) worst = { margin, atGHz, uncertainty: Math.abs(share * mismatch) };
    }
    return [worst ? { id: limit.id, holds: worst.margin >= 0, ...worst } : unjudged];
  });
}
