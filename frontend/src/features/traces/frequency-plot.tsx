import type { Resonance } from "@heddle/kernels/scene";
import { figure, MINUS, THIN_SPACE } from "../../lib/figures";
import { CurveBar, CurveLine } from "./curve-line";
import type { PlotCurve, ValueRange } from "./curves";
import { ticks } from "./decimate";
import type { LimitLine } from "./limit-lines";
import { LimitMark } from "./limit-mark";
import { ResonanceMarks } from "./resonance-marks";
import type { GuideTick } from "./s-curves";
import styles from "./traces.module.css";

export interface FrequencyPlotProps {
  width: number;
  height: number;
  band: { fromGHz: number; toGHz: number };
  range: ValueRange;
  /** Values turn over by this much (phases); null: they do not. */
  turn: number | null;
  curves: readonly (PlotCurve & { index: number })[];
  /** Of the run before, to compare with. */
  before: readonly PlotCurve[];
  limits: readonly LimitLine[];
  resonances: readonly Resonance[];
  /** Frequencies of the guide along the upper edge. */
  guide: readonly GuideTick[];
  selected: string | null;
  label: string;
  cursorGHz: number | null;
  /** The frequency under the pointer; null where it leaves the band. */
  onCursor: (GHz: number | null) => void;
}

const PAD = { left: 36, right: 10, top: 8, bottom: 20 };
const GUIDE_PX = 16;
const VALUE_TICK_PX = 28;

/** Curves over frequency with their axes, limits, resonances and cursor. */
export function FrequencyPlot(props: FrequencyPlotProps) {
  const { width, height, band, range, turn, curves, before, limits, guide, selected, cursorGHz, onCursor } =
    props;
  const top = PAD.top + (guide.length > 0 ? GUIDE_PX : 0);
  const [right, bottom] = [width - PAD.right, height - PAD.bottom];
  if (right <= PAD.left || bottom <= top) return null;
  const perGHz = (right - PAD.left) / (band.toGHz - band.fromGHz);
  const x = (GHz: number): number => PAD.left + (GHz - band.fromGHz) * perGHz;
  const y = (value: number): number =>
    top + ((range.high - value) / (range.high - range.low)) * (bottom - top);
  return (
    <svg
      width={width}
      height={height}
      role="img"
      aria-label={props.label}
      onPointerMove={(event) => {
        const px = event.clientX - event.currentTarget.getBoundingClientRect().left;
        const GHz = band.fromGHz + (px - PAD.left) / perGHz;
        onCursor(GHz >= band.fromGHz && GHz <= band.toGHz ? GHz : null);
      }}
      onPointerLeave={() => {
        onCursor(null);
      }}
    >
      <clipPath id="spectrum-area">
        <rect x={PAD.left} y={top} width={right - PAD.left} height={bottom - top} />
      </clipPath>
      {valueTicks(range, turn, height).map((value) => (
        <g key={value}>
          <line x1={PAD.left} x2={right} y1={y(value)} y2={y(value)} className={styles.grid} />
          <text
            x={PAD.left - 6}
            y={y(value)}
            className={styles.tick}
            textAnchor="end"
            dominantBaseline="middle"
          >
            {value < 0 ? `${MINUS}${(-value).toString()}` : value.toString()}
          </text>
        </g>
      ))}
      {frequencyTicks(band, width).map(({ GHz, label, anchor }) => (
        <text key={GHz} x={x(GHz)} y={height - 6} className={styles.tick} textAnchor={anchor}>
          {label}
        </text>
      ))}
      {guide.map(({ GHz, guideGHz }, index) => (
        <g key={guideGHz}>
          <line x1={x(GHz)} x2={x(GHz)} y1={top} y2={top - 4} className={styles.grid} />
          <text
            x={x(GHz)}
            y={top - 7}
            className={styles.tick}
            textAnchor={x(GHz) > right - 40 ? "end" : "middle"}
          >
            {figure(guideGHz, 4)}
            {index === guide.length - 1 ? `${THIN_SPACE}GHz in the guide` : ""}
          </text>
        </g>
      ))}
      <ResonanceMarks resonances={props.resonances} band={band} x={x} top={top} bottom={bottom} />
      <g clipPath="url(#spectrum-area)">
        {curves.map((curve) => (
          <CurveBar key={curve.key} curve={curve} x={x} y={y} />
        ))}
        {limits.map((limit) => (
          <LimitMark key={limit.key} limit={limit} x={x} y={y} edges={{ top, right, bottom }} />
        ))}
        {before.map((curve) => (
          <CurveLine
            key={curve.key}
            curve={curve}
            x={x}
            y={y}
            className={styles.before}
            index={null}
            turn={turn}
          />
        ))}
        {curves.map((curve) => (
          <CurveLine
            key={curve.key}
            curve={curve}
            x={x}
            y={y}
            className={curve.probe !== undefined && curve.probe === selected ? styles.chosen : styles.curve}
            index={curve.index}
            turn={turn}
          />
        ))}
        {cursorGHz !== null && (
          <line x1={x(cursorGHz)} x2={x(cursorGHz)} y1={top} y2={bottom} className={styles.cursor} />
        )}
      </g>
    </svg>
  );
}

/** Round places of the values' axis: of a turn its quarters. */
function valueTicks({ low, high }: ValueRange, turn: number | null, height: number): number[] {
  if (turn === null) return ticks(low, high, Math.max(2, Math.floor(height / VALUE_TICK_PX)));
  const step = turn / 4;
  return Array.from({ length: Math.round((high - low) / step) + 1 }, (_, n) => low + n * step);
}

function frequencyTicks(
  band: { fromGHz: number; toGHz: number },
  width: number,
): { GHz: number; label: string; anchor: "start" | "middle" | "end" }[] {
  const places = ticks(band.fromGHz, band.toGHz, Math.max(2, Math.floor(width / 90)));
  return places.map((GHz, index) => {
    const share = (GHz - band.fromGHz) / (band.toGHz - band.fromGHz);
    return {
      GHz,
      label: index === places.length - 1 ? `${figure(GHz, 4)}${THIN_SPACE}GHz` : figure(GHz, 4),
      anchor: share > 0.92 ? "end" : "middle",
    };
  });
}
