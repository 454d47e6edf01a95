import type { FieldQuantity } from "@heddle/kernels/frames";
import { isSigned } from "@heddle/kernels/frames";
import { useEffect, useMemo, useRef } from "react";
import { useTokenColours } from "../../hooks/token-colours";
import { formatSi, prefixOf, THIN_SPACE } from "../../lib/figures";
import type { Scale } from "./colour-maps";
import { colourOf, unscaled } from "./colour-maps";
import { parseColour } from "./colour-space";
import type { FieldSlot } from "./field-slot";
import { useFrameFacts } from "./frame-facts";
import { labelOf, nextRange, unitOf } from "./quantities";
import styles from "./field.module.css";

const BAR_WIDTH = 12;
const BAR_HEIGHT = 128;

export interface FieldKeyProps {
  slot: FieldSlot;
  quantity: FieldQuantity;
  quantities: readonly FieldQuantity[];
  onQuantity: (quantity: FieldQuantity) => void;
  /** The locked range in the quantity's unit; null: each frame's own peak. */
  range: number | null;
  onRange: (range: number | null) => void;
  scale: Scale;
  onScale: (scale: Scale) => void;
}

const LINEAR: Scale = { kind: "linear" };
const SYMLOG: Scale = { kind: "symlog", linearShare: 1 / 64 };

/** A figure in the prefix of the range, so that the key's ticks line up: +820, 0, −820. */
const tick = (value: number, factor: number, signed: boolean): string => {
  if (value === 0) return "0";
  const text = Number((Math.abs(value) / factor).toPrecision(3)).toString();
  return value < 0 ? `−${text}` : signed ? `+${text}` : text;
};

/** Colour key and how the field is shown: quantity, scale, range. */
export function FieldKey(props: FieldKeyProps) {
  const { slot, quantity, quantities, onQuantity, range, onRange, scale, onScale } = props;
  const facts = useFrameFacts(slot);
  const shown = facts?.quantity === quantity ? facts : null;
  const locked = range !== null;
  const full = range ?? (shown !== null && shown.range > 0 ? shown.range : null);
  const signed = isSigned(quantity);
  const { prefix, factor } = prefixOf(full ?? 1);
  const cut = locked && shown !== null && shown.peak > range * 1.001;
  const ticks = signed ? [1, 0.5, 0, -0.5, -1] : [1, 0.75, 0.5, 0.25, 0];
  return (
    <div className={styles.key} role="group" aria-label="Field shown">
      <select
        className={styles.select}
        aria-label="Quantity"
        value={quantity}
        onChange={(event) => {
          const chosen = quantities.find((candidate) => candidate === event.target.value);
          if (chosen !== undefined) onQuantity(chosen);
        }}
      >
        {quantities.map((candidate) => (
          <option key={candidate} value={candidate}>
            {labelOf(candidate)}
          </option>
        ))}
      </select>
      <div className={styles.bar}>
        <ColourBar signed={signed} scale={scale} />
        <ol className={styles.ticks} aria-label={`Colour key, ${unitOf(quantity)}`}>
          {ticks.map((place) => (
            <li key={place}>
              {full === null
                ? place === 0
                  ? "0"
                  : ""
                : tick(Math.sign(place) * unscaled(scale, Math.abs(place)) * full, factor, signed)}
            </li>
          ))}
        </ol>
      </div>
      <div className={styles.unit}>
        {full === null ? unitOf(quantity) : `${prefix}${unitOf(quantity)}`}
        {cut && (
          <div className={styles.cut} title="Values beyond the locked range are drawn as its end.">
            peak {formatSi(shown.peak, unitOf(quantity), 2)}
          </div>
        )}
      </div>
      <div className={styles.row}>
        <button
          type="button"
          className={styles.small}
          aria-pressed={locked}
          disabled={full === null}
          title={
            locked
              ? "The range is locked. Click to follow each frame's peak again."
              : "The range follows each frame's peak. Click to lock it, so that levels can be compared over time."
          }
          onClick={() => {
            onRange(locked ? null : full);
          }}
        >
          {locked ? "locked" : "auto"}
        </button>
      </div>
      {locked && (
        <div className={styles.row}>
          <button
            type="button"
            className={styles.small}
            aria-label="Smaller range: weaker fields become visible"
            onClick={() => {
              onRange(nextRange(range, -1));
            }}
          >
            −
          </button>
          <button
            type="button"
            className={styles.small}
            aria-label="Larger range"
            onClick={() => {
              onRange(nextRange(range, 1));
            }}
          >
            +
          </button>
        </div>
      )}
      <button
        type="button"
        className={styles.small}
        aria-pressed={scale.kind === "symlog"}
        title={`Linear, or logarithmic beyond 1/64 of the range on either side of zero${THIN_SPACE}`.trim()}
        onClick={() => {
          onScale(scale.kind === "linear" ? SYMLOG : LINEAR);
        }}
      >
        {scale.kind === "linear" ? "linear" : "sym. log"}
      </button>
    </div>
  );
}

function ColourBar({ signed, scale }: { signed: boolean; scale: Scale }) {
  const tokens = useTokenColours();
  const ref = useRef<HTMLCanvasElement>(null);
  const sheet = useMemo(() => parseColour(tokens.sheet) ?? ([255, 255, 255] as const), [tokens]);
  useEffect(() => {
    const context = ref.current?.getContext("2d");
    if (context === null || context === undefined) return;
    for (let row = 0; row < BAR_HEIGHT; row += 1) {
      const place = 1 - (row + 0.5) / BAR_HEIGHT;
      // The bar is even in what is drawn, so its ticks carry the scale.
      const along = signed ? 2 * place - 1 : place;
      const share = Math.sign(along) * unscaled(scale, Math.abs(along));
      context.fillStyle = `rgb(${colourOf({ signed, sheet, scale }, share).join(" ")})`;
      context.fillRect(0, row, BAR_WIDTH, 1);
    }
  }, [signed, scale, sheet]);
  return <canvas ref={ref} width={BAR_WIDTH} height={BAR_HEIGHT} aria-hidden="true" />;
}
