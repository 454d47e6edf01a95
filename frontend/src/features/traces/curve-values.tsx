import { formatFixed, frequency, THIN_SPACE } from "../../lib/figures";
import { CurveSample } from "./curve-line";
import type { PlotCurve } from "./curves";
import { BOTTOMLESS_DB, nearestIndex } from "./curves";
import styles from "./traces.module.css";

export interface CurveValuesProps {
  curves: readonly (PlotCurve & { index: number })[];
  GHz: number;
  label: string;
  unit: string;
  decimals: number;
  selected: string | null;
  hidden: ReadonlySet<string>;
  onToggle: (key: string) => void;
}

/** "−20.41 … −20.20": where the value lies at zero cell size. */
function barWords({ bar }: PlotCurve, GHz: number, decimals: number): string | null {
  const at = bar === undefined ? -1 : nearestIndex(bar.GHz, GHz);
  const [low, high] = [bar?.low[at] ?? null, bar?.high[at] ?? null];
  if (low === null || high === null) return null;
  const upper = formatFixed(high, decimals);
  return low <= BOTTOMLESS_DB ? `below ${upper}` : `${formatFixed(low, decimals)} … ${upper}`;
}

/** Each curve's line, name and value at one frequency; a click hides the curve or shows it again. */
export function CurveValues(props: CurveValuesProps) {
  const { curves, GHz, label, unit, decimals, selected, hidden, onToggle } = props;
  return (
    <ul className={styles.values} aria-label={label}>
      <li>
        <b>{frequency(GHz)}</b>
      </li>
      {curves.map((curve) => {
        const at = nearestIndex(curve.GHz, GHz);
        const value = curve.values[at] ?? null;
        const bar = barWords(curve, GHz, decimals);
        const chosen = curve.probe !== undefined && curve.probe === selected;
        return (
          <li key={curve.key}>
            <button
              type="button"
              className={styles.entry}
              aria-pressed={!hidden.has(curve.key)}
              title={hidden.has(curve.key) ? "Show the curve" : "Hide the curve"}
              onClick={() => {
                onToggle(curve.key);
              }}
            >
              <CurveSample index={curve.index} className={chosen ? styles.chosen : styles.curve} />
              {curve.label}
              <b>
                {value === null ? "–" : `${formatFixed(value, decimals)}${THIN_SPACE}${unit}`}
                {bar !== null && ` (${bar})`}
              </b>
            </button>
          </li>
        );
      })}
    </ul>
  );
}
