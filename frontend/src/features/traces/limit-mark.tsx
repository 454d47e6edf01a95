import { marginDb } from "../../lib/figures";
import type { LimitLine } from "./limit-lines";
import styles from "./traces.module.css";

export interface LimitMarkProps {
  limit: LimitLine;
  x: (GHz: number) => number;
  y: (dB: number) => number;
  /** The plot's edges, px: words stay within. */
  edges: { top: number; right: number; bottom: number };
}

const STROKE_EVERY_PX = 9;
const STROKE_PX = 6;
const WORDS_PX = 90;
const WORDS = { true: "kept", false: "broken", null: "not judged" };

/** A limit's line, with short strokes on the side where the curve must not be. */
export function LimitMark({ limit, x, y, edges }: LimitMarkProps) {
  const points = limit.points.map(({ GHz, dB }) => ({ x: x(GHz), y: y(dB) }));
  const only = points.at(0);
  if (only === undefined) return null;
  const away = limit.sense === "below" ? -STROKE_PX : STROKE_PX;
  const name = limit.holds === false ? styles.limitBroken : styles.limit;
  const stroke = (px: number, py: number): string =>
    `M${px.toFixed(1)} ${py.toFixed(1)}l${(STROKE_PX / 2).toString()} ${away.toString()}`;
  const strokes: string[] = [];
  if (points.length === 1)
    strokes.push(`M${(only.x - 4).toFixed(1)} ${only.y.toFixed(1)}h8`, stroke(only.x, only.y));
  points.forEach((point, index) => {
    const next = points.at(index + 1);
    if (next === undefined) return;
    const count = Math.max(1, Math.round((next.x - point.x) / STROKE_EVERY_PX));
    for (let n = 0; n < count; n += 1) {
      const share = n / count;
      strokes.push(stroke(point.x + share * (next.x - point.x), point.y + share * (next.y - point.y)));
    }
  });
  const line = points.map((point) => `${point.x.toFixed(1)} ${point.y.toFixed(1)}`).join("L");
  return (
    <g className={name}>
      <title>{`${limit.name}, ${WORDS[`${limit.holds}`]}`}</title>
      <path d={`M${line}`} />
      <path d={strokes.join("")} className={styles.limitStrokes} />
      <Margin limit={limit} x={x} y={y} edges={edges} />
    </g>
  );
}

/** Where the curve comes nearest to the limit, or breaks it worst: a dimension between the two. */
function Margin({ limit: { margin, atGHz, sense, points, holds }, x, y, edges }: LimitMarkProps) {
  if (margin === null || atGHz === null) return null;
  const nearest = points.reduce<LimitLine["points"][number] | null>(
    (best, point) =>
      best === null || Math.abs(point.GHz - atGHz) < Math.abs(best.GHz - atGHz) ? point : best,
    null,
  );
  if (nearest === null) return null;
  const [px, limitY] = [x(atGHz), y(nearest.dB)];
  const curveY = y(sense === "below" ? nearest.dB - margin : nearest.dB + margin);
  const outward = sense === "below" ? -10 : 18;
  const turned = px > edges.right - WORDS_PX;
  return (
    <g className={styles.margin}>
      <path d={`M${(px - 3).toFixed(1)} ${curveY.toFixed(1)}h6m-3 0V${limitY.toFixed(1)}`} />
      <text
        x={turned ? px - 5 : px + 5}
        y={Math.min(Math.max(limitY + outward, edges.top + 10), edges.bottom - 4)}
        textAnchor={turned ? "end" : "start"}
      >
        {holds === true ? `${marginDb(margin)} to spare` : `${marginDb(-margin)} over`}
      </text>
    </g>
  );
}
