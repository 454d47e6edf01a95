import { useLayoutEffect, useMemo, useRef, useState } from "react";
import { decibels, figure, formatFixed, frequency, MINUS, THIN_SPACE } from "../../../lib/figures";
import type { StackPlan, StackPoint } from "./stack-draft";
import { curveOf, floorDb, pointAt } from "./stack-draft";

const PAD = { left: 38, right: 12, top: 10, bottom: 24 };
const HEIGHT = 220;

const level = (dB: number): string => (dB < -200 ? `under ${MINUS}200${THIN_SPACE}dB` : decibels(dB));

/** "At 10 GHz: reflected −20.1 dB, passed −3.0 dB, absorbed 49 %." */
export function pointWords({ GHz, reflectedDb, transmittedDb, absorbed }: StackPoint): string {
  const passed = transmittedDb === null ? "" : `, passed ${level(transmittedDb)}`;
  const share = formatFixed(100 * Math.max(0, absorbed), 1);
  return `At ${frequency(GHz)}: reflected ${level(reflectedDb)}${passed}, absorbed ${share}${THIN_SPACE}%`;
}

/** Reflected and passed power over frequency, in dB of the incident. */
export function StackChart({ plan }: { plan: StackPlan }) {
  const box = useRef<HTMLDivElement>(null);
  const [width, setWidth] = useState(480);
  const [hoverGHz, setHoverGHz] = useState<number | null>(null);
  useLayoutEffect(() => {
    const element = box.current;
    if (element === null) return;
    const observer = new ResizeObserver(() => setWidth(element.clientWidth));
    observer.observe(element);
    return () => observer.disconnect();
  }, []);
  const points = useMemo(() => curveOf(plan), [plan]);
  const floor = floorDb(points);
  const { fromGHz, toGHz } = plan;
  const inner = Math.max(1, width - PAD.left - PAD.right);
  const x = (GHz: number): number => PAD.left + ((GHz - fromGHz) / (toGHz - fromGHz)) * inner;
  const y = (dB: number): number => PAD.top + (Math.max(floor, dB) / floor) * (HEIGHT - PAD.top - PAD.bottom);
  const path = (of: (point: StackPoint) => number | null): string =>
    points
      .flatMap((point) => {
        const dB = of(point);
        return dB === null ? [] : [`${x(point.GHz).toFixed(1)},${y(dB).toFixed(1)}`];
      })
      .join(" ");
  const transmitted = path((point) => point.transmittedDb);
  const inRange = hoverGHz !== null && hoverGHz >= fromGHz && hoverGHz <= toGHz;
  const deepest = points.reduce((best, point) => (point.reflectedDb < best.reflectedDb ? point : best));
  const shown = inRange ? pointAt(plan, hoverGHz) : deepest;
  const steps = floor <= -60 ? 20 : 10;
  const lines = Array.from({ length: Math.floor(-floor / steps) + 1 }, (_, n) => -n * steps);
  return (
    <div className="stack-chart">
      <div className="stack-legend" aria-hidden="true">
        <span>
          <svg width="22" height="6">
            <line x1="0" x2="22" y1="3" y2="3" className="stack-reflected" />
          </svg>
          reflected
        </span>
        {transmitted === "" ? null : (
          <span>
            <svg width="22" height="6">
              <line x1="0" x2="22" y1="3" y2="3" className="stack-passed" />
            </svg>
            passed
          </span>
        )}
      </div>
      <div ref={box}>
        <svg
          width={width}
          height={HEIGHT}
          role="img"
          aria-label={`Power in dB of the incident from ${frequency(fromGHz)} to ${frequency(toGHz)}; least reflected: ${pointWords(deepest)}`}
          onPointerMove={(event) => {
            const px = event.clientX - event.currentTarget.getBoundingClientRect().left;
            setHoverGHz(fromGHz + ((px - PAD.left) / inner) * (toGHz - fromGHz));
          }}
          onPointerLeave={() => setHoverGHz(null)}
        >
          {lines.map((dB) => (
            <g key={dB}>
              <line x1={PAD.left} x2={width - PAD.right} y1={y(dB)} y2={y(dB)} className="stack-grid" />
              <text
                x={PAD.left - 6}
                y={y(dB)}
                className="stack-tick"
                textAnchor="end"
                dominantBaseline="middle"
              >
                {dB === 0 ? "0 dB" : `${MINUS}${String(-dB)}`}
              </text>
            </g>
          ))}
          {[0, 0.25, 0.5, 0.75, 1].map((share) => {
            const GHz = fromGHz + share * (toGHz - fromGHz);
            const last = share === 1 ? `${THIN_SPACE}GHz` : "";
            return (
              <text
                key={share}
                x={x(GHz)}
                y={HEIGHT - 6}
                className="stack-tick"
                textAnchor={share === 0 ? "start" : share === 1 ? "end" : "middle"}
              >
                {figure(GHz)}
                {last}
              </text>
            );
          })}
          <polyline points={path((point) => point.reflectedDb)} className="stack-reflected" />
          {transmitted === "" ? null : <polyline points={transmitted} className="stack-passed" />}
          <line
            x1={x(shown.GHz)}
            x2={x(shown.GHz)}
            y1={PAD.top}
            y2={HEIGHT - PAD.bottom}
            className="stack-cursor"
          />
        </svg>
      </div>
      <p className="stack-words" aria-live="polite">
        {pointWords(shown)}
        {inRange ? "" : ", where least is reflected"}.
      </p>
    </div>
  );
}
