import type { Length } from "@heddle/kernels/scene";
import type { ParameterValues } from "../document/lengths";
import { LengthField } from "./fields";

type Point = [Length, Length];

/** Longer lists are edited on the sheet. */
const MOST_ROWS = 40;

/** The points of a polygon, wall or film as a table of x and y. */
export function PointsEntry(props: {
  points: readonly Point[];
  parameters: ParameterValues;
  /** The shape needs at least so many. */
  fewest: number;
  disabled: boolean;
  onCommit: (points: Point[]) => void;
}) {
  const { points, parameters, fewest, disabled, onCommit } = props;
  if (points.length > MOST_ROWS)
    return <p className="panel-note">{String(points.length)} points; move them on the sheet.</p>;
  const replace = (at: number, point: Point): void => {
    onCommit(points.map((old, i) => (i === at ? point : old)));
  };
  return (
    <div className="points-entry" role="group" aria-label="Points">
      {points.map((point, i) => (
        // Points have no name of their own: their place in the outline is what they are.
        <div key={i} className="points-row">
          <LengthField
            label={`x${String(i + 1)}`}
            value={point[0]}
            parameters={parameters}
            disabled={disabled}
            onCommit={(x) => {
              replace(i, [x, point[1]]);
            }}
          />
          <LengthField
            label={`y${String(i + 1)}`}
            value={point[1]}
            parameters={parameters}
            disabled={disabled}
            onCommit={(y) => {
              replace(i, [point[0], y]);
            }}
          />
          {disabled || points.length <= fewest ? null : (
            <button
              type="button"
              className="shelf-edit"
              aria-label={`Remove point ${String(i + 1)}`}
              onClick={() => {
                onCommit(points.filter((_, at) => at !== i));
              }}
            >
              ×
            </button>
          )}
        </div>
      ))}
    </div>
  );
}
