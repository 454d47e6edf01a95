import type { Extrapolation, SolveResult } from "@heddle/kernels/scene";
import Button from "@mui/material/Button";
import { digitsOf, qualityInWords, shownResonances } from "./ring-panel";
import { decibels, figure, formatFixed, frequency, THIN_SPACE } from "../../lib/figures";

export interface MeshCheckProps {
  result: SolveResult;
  /** A run on two meshes is under way. */
  underWay: boolean;
  /** Starts one; null where none may be started now. */
  onCheck: (() => void) | null;
  /** Why the person may not start one, as a sentence; null: they may. */
  refusal: string | null;
  /** The frequency where the limit on an S has the least margin; null where there is none. */
  limitAtGHz: LimitAt;
  nameOf: (probe: string) => string;
}

export type LimitAt = (to: string, from: string) => number | null;

interface Row {
  name: string;
  value: string;
}

/** Magnitude and uncertainty as a level: "−20.31 ± 0.05 dB", or "below …" where the one reaches the other. */
export function levelWords(magnitude: number, uncertainty: number): string {
  if (uncertainty >= magnitude) return `below ${decibels(20 * Math.log10(magnitude + uncertainty))}`;
  const around = 20 * Math.log10(magnitude / (magnitude - uncertainty));
  const decimals = around >= 1 ? 1 : around >= 0.1 ? 2 : 3;
  const level = formatFixed(20 * Math.log10(magnitude), decimals);
  return `${level}${THIN_SPACE}±${THIN_SPACE}${formatFixed(around, decimals)}${THIN_SPACE}dB`;
}

const widest = (values: readonly (number | null)[]): number =>
  values.reduce<number>((most, value) => Math.max(most, value ?? 0), 0);

/** Each S: at the frequency where its limit has the least margin, else its widest uncertainty over the band. */
function sRows({ s }: Extrapolation, limitAtGHz: LimitAt): Row[] {
  return s.map(({ to, from, GHz, re, im, uncertainty }): Row => {
    const name = `${to} ← ${from}`;
    const atGHz = limitAtGHz(to, from);
    const index = atGHz === null ? -1 : GHz.indexOf(atGHz);
    const [real, imaginary, around] = [re[index] ?? null, im[index] ?? null, uncertainty[index] ?? null];
    if (atGHz === null || real === null || imaginary === null || around === null)
      return { name, value: `|S| ±${THIN_SPACE}${figure(widest(uncertainty), 2)}` };
    return {
      name: `${name} at ${frequency(atGHz)}`,
      value: levelWords(Math.hypot(real, imaginary), around),
    };
  });
}

/** Those of the strongest resonances of the run's own mesh that both meshes have. */
function resonanceRows({ resonances }: Extrapolation, result: SolveResult): Row[] {
  const { shown } = shownResonances(result.resonances ?? []);
  const found = shown.flatMap((one) => {
    const near = resonances
      .filter(({ probe }) => probe === one.probe)
      .sort((a, b) => Math.abs(a.GHz - one.GHz) - Math.abs(b.GHz - one.GHz))
      .at(0);
    return near === undefined ? [] : [near];
  });
  return [...new Set(found)].map(({ GHz, ghzUncertainty, q, qUncertainty }) => ({
    name: `${frequency(GHz, digitsOf(GHz, ghzUncertainty))} ±${THIN_SPACE}${frequency(ghzUncertainty, 1)}`,
    value: `Q${THIN_SPACE}${qualityInWords(q, qUncertainty)}`,
  }));
}

/** Each probe's widest uncertainty over the band, against its largest value. */
function probeRows({ probes }: Extrapolation, nameOf: (probe: string) => string): Row[] {
  return probes.map((probe) => {
    const values =
      "value" in probe
        ? probe.value
        : probe.re.map((re, n) => {
            const im = probe.im[n] ?? null;
            return re === null || im === null ? null : Math.hypot(re, im);
          });
    const share = widest(probe.uncertainty) / widest(values.map((value) => value && Math.abs(value)));
    const name = nameOf(probe.id) + (probe.drive === null ? "" : `, from ${probe.drive}`);
    return { name, value: `±${THIN_SPACE}${figure(share * 100, 2)}${THIN_SPACE}% of peak` };
  });
}

/** What the same scene gives at zero cell size, with its uncertainty, or the way to ask for it. */
export function MeshCheck({ result, underWay, onCheck, refusal, limitAtGHz, nameOf }: MeshCheckProps) {
  const { extrapolation } = result;
  if (extrapolation === undefined) {
    if (underWay) return <p className="quiet">Being checked on a finer mesh.</p>;
    return (
      <Button
        size="small"
        disabled={onCheck === null}
        title={refusal ?? "Runs the scene on its own mesh and on cells half as large, four times as many"}
        onClick={() => {
          onCheck?.();
        }}
      >
        Check on a finer mesh
      </Button>
    );
  }
  const rows = [
    ...sRows(extrapolation, limitAtGHz),
    ...resonanceRows(extrapolation, result),
    ...probeRows(extrapolation, nameOf),
  ];
  return (
    <>
      <h3>{extrapolation.steady ? "At zero cell size" : "On the finer mesh"}</h3>
      <dl className="figures">
        {rows.map(({ name, value }) => (
          <div key={name}>
            <dt title={name}>{name}</dt>
            <dd>{value}</dd>
          </div>
        ))}
      </dl>
      {!extrapolation.steady && (
        <p className="quiet">
          This geometry&apos;s error may change its sign from mesh to mesh, so nothing is extrapolated.
        </p>
      )}
    </>
  );
}
