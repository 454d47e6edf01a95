import type { SolveResult } from "@heddle/kernels/scene";
import { useLayoutEffect, useMemo, useRef, useState } from "react";
import { figure, formatFixed, frequency, MINUS, THIN_SPACE } from "../../lib/figures";
import { ticks } from "./decimate";
import { ResonanceMarks } from "./resonance-marks";
import type { LevelCurve } from "./spectrum";
import { curvesOf, nearestIndex, rangeOf, whyNoSpectrum } from "./spectrum";
import styles from "./traces.module.css";

export interface SpectrumPanelProps {
  result: SolveResult | null;
  /** The clean result before this one, to compare with. */
  previous: { result: SolveResult; revision: number } | null;
  band: { fromGHz: number; toGHz: number };
  nameOf: (probe: string) => string;
  selected: string | null;
  /** What to say while there is no result. */
  empty: string;
}

const PAD = { left: 34, right: 10, top: 8, bottom: 20 };
/** Curves are told apart by dash as well as by place, never by colour alone. */
const DASHES = ["", "6 3", "2 2", "8 3 2 3", "1 3"];

function useSize(): [React.RefObject<HTMLDivElement | null>, { width: number; height: number }] {
  const ref = useRef<HTMLDivElement>(null);
  const [size, setSize] = useState({ width: 360, height: 160 });
  useLayoutEffect(() => {
    const element = ref.current;
    if (element === null) return;
    const observer = new ResizeObserver(() => {
      setSize({ width: element.clientWidth, height: element.clientHeight });
    });
    observer.observe(element);
    return () => {
      observer.disconnect();
    };
  }, []);
  return [ref, size];
}

