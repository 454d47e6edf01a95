/** What the patches marked `shield` keep away: the same scene with and without them. */
import { judgeLevels } from "../analysis/index.js";
import type { LimitResult, PowerSpectrum, ProbeResult, Scene, SolveResult } from "../scene/index.js";
import { shieldingUnjudged } from "../scene/index.js";

/** The scene without its enclosure; null where no patch is marked. */
export function sceneWithoutShield(scene: Scene): Scene | null {
  const paint = scene.paint.filter((patch) => patch.shield !== true);
  return paint.length === scene.paint.length ? null : { ...scene, paint };
}

const isPower = (spectrum: ProbeResult["spectrum"]): spectrum is PowerSpectrum =>
  spectrum !== null && "value" in spectrum;

function shieldingDb(bare: ProbeResult, shielded: ProbeResult): (number | null)[] | null {
  const [without, within] = [bare.spectrum, shielded.spectrum];
  if (!without || !within) return null;
  if (isPower(without) !== isPower(within)) return null;
  if (isPower(without) && isPower(within))
    return within.value.map((value, n) => {
      const before = without.value[n];
      const ratio = value === null || before === null ? Number.NaN : Math.abs(before / value);
      return Number.isFinite(ratio) && ratio > 0 ? 10 * Math.log10(ratio) : null;
    });
  if (isPower(without) || isPower(within)) return null;
  return within.re.map((re, n) => {
    const [im, re0, im0] = [within.im[n], without.re[n], without.im[n]];
    if (re === null || im === null || re0 === null || im0 === null) return null;
    const ratio = Math.hypot(re0, im0) / Math.hypot(re, im);
    return Number.isFinite(ratio) && ratio > 0 ? 20 * Math.log10(ratio) : null;
  });
}

type Shielding = NonNullable<SolveResult["shielding"]>;

/** Limits on shielding; not judged where either run stopped too early for the probe's spectrum. */
function judgeShielding(
  scene: Scene,
  shielding: Shielding,
  runs: readonly SolveResult[],
): Map<string, LimitResult> {
  const judged = new Map<string, LimitResult>();
  for (const limit of scene.limits) {
    if (!("points" in limit) || !("shielding" in limit.of)) continue;
    const { shielding: id } = limit.of;
    const curve = shielding.find(({ probe }) => probe === id);
    const unfinished = runs.some(({ probes }) =>
      probes.some((probe) => probe.id === id && probe.spectrum?.unfinished === true),
    );
    if (!curve || unfinished) continue;
    judged.set(limit.id, { id: limit.id, ...judgeLevels(limit, curve.GHz, curve.dB), uncertainty: null });
  }
  return judged;
}

/**
 * The result with its shielding: 20·lg of the field without the marked patches over that with them, 10·lg of powers and energies, at each
 * probe of the first drive, and with the limits on it judged.
 *
 * @param scene the scene of `result`
 * @param bare the result without the patches, at the same frequencies
 */
export function withShielding(scene: Scene, result: SolveResult, bare: SolveResult): SolveResult {
  const first = result.probes.at(0)?.drive ?? null;
  const shielding = result.probes
    .filter(({ drive }) => drive === first)
    .flatMap((probe) => {
      const other = bare.probes.find(({ id, drive }) => id === probe.id && drive === probe.drive);
      const dB = other ? shieldingDb(other, probe) : null;
      return dB === null ? [] : [{ probe: probe.id, GHz: probe.spectrum?.GHz ?? [], dB }];
    });
  const judged = judgeShielding(scene, shielding, [result, bare]);
  const answered = new Set(
    scene.limits.filter((limit) => "shielding" in limit.of).map((limit) => shieldingUnjudged(limit)),
  );
  const own = result.quality.warnings.filter((sentence) => !answered.has(sentence));
  const more = bare.quality.warnings.filter(
    (sentence) => !answered.has(sentence) && !result.quality.warnings.includes(sentence),
  );
  return {
    ...result,
    shielding,
    ...(result.limits && { limits: result.limits.map((limit) => judged.get(limit.id) ?? limit) }),
    quality: {
      ...result.quality,
      warnings: [...own, ...more.map((sentence) => `Without the shield: ${sentence}`)],
    },
  };
}
