import { useEffect, useLayoutEffect, useReducer, useRef, useState } from "react";
import { useTokenColours } from "../../hooks/token-colours";
import { formatFixed, formatSi, THIN_SPACE } from "../../lib/figures";
import { axisEnd, sampleAt } from "./decimate";
import { paintTraces, TRACE_LAYOUT, xToTime } from "./trace-painter";
import type { TraceStore } from "./trace-store";
import styles from "./traces.module.css";

const SMALLEST_ROW_PX = 34;

export interface TracePanelProps {
  store: TraceStore;
  nameOf: (probe: string) => string;
  selected: string | null;
  /** The moment of the field on the sheet, ns, read at each draw; null before there is one. */
  momentNs: () => number | null;
  /** What to say while there is nothing to draw. */
  empty: string;
}

/** Re-renders at most once per `intervalMs` while traces grow: for figures, not for the drawing. */
function useStoreTick(store: TraceStore, intervalMs: number): void {
  const [, tick] = useReducer((n: number) => n + 1, 0);
  useEffect(() => {
    let timer: ReturnType<typeof setTimeout> | null = null;
    tick();
    const leave = store.subscribe(() => {
      timer ??= setTimeout(() => {
        timer = null;
        tick();
      }, intervalMs);
    });
    return () => {
      leave();
      if (timer !== null) clearTimeout(timer);
    };
  }, [store, intervalMs]);
}

/** Every probe's trace as it grows, on one time axis whose cursor is the moment on the sheet. */
export function TracePanel({ store, nameOf, selected, momentNs, empty }: TracePanelProps) {
  const tokens = useTokenColours();
  const canvasRef = useRef<HTMLCanvasElement>(null);
  const [hoverNs, setHoverNs] = useState<number | null>(null);
  useStoreTick(store, 150);
  const traces = store.traces();
  const endNs = axisEnd(store.endNs());
  const moment = momentNs() ?? (traces.length > 0 ? store.endNs() : null);

  // Read by the drawing loop, which outlives a render.
  const latest = useRef({ tokens, nameOf, selected, momentNs, hoverNs });
  const redraw = useRef<() => void>(() => undefined);
  useLayoutEffect(() => {
    latest.current = { tokens, nameOf, selected, momentNs, hoverNs };
    redraw.current();
  });

  useEffect(() => {
    const canvas = canvasRef.current;
    const context = canvas?.getContext("2d");
    if (canvas === null || context === null || context === undefined) return;
    let animation = 0;
    const draw = (): void => {
      animation = 0;
      const ratio = globalThis.devicePixelRatio;
      const { clientWidth: widthPx, clientHeight: heightPx } = canvas;
      const width = Math.max(1, Math.round(widthPx * ratio));
      const height = Math.max(1, Math.round(heightPx * ratio));
      if (canvas.width !== width || canvas.height !== height) {
        canvas.width = width;
        canvas.height = height;
      }
      context.setTransform(ratio, 0, 0, ratio, 0, 0);
      const { momentNs: readMoment, ...picture } = latest.current;
      const end = store.endNs();
      paintTraces(context, {
        ...picture,
        traces: store.traces(),
        widthPx,
        heightPx,
        endNs: axisEnd(end),
        momentNs: readMoment() ?? (store.traces().length > 0 ? end : null),
      });
    };
    const markDirty = (): void => {
      if (animation === 0) animation = requestAnimationFrame(draw);
    };
    redraw.current = markDirty;
    const observer = new ResizeObserver(markDirty);
    observer.observe(canvas);
    const leave = store.subscribe(markDirty);
    return () => {
      leave();
      observer.disconnect();
      cancelAnimationFrame(animation);
      redraw.current = () => undefined;
    };
  }, [store]);

  const units = [...new Set(traces.map((trace) => trace.unit))];
  const rows = traces.length * SMALLEST_ROW_PX + TRACE_LAYOUT.axisHeight;
  const shownNs = hoverNs ?? moment;
  return (
    <section className={styles.panel} aria-label="Traces">
      <header className={styles.head}>
        <h2 className="label">Traces{units.length > 0 ? `, ${units.join(", ")}` : ""}</h2>
        {shownNs !== null && (
          <span className={styles.time}>
            t = {formatFixed(shownNs, 2)}
            {THIN_SPACE}ns
          </span>
        )}
      </header>
      <div className={styles.scroll}>
        <canvas
          ref={canvasRef}
          className={styles.canvas}
          style={{
            minHeight: `${rows.toString()}px`,
            visibility: traces.length === 0 ? "hidden" : "visible",
          }}
          role="img"
          aria-label={traces
            .map((trace) => `${nameOf(trace.probe)}: peak ${formatSi(trace.peak, trace.unit)}`)
            .join("; ")}
          onPointerMove={(event) => {
            const box = event.currentTarget.getBoundingClientRect();
            const time = xToTime(event.clientX - box.left, endNs, box.width);
            setHoverNs(time >= 0 && time <= endNs ? time : null);
          }}
          onPointerLeave={() => {
            setHoverNs(null);
          }}
        />
        {traces.length === 0 && <p className={styles.empty}>{empty}</p>}
      </div>
      {hoverNs !== null && (
        <ul className={styles.values} aria-label="Values under the cursor">
          {traces.map((trace) => {
            const value = sampleAt(trace, hoverNs);
            return (
              <li key={trace.probe}>
                {nameOf(trace.probe)} <b>{value === null ? "–" : formatSi(value, trace.unit)}</b>
              </li>
            );
          })}
        </ul>
      )}
    </section>
  );
}