/** Each probe's level over the band once the run is done, with the run before it for comparison. */
export function SpectrumPanel({ result, previous, band, nameOf, selected, empty }: SpectrumPanelProps) {
  const [box, { width, height }] = useSize();
  const [hoverGHz, setHoverGHz] = useState<number | null>(null);
  const curves = useMemo(() => (result === null ? [] : curvesOf(result)), [result]);
  const before = useMemo(() => (previous === null ? [] : curvesOf(previous.result)), [previous]);
  const why = result === null ? empty : whyNoSpectrum(result);
  const range = rangeOf(curves.length > 0 ? [...curves, ...before] : []);
  const x = (GHz: number): number =>
    PAD.left + ((GHz - band.fromGHz) / (band.toGHz - band.fromGHz)) * (width - PAD.left - PAD.right);
  const toGHz = (px: number): number =>
    band.fromGHz + ((px - PAD.left) / (width - PAD.left - PAD.right)) * (band.toGHz - band.fromGHz);
  const y = (dB: number): number =>
    range === null
      ? 0
      : PAD.top + ((range.high - dB) / (range.high - range.low)) * (height - PAD.top - PAD.bottom);
  const first = curves.at(0);
  const shown = hoverGHz ?? (first === undefined ? null : (first.GHz.at(strongest(first)) ?? null));
  const units = [...new Set(curves.map((curve) => curve.unit))];
  const completed = curves.some((curve) => curve.completed);
  return (
    <section className={styles.panel} aria-label="Spectrum">
      <header className={styles.head}>
        <h2 className="label">
          Level per unit source, dB{units.length > 0 ? ` re 1 ${units.join(", ")}` : ""}
        </h2>
        {before.length > 0 && previous !== null && curves.length > 0 && (
          <span className={styles.legend}>
            <svg width="18" height="6" aria-hidden="true">
              <line x1="0" x2="18" y1="3" y2="3" className={styles.before} />
            </svg>
            rev {previous.revision}
          </span>
        )}
      </header>
      <div ref={box} className={styles.plot}>
        {why !== null && <p className={styles.empty}>{why}</p>}
        {why === null && range !== null && width > PAD.left + PAD.right && (
          <svg
            width={width}
            height={height}
            role="img"
            aria-label={curves.map((curve) => describe(curve, nameOf)).join("; ")}
            onPointerMove={(event) => {
              const GHz = toGHz(event.clientX - event.currentTarget.getBoundingClientRect().left);
              setHoverGHz(GHz >= band.fromGHz && GHz <= band.toGHz ? GHz : null);
            }}
            onPointerLeave={() => {
              setHoverGHz(null);
            }}
          >
            <clipPath id="spectrum-area">
              <rect
                x={PAD.left}
                y={PAD.top}
                width={width - PAD.left - PAD.right}
                height={Math.max(0, height - PAD.top - PAD.bottom)}
              />
            </clipPath>
            {ticks(range.low, range.high, Math.max(2, Math.floor(height / 36))).map((dB) => (
              <g key={dB}>
                <line x1={PAD.left} x2={width - PAD.right} y1={y(dB)} y2={y(dB)} className={styles.grid} />
                <text
                  x={PAD.left - 6}
                  y={y(dB)}
                  className={styles.tick}
                  textAnchor="end"
                  dominantBaseline="middle"
                >
                  {dB < 0 ? `${MINUS}${(-dB).toString()}` : dB.toString()}
                </text>
              </g>
            ))}
            {frequencyTicks(band, width).map(({ GHz, label, anchor }) => (
              <text key={GHz} x={x(GHz)} y={height - 6} className={styles.tick} textAnchor={anchor}>
                {label}
              </text>
            ))}
            <ResonanceMarks
              resonances={result?.resonances ?? []}
              band={band}
              x={x}
              top={PAD.top}
              bottom={height - PAD.bottom}
            />
            <g clipPath="url(#spectrum-area)">
              {before.map((curve) => (
                <Curve key={curve.probe} curve={curve} x={x} y={y} className={styles.before} dash="4 3" />
              ))}
              {curves.map((curve, index) => (
                <Curve
                  key={curve.probe}
                  curve={curve}
                  x={x}
                  y={y}
                  className={curve.probe === selected ? styles.chosen : styles.curve}
                  dash={DASHES[index % DASHES.length] ?? ""}
                />
              ))}
              {hoverGHz !== null && (
                <line
                  x1={x(hoverGHz)}
                  x2={x(hoverGHz)}
                  y1={PAD.top}
                  y2={height - PAD.bottom}
                  className={styles.cursor}
                />
              )}
            </g>
          </svg>
        )}
      </div>
      {why === null && shown !== null && (
        <ul
          className={styles.values}
          aria-label={hoverGHz === null ? "Strongest level" : "Levels under the cursor"}
        >
          <li>
            <b>{frequency(shown)}</b>
          </li>
          {curves.map((curve, index) => {
            const level = curve.dB[nearestIndex(curve.GHz, shown)] ?? null;
            return (
              <li key={curve.probe}>
                <svg width="18" height="6" aria-hidden="true">
                  <line
                    x1="0"
                    x2="18"
                    y1="3"
                    y2="3"
                    className={curve.probe === selected ? styles.chosen : styles.curve}
                    strokeDasharray={DASHES[index % DASHES.length]}
                  />
                </svg>{" "}
                {nameOf(curve.probe)}{" "}
                <b>{level === null ? "–" : `${formatFixed(level, 1)}${THIN_SPACE}dB`}</b>
              </li>
            );
          })}
        </ul>
      )}
      {completed && (
        <p className={styles.note}>
          Some traces had not died away at the stop and were completed by their fitted poles.
        </p>
      )}
    </section>
  );
}

function strongest(curve: LevelCurve): number {
  let best = 0;
  curve.dB.forEach((value, index) => {
    if (value !== null && value > (curve.dB[best] ?? Number.NEGATIVE_INFINITY)) best = index;
  });
  return best;
}

const describe = (curve: LevelCurve, nameOf: (probe: string) => string): string => {
  const at = strongest(curve);
  const level = curve.dB[at] ?? null;
  return level === null
    ? `${nameOf(curve.probe)}: no level`
    : `${nameOf(curve.probe)}: strongest ${formatFixed(level, 1)} dB at ${frequency(curve.GHz[at] ?? 0)}`;
};

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

interface CurveProps {
  curve: LevelCurve;
  x: (GHz: number) => number;
  y: (dB: number) => number;
  className: string | undefined;
  dash: string;
}

/** A line through the levels that are defined; a single line of a tone as a stem with a ring. */
function Curve({ curve, x, y, className, dash }: CurveProps) {
  const points = curve.GHz.flatMap((GHz, index) => {
    const level = curve.dB[index] ?? null;
    return level === null ? [] : [{ x: x(GHz), y: y(level), index }];
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
      const joined = points[i - 1]?.index === point.index - 1;
      return `${joined ? "L" : "M"}${point.x.toFixed(1)} ${point.y.toFixed(1)}`;
    })
    .join("");
  return <path d={path} className={className} strokeDasharray={dash} />;
}
