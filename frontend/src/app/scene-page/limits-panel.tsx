import type { Limit, LimitResult, SolveResult } from "@heddle/kernels/scene";
import { figure, formatFixed, frequency, marginDb, THIN_SPACE } from "../../lib/figures";

export interface LimitsPanelProps {
  limits: readonly Limit[];
  result: SolveResult | null;
  /** The result belongs to an earlier revision than the one drawn. */
  outdated: boolean;
}

/** A margin in the unit of its limit: dB of lines, else that of the number itself. */
function marginWords(limit: Limit, margin: number): string {
  if ("points" in limit) return marginDb(margin);
  if ("absorbedShare" in limit.of) return `${formatFixed(margin * 100, 1)}${THIN_SPACE}points`;
  return "cutoff" in limit.of ? frequency(margin) : figure(margin, 3);
}

/** "kept by 3.2 dB at 9.86 GHz", "broken by …", or "not judged". */
export function verdictWords(limit: Limit, judged: LimitResult | undefined): string {
  if (judged === undefined || judged.holds === null || judged.margin === null) return "not judged";
  const { holds, margin, atGHz, uncertainty } = judged;
  const by = marginWords(limit, Math.abs(margin));
  const around = uncertainty === null ? "" : `${THIN_SPACE}±${THIN_SPACE}${marginWords(limit, uncertainty)}`;
  const at = atGHz === null ? "" : ` at ${frequency(atGHz)}`;
  return `${holds ? "kept" : "broken"} by ${by}${around}${at}`;
}

/** The scene's limits with what the last run says of them. Nothing where it has none. */
export function LimitsPanel({ limits, result, outdated }: LimitsPanelProps) {
  if (limits.length === 0) return null;
  return (
    <section className="side-part" aria-label="Limits">
      <h2 className="label">Limits</h2>
      {result === null ? (
        <p className="quiet">Run the scene to judge them.</p>
      ) : (
        outdated && <p className="quiet">Of the last run; the drawing has changed since.</p>
      )}
      <ul className="limits">
        {limits.map((limit) => {
          const judged = result?.limits?.find(({ id }) => id === limit.id);
          return (
            <li key={limit.id}>
              {limit.name}
              {result !== null && (
                <span className={judged?.holds === false ? "verdict broken" : "verdict"}>
                  {verdictWords(limit, judged)}
                </span>
              )}
            </li>
          );
        })}
      </ul>
    </section>
  );
}
