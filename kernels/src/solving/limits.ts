/** The limits of a scene that are lines over frequency, judged on what its run computed. */
import type { Judgement } from "../analysis/index.js";
import { judgeLevels } from "../analysis/index.js";
import type {
  ComplexSpectrum,
  LimitResult,
  PowerSpectrum,
  ProbeResult,
  ResolvedScene,
  SolveResult,
} from "../scene/index.js";

export interface Judged {
  results: readonly ProbeResult[];
  /** Probes and ports whose traces had not rung down. */
  unfinished: ReadonlySet<string>;
  ports: SolveResult["ports"];
  portsUnfinished: boolean;
}

const UNJUDGED = { holds: null, margin: null, atGHz: null } as const;

const decibels = (re: number | null, im: number | null): number | null =>
  re === null || im === null ? null : 20 * Math.log10(Math.hypot(re, im));

/** 20·lg of fields and voltages, 10·lg of the magnitude of powers; null where undefined. */
const levelsOf = (spectrum: ComplexSpectrum | PowerSpectrum): (number | null)[] =>
  "re" in spectrum
    ? spectrum.re.map((re, index) => decibels(re, spectrum.im[index]))
    : spectrum.value.map((value) => (value === null ? null : 10 * Math.log10(Math.abs(value))));

/** The smallest margin of several; none where one of them could not be judged. */
const worstOf = (judgements: readonly Judgement[]): Judgement => {
  const unjudged = judgements.find(({ holds }) => holds === null);
  if (unjudged || judgements.length === 0) return unjudged ?? UNJUDGED;
  return judgements.reduce((worst, one) => ((one.margin ?? 0) < (worst.margin ?? 0) ? one : worst));
};

/**
 * Limits on the levels of probes, 20·lg of V/m, A/m or V, 10·lg of W/m per unit source, whichever port drives; and on |S| in dB. None is
 * judged on a trace that had not rung down, and those on shielding by `withShielding` only.
 */
export function judgeLines(scene: ResolvedScene, judged: Judged): LimitResult[] {
  return scene.limits.flatMap((limit): LimitResult[] => {
    if (!("points" in limit)) return [];
    const { of } = limit;
    // What compares the run with the bare scene judges it.
    if ("shielding" in of) return [{ id: limit.id, ...UNJUDGED, uncertainty: null }];
    const result = (judgement: Judgement): LimitResult[] => [
      { id: limit.id, ...judgement, uncertainty: null },
    ];
    if ("probe" in of) {
      const found = judged.results.filter(({ id }) => id === of.probe);
      if (judged.unfinished.has(of.probe)) return result(UNJUDGED);
      return result(
        worstOf(
          found.map(({ spectrum }) =>
            spectrum ? judgeLevels(limit, spectrum.GHz, levelsOf(spectrum)) : UNJUDGED,
          ),
        ),
      );
    }
    const [to, from] = of.s;
    const entry = judged.ports?.s.find((one) => one.to === to && one.from === from);
    if (!judged.ports || !entry || judged.portsUnfinished) return result(UNJUDGED);
    const levels = entry.re.map((re, index) => decibels(re, entry.im[index]));
    return result(judgeLevels(limit, judged.ports.GHz, levels));
  });
}
