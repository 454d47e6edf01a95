import type { Resonance, SolveResult } from "@heddle/kernels/scene";
import { figure, frequency, THIN_SPACE } from "../../lib/figures";

export interface RingPanelProps {
  result: SolveResult | null;
  /** The result belongs to an earlier revision than the one drawn. */
  outdated: boolean;
  nameOf: (probe: string) => string;
}

/** The strongest; a crowded band has dozens. */
const SHOWN = 6;
const MOST_DIGITS = 6;

/** Significant digits of a value that its uncertainty leaves meaningful, one more for rounding. */
export function digitsOf(value: number, uncertainty: number | null): number {
  if (uncertainty === null || !(uncertainty > 0)) return 4;
  const digits = Math.ceil(Math.log10(value / uncertainty)) + 1;
  return Math.min(MOST_DIGITS, Math.max(2, digits));
}

/** "297.4 ± 0.3"; a decay too slow to be told has no Q. */
export function qualityInWords(q: number | null, uncertainty: number | null): string {
  if (q === null) return "too high to tell";
  const value = figure(q, digitsOf(q, uncertainty));
  return uncertainty === null ? value : `${value}${THIN_SPACE}±${THIN_SPACE}${figure(uncertainty, 1)}`;
}

/** A mode that does not decay is the strongest of all. */
const strength = ({ levelDb }: Resonance): number => levelDb ?? Number.POSITIVE_INFINITY;

/** The strongest resonances in rising order, and how many were left out. */
export function shownResonances(all: readonly Resonance[]): { shown: Resonance[]; more: number } {
  const shown = [...all]
    .sort((a, b) => (strength(b) === strength(a) ? a.GHz - b.GHz : strength(b) - strength(a)))
    .slice(0, SHOWN)
    .sort((a, b) => a.GHz - b.GHz);
  return { shown, more: all.length - shown.length };
}

/** Where the section rings in its band, and how sharply. Nothing where the run did not look for it. */
export function RingPanel({ result, outdated, nameOf }: RingPanelProps) {
  if (result?.resonances === undefined) return null;
  const { shown, more } = shownResonances(result.resonances);
  const withPlates = shown.some(({ qWithPlates }) => qWithPlates !== undefined);
  return (
    <section className="side-part" aria-label="Resonances">
      <h2 className="label">Rings at</h2>
      {shown.length === 0 ? (
        <p className="quiet">Nothing rings in the band.</p>
      ) : (
        <>
          {outdated && <p className="quiet">Of the last run; the drawing has changed since.</p>}
          <dl className="figures">
            {shown.map(({ GHz, ghzUncertainty, q, qWithPlates, qUncertainty, probe }) => (
              <div key={GHz}>
                <dt title={`Told best by ${nameOf(probe)}`}>
                  {frequency(GHz, digitsOf(GHz, ghzUncertainty))}
                </dt>
                <dd>
                  Q{THIN_SPACE}
                  {qWithPlates === undefined || qWithPlates === null
                    ? qualityInWords(q, qUncertainty)
                    : figure(qWithPlates, Math.min(4, digitsOf(qWithPlates, qUncertainty)))}
                </dd>
              </div>
            ))}
          </dl>
          {withPlates && <p className="quiet">Q with the loss of the plates above and below.</p>}
          {more > 0 && <p className="quiet">and {more} weaker.</p>}
        </>
      )}
    </section>
  );
}
