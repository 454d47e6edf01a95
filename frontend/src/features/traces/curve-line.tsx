import type { PlotCurve } from "./curves";
import styles from "./traces.module.css";

/** Curves are told apart by dash as well as by place, never by colour alone. */
const DASHES = ["", "6 3", "2 2", "8 3 2 3", "1 3", "12 4", "6 2 2 2 2 2", "4 6"];
/** Beyond the dashes, every so many points carry a ring. */
const RINGED_EVERY = 24;

export const dashOf = (index: number): string => DASHES[index % DASHES.length] ?? "";
const isRinged = (index: number): boolean => index >= DASHES.length;

interface Place {
  x: (GHz: number) => number;
  y: (value: number) => number;
}

export interface CurveLineProps extends Place {
  curve: PlotCurve;
  className: string | undefined;
  /** Its place among the curves, which gives its dash; null: the style's own. */
  index: number | null;
  /** Values turn over by this much (phases); null: they do not. */
  turn: number | null;
}

/** A line through the values that are defined; a single line of a tone as a stem with a ring. */
export function CurveLine({ curve, x, y, className, index, turn }: CurveLineProps) {
  const dash = index === null ? undefined : dashOf(index);
  const points = curve.GHz.flatMap((GHz, at) => {
    const value = curve.values[at] ?? null;
    return value === null ? [] : [{ x: x(GHz), y: y(value), value, at }];
  });
  const only = points.at(0);
  if (points.length === 1 && only !== undefined) {
    return (
      <g className={className}>
        <line x1={only.x} x2={only.x} y1={only.y} y2={4096} strokeDasharray={dash} />
        <circle cx={only.x} cy={only.y} r={3.5} />
      </g>
    );
  }
  const path = points
    .map((point, i) => {
      const before = i === 0 ? undefined : points[i - 1];
      const joined =
        before?.at === point.at - 1 && (turn === null || Math.abs(before.value - point.value) < turn / 2);
      return `${joined ? "L" : "M"}${point.x.toFixed(1)} ${point.y.toFixed(1)}`;
    })
    .join("");
  const rings = index !== null && isRinged(index) ? points.filter((_, i) => i % RINGED_EVERY === 0) : [];
  return (
    <g className={className}>
      <path d={path} strokeDasharray={dash} />
      {rings.map((point) => (
        <circle key={point.at} cx={point.x} cy={point.y} r={2.5} />
      ))}
    </g>
  );
}

/** Where the value lies on an ever finer mesh: an area between its bounds. */
export function CurveBar({ curve, x, y }: Place & { curve: PlotCurve }) {
  const { bar } = curve;
  if (bar === undefined) return null;
  const edge = (values: readonly (number | null)[]): string[] =>
    bar.GHz.flatMap((GHz, at) => {
      const value = values[at] ?? null;
      return value === null ? [] : [`${x(GHz).toFixed(1)} ${y(value).toFixed(1)}`];
    });
  const outline = [...edge(bar.high), ...edge(bar.low).reverse()];
  return outline.length === 0 ? null : <path d={`M${outline.join("L")}Z`} className={styles.bar} />;
}

/** The sample of a curve's line, for lists and legends. */
export function CurveSample({ index, className }: { index: number; className: string | undefined }) {
  return (
    <svg width="22" height="7" aria-hidden="true" className={className}>
      <line x1="0" x2="22" y1="3.5" y2="3.5" strokeDasharray={dashOf(index)} />
      {isRinged(index) && <circle cx="11" cy="3.5" r="2.5" />}
    </svg>
  );
}
