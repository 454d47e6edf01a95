/** Levels of a result's probes as the panel draws them, and why there may be none. */
import type {
  ComplexSpectrum,
  Extrapolation,
  PowerSpectrum,
  ProbeResult,
  SolveResult,
} from "@heddle/kernels/scene";
import type { PlotCurve } from "./curves";
import { amplitudeDb, barOf, magnitudeOf, powerDb } from "./curves";

type ProbeBar = Extrapolation["probes"][number];

/** "Antenna, driven from in": one probe has a spectrum for each driven port. */
export const probeLabel = (
  { id, drive }: Pick<ProbeResult, "id" | "drive">,
  nameOf: (probe: string) => string,
): string => (drive === null ? nameOf(id) : `${nameOf(id)}, driven from ${drive}`);

const levelsOf = (spectrum: ComplexSpectrum | PowerSpectrum): (number | null)[] =>
  "re" in spectrum
    ? spectrum.GHz.map((_, index) => amplitudeDb(magnitudeOf(spectrum, index)))
    : spectrum.value.map(powerDb);

function barOfProbe(bar: ProbeBar | undefined): Pick<PlotCurve, "bar"> {
  if (bar === undefined) return {};
  if ("value" in bar) return { bar: barOf(bar.GHz, bar.value, bar.uncertainty, powerDb) };
  const magnitudes = bar.GHz.map((_, index) => magnitudeOf(bar, index));
  return { bar: barOf(bar.GHz, magnitudes, bar.uncertainty, amplitudeDb) };
}

/**
 * The level of each probe that has a spectrum, in dB per unit source: 20·lg of the magnitude for fields and voltages,
 * 10·lg for powers and energies. A tone's single line stands as one point. What is absorbed or stored in an area is
 * told apart, electric and magnetic, where `split` says so.
 */
export function probeCurves(
  result: SolveResult,
  nameOf: (probe: string) => string,
  split: (probe: ProbeResult) => boolean = () => false,
): PlotCurve[] {
  return result.probes.flatMap((probe): PlotCurve[] => {
    const { id, drive, spectrum } = probe;
    if (spectrum === null) return [];
    const { GHz } = spectrum;
    const key = `${id} ${drive ?? ""}`;
    const label = probeLabel(probe, nameOf);
    const bar = result.extrapolation?.probes.find((one) => one.id === id && one.drive === drive);
    const whole = { key, label, GHz, values: levelsOf(spectrum), probe: id, ...barOfProbe(bar) };
    if (!("value" in spectrum) || !split(probe)) return [whole];
    const part = (of: "electric" | "magnetic"): PlotCurve[] => {
      const values = spectrum[of];
      return values === undefined
        ? []
        : [{ key: `${key} ${of}`, label: `${label}, ${of}`, GHz, values: values.map(powerDb), probe: id }];
    };
    return [whole, ...part("electric"), ...part("magnetic")];
  });
}

/** Of shielding in dB, at each probe that has one. */
export const shieldingCurves = (result: SolveResult, nameOf: (probe: string) => string): PlotCurve[] =>
  (result.shielding ?? []).map(({ probe, GHz, dB }) => ({
    key: probe,
    label: nameOf(probe),
    GHz,
    values: dB,
    probe,
  }));

/** Some trace had not died away and was completed by its fitted poles. */
export const isCompleted = (result: SolveResult): boolean =>
  result.probes.some(
    ({ spectrum }) => spectrum !== null && "completed" in spectrum && spectrum.completed === true,
  );

/** Why a result shows no spectrum, as a sentence; null where it shows one. */
export function whyNoSpectrum(result: SolveResult): string | null {
  if (result.ports !== undefined || result.probes.some((probe) => probe.spectrum !== null)) return null;
  if (result.edits !== undefined && result.edits.length > 0)
    return "The run was edited while it ran, so its traces have no spectrum. Run the edited scene cleanly.";
  if (result.probes.length === 0) return "No probe: place one to get a trace and its spectrum.";
  const reason = result.quality.warnings.find((warning) => /spectr/i.test(warning));
  return reason ?? "The run gave no spectrum.";
}
