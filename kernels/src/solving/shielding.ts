/** What the patches marked `shield` keep away: the same scene with and without them. */
import type { PowerSpectrum, ProbeResult, Scene, SolveResult } from "../scene/index.js";

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

/**
 * The result with its shielding: 20·lg of the field without the marked patches over that with them, 10·lg of powers and energies, at each
 * probe of the first drive.
 *
 * @param bare the result without the patches, at the same frequencies
 */
export function withShielding(result: SolveResult, bare: SolveResult): SolveResult {
  const first = result.probes.at(0)?.drive ?? null;
  const shielding = result.probes
    .filter(({ drive }) => drive === first)
    .flatMap((probe) => {
      const other = bare.probes.find(({ id, drive }) => id === probe.id && drive === probe.drive);
      const dB = other ? shieldingDb(other, probe) : null;
      return dB === null ? [] : [{ probe: probe.id, GHz: probe.spectrum?.GHz ?? [], dB }];
    });
  return { ...result, shielding };
}
