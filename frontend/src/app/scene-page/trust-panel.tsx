import type { Medium, SolveResult } from "@heddle/kernels/scene";
import { decibels, figure, frequency, THIN_SPACE } from "../../lib/figures";
import type { MeshCheckProps } from "./mesh-check";
import { MeshCheck } from "./mesh-check";

export interface TrustPanelProps {
  result: SolveResult | null;
  mediaById: ReadonlyMap<string, Medium>;
  /** The result belongs to an earlier revision than the one drawn. */
  outdated: boolean;
  /** What was left out by drawing a section. */
  caution: string;
  check: Omit<MeshCheckProps, "result">;
}

const SHOWN_WARNINGS = 4;
/** The coarsest meshed; finer ones need no attention. */
const SHOWN_MEDIA = 3;

/** How good the answer is, in a few figures, and what the section leaves out. */
export function TrustPanel({ result, mediaById, outdated, caution, check }: TrustPanelProps) {
  return (
    <section className="side-part" aria-label="Trust">
      <h2 className="label">Trust</h2>
      {result === null ? (
        <p className="quiet">
          {check.underWay
            ? "Being solved on its own and on a finer mesh."
            : "Run the scene to see how good its answer is."}
        </p>
      ) : (
        <>
          {outdated && <p className="quiet">Of the last run; the drawing has changed since.</p>}
          <Figures result={result} mediaById={mediaById} />
          <MeshCheck result={result} {...check} />
          {result.quality.warnings.length > 0 && (
            <ul className="warnings">
              {result.quality.warnings.slice(0, SHOWN_WARNINGS).map((warning) => (
                <li key={warning}>{warning}</li>
              ))}
              {result.quality.warnings.length > SHOWN_WARNINGS && (
                <li>and {result.quality.warnings.length - SHOWN_WARNINGS} more.</li>
              )}
            </ul>
          )}
        </>
      )}
      <p className="caution">{caution}</p>
    </section>
  );
}

/** Where the power balance closes worst; null where the run kept none. */
export function worstMismatch({ balance }: SolveResult): { share: number; GHz: number } | null {
  if (balance === undefined) return null;
  return balance.GHz.reduce<{ share: number; GHz: number } | null>((worst, GHz, n) => {
    const mismatch = balance.mismatch[n] ?? null;
    if (mismatch === null) return worst;
    const share = Math.abs(mismatch);
    return worst !== null && worst.share >= share ? worst : { share, GHz };
  }, null);
}

function Figures({ result, mediaById }: { result: SolveResult; mediaById: ReadonlyMap<string, Medium> }) {
  const { quality } = result;
  const media = Object.entries(quality.cellsPerWavelength).sort(([, a], [, b]) => a - b);
  const { energyLeft, boundaryReflectionDb } = quality;
  const mismatch = worstMismatch(result);
  return (
    <>
      <dl className="figures">
        <div>
          <dt>Dispersion error</dt>
          <dd>
            {figure(quality.dispersionError * 100, 2)}
            {THIN_SPACE}%
          </dd>
        </div>
        {energyLeft !== null && (
          <div>
            <dt>Energy left</dt>
            <dd>{energyLeft > 0 ? decibels(10 * Math.log10(energyLeft)) : "none"}</dd>
          </div>
        )}
        {boundaryReflectionDb !== null && (
          <div>
            <dt>Edge reflection</dt>
            <dd>{decibels(boundaryReflectionDb, 0)}</dd>
          </div>
        )}
        {mismatch !== null && (
          <div>
            <dt title="Power in that is neither absorbed nor leaves, where it is most">Power unaccounted</dt>
            <dd>
              {figure(mismatch.share * 100, 2)}
              {THIN_SPACE}% at {frequency(mismatch.GHz)}
            </dd>
          </div>
        )}
      </dl>
      <h3>Cells per wavelength</h3>
      <dl className="figures">
        {media.slice(0, SHOWN_MEDIA).map(([id, cells]) => {
          const name = mediaById.get(id)?.name ?? id;
          return (
            <div key={id}>
              <dt title={name}>{name}</dt>
              <dd>{figure(cells, 3)}</dd>
            </div>
          );
        })}
      </dl>
    </>
  );
}
