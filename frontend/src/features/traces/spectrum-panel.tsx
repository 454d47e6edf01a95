import type { Limit, SolveResult } from "@heddle/kernels/scene";
import { useMemo, useState } from "react";
import { formatFixed, frequency, THIN_SPACE } from "../../lib/figures";
import { CurveValues } from "./curve-values";
import type { PlotCurve } from "./curves";
import { FrequencyPlot } from "./frequency-plot";
import { guideTicks } from "./s-curves";
import { whyNoSpectrum } from "./spectrum";
import styles from "./traces.module.css";
import { useSize } from "./use-size";
import type { PlotView, ViewKind } from "./views";
import { viewKinds, viewName, viewOf } from "./views";

export interface SpectrumPanelProps {
  result: SolveResult | null;
  /** The clean result before this one, to compare with. */
  previous: { result: SolveResult; revision: number } | null;
  band: { fromGHz: number; toGHz: number };
  limits: readonly Limit[];
  nameOf: (probe: string) => string;
  selected: string | null;
  /** What to say while there is no result. */
  empty: string;
}

/** S-parameters of the ports, shielding and the probes' levels over the band once the run is done, with the run before it. */
export function SpectrumPanel({ result, empty, ...others }: SpectrumPanelProps) {
  const why = result === null ? empty : whyNoSpectrum(result);
  const kinds = useMemo(() => (result === null ? [] : viewKinds(result)), [result]);
  const [asked, setAsked] = useState<ViewKind | null>(null);
  const kind = asked !== null && kinds.includes(asked) ? asked : kinds.at(0);
  return (
    <section className={styles.panel} aria-label="Spectrum">
      {why !== null || result === null || kind === undefined ? (
        <>
          <header className={styles.head}>
            <h2 className="label">Level per unit source, dB</h2>
          </header>
          <div className={styles.plot}>
            <p className={styles.empty}>{why}</p>
          </div>
        </>
      ) : (
        <Spectrum key={kind} result={result} kind={kind} kinds={kinds} onKind={setAsked} {...others} />
      )}
    </section>
  );
}

interface SpectrumProps extends Omit<SpectrumPanelProps, "result" | "empty"> {
  result: SolveResult;
  kind: ViewKind;
  kinds: readonly ViewKind[];
  onKind: (kind: ViewKind) => void;
}

function Spectrum(props: SpectrumProps) {
  const { result, previous, kind, kinds, onKind, band, limits, nameOf, selected } = props;
  const [box, { width, height }] = useSize();
  const [cursorGHz, setCursorGHz] = useState<number | null>(null);
  const [hidden, setHidden] = useState<ReadonlySet<string>>(new Set());
  const view = useMemo(
    () => viewOf(kind, { result, previous: previous?.result ?? null, limits, nameOf, selected }),
    [kind, result, previous, limits, nameOf, selected],
  );
  const curves = view.curves.map((curve, index) => ({ ...curve, index }));
  const shown = curves.filter(({ key }) => !hidden.has(key));
  const first = view.curves.at(0);
  // Where a limit is nearest, else where the first curve is largest.
  const atLimit = view.limits.find(({ atGHz }) => atGHz !== null)?.atGHz ?? null;
  const restGHz = atLimit ?? (first === undefined ? null : (first.GHz[strongest(first)] ?? null));
  const GHz = cursorGHz ?? restGHz;
  const guide =
    result.ports === undefined || kind.startsWith("probes")
      ? []
      : guideTicks(result.ports, Math.floor(width / 110));
  return (
    <>
      <header className={styles.head}>
        <h2 className="label">{view.title}</h2>
        <span className={styles.legend}>
          {view.curves.some(({ bar }) => bar !== undefined) && (
            <span title="Where a curve lies at zero cell size, by the run on two meshes">
              <svg width="18" height="8" aria-hidden="true">
                <rect width="18" height="8" className={styles.bar} />
              </svg>{" "}
              zero cell size
            </span>
          )}
          {view.before.length > 0 && previous !== null && (
            <span>
              <svg width="18" height="6" aria-hidden="true">
                <line x1="0" x2="18" y1="3" y2="3" className={styles.before} />
              </svg>{" "}
              rev {previous.revision}
            </span>
          )}
          {kinds.length > 1 && <Views kind={kind} kinds={kinds} onKind={onKind} />}
        </span>
      </header>
      <div ref={box} className={styles.plot}>
        {view.range === null ? (
          <p className={styles.empty}>No value is defined in the band.</p>
        ) : (
          <FrequencyPlot
            width={width}
            height={height}
            band={band}
            range={view.range}
            turn={view.turn}
            curves={shown}
            before={view.before}
            limits={view.limits}
            resonances={result.resonances ?? []}
            guide={guide}
            selected={selected}
            label={describe(view)}
            cursorGHz={cursorGHz}
            onCursor={setCursorGHz}
          />
        )}
      </div>
      {GHz !== null && (
        <CurveValues
          curves={curves}
          GHz={GHz}
          label={
            cursorGHz === null ? REST_LABELS[atLimit === null ? "peak" : "limit"] : "Values under the cursor"
          }
          unit={view.unit}
          decimals={view.decimals}
          selected={selected}
          hidden={hidden}
          onToggle={(key) => {
            const next = new Set(hidden);
            if (!next.delete(key)) next.add(key);
            setHidden(next);
          }}
        />
      )}
      {view.notes.length > 0 && <p className={styles.note}>{view.notes.join(" ")}</p>}
    </>
  );
}

const REST_LABELS = {
  limit: "Values where the limit is nearest",
  peak: "Values where the first curve is largest",
};

function Views({ kind, kinds, onKind }: Pick<SpectrumProps, "kind" | "kinds" | "onKind">) {
  return (
    <span className={styles.views} role="group" aria-label="What the spectrum shows">
      {kinds.map((one) => (
        <button
          key={one}
          type="button"
          aria-pressed={one === kind}
          onClick={() => {
            onKind(one);
          }}
        >
          {viewName(one, kinds)}
        </button>
      ))}
    </span>
  );
}

function strongest(curve: PlotCurve): number {
  let best = 0;
  curve.values.forEach((value, index) => {
    if (value !== null && value > (curve.values[best] ?? Number.NEGATIVE_INFINITY)) best = index;
  });
  return best;
}

/** The picture in words, for who cannot see it. */
const describe = ({ curves, unit, decimals }: PlotView): string =>
  curves
    .map((curve) => {
      const at = strongest(curve);
      const value = curve.values[at] ?? null;
      return value === null
        ? `${curve.label}: no value`
        : `${curve.label}: largest ${formatFixed(value, decimals)}${THIN_SPACE}${unit} at ${frequency(curve.GHz[at] ?? 0)}`;
    })
    .join("; ");
