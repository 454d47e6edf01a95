import type { SolveResult } from "@heddle/kernels/scene";
import Button from "@mui/material/Button";
import { decibels, frequency } from "../../lib/figures";

export interface ShieldingPanelProps {
  /** Some patch of the drawing is marked as a shield. */
  marked: boolean;
  result: SolveResult | null;
  /** The result belongs to an earlier revision than the one drawn. */
  outdated: boolean;
  /** A run with and without the shield is under way. */
  underWay: boolean;
  /** Starts one; null where none may be started now. */
  onRun: (() => void) | null;
  refusal: string | null;
  nameOf: (probe: string) => string;
}

type Shielding = NonNullable<SolveResult["shielding"]>[number];

/** The least shielding of the band, and where; null where none is defined. */
export function leastOf({ GHz, dB }: Shielding): { dB: number; GHz: number } | null {
  return GHz.reduce<{ dB: number; GHz: number } | null>((least, at, n) => {
    const value = dB[n] ?? null;
    return value === null || (least !== null && least.dB <= value) ? least : { dB: value, GHz: at };
  }, null);
}

/** What the marked patches keep away, or the way to ask for it. Nothing where none is marked. */
export function ShieldingPanel(props: ShieldingPanelProps) {
  const { marked, result, outdated, underWay, onRun, refusal, nameOf } = props;
  const shielding = result?.shielding;
  if (!marked && shielding === undefined) return null;
  return (
    <section className="side-part" aria-label="Shielding">
      <h2 className="label">Shielding, least</h2>
      {shielding === undefined ? (
        underWay ? (
          <p className="quiet">Being run with and without the shield.</p>
        ) : (
          <Button
            size="small"
            disabled={onRun === null}
            title={refusal ?? "Runs the scene as it is and without the patches marked as shield"}
            onClick={() => {
              onRun?.();
            }}
          >
            Run without the shield, too
          </Button>
        )
      ) : (
        <>
          {outdated && <p className="quiet">Of the last run; the drawing has changed since.</p>}
          <dl className="figures">
            {shielding.map((one) => {
              const least = leastOf(one);
              return (
                <div key={one.probe}>
                  <dt title={nameOf(one.probe)}>{nameOf(one.probe)}</dt>
                  <dd>
                    {least === null ? "not defined" : `${decibels(least.dB)} at ${frequency(least.GHz)}`}
                  </dd>
                </div>
              );
            })}
          </dl>
        </>
      )}
    </section>
  );
}
