import type { Frame } from "@heddle/kernels/frames";
import type { PointMm } from "../../hooks/viewport";
import { formatFixed, formatSi, THIN_SPACE } from "../../lib/figures";
import type { SectionSize } from "./field-layer";
import type { FieldSlot } from "./field-slot";
import { useFrameFacts } from "./frame-facts";
import { resolution, valueAt } from "./frame-view";
import { labelOf, unitOf } from "./quantities";
import styles from "./field.module.css";

export interface FieldReadoutProps {
  slot: FieldSlot;
  section: SectionSize;
  at: PointMm | null;
  /** Cells of the run's grid; null before a run has one. */
  grid: { nx: number; ny: number } | null;
  /** The name of the medium at a point of the section. */
  mediumAt: (at: PointMm) => string | null;
}

/** Under the pointer: place, cell, value and medium, in one line. */
export function FieldReadout({ slot, section, at, grid, mediumAt }: FieldReadoutProps) {
  // Renews the line while a run goes on under a resting pointer.
  useFrameFacts(slot);
  const frame = slot.latest();
  const inside =
    at !== null && at.xMm >= 0 && at.yMm >= 0 && at.xMm <= section.widthMm && at.yMm <= section.heightMm;
  if (!inside) return <output className={styles.readout} aria-label="Under the pointer" />;
  const across = at.xMm / section.widthMm;
  const up = at.yMm / section.heightMm;
  const value = frame === null ? null : valueAt(frame, across, up);
  const cell = (share: number, count: number): number => Math.min(count - 1, Math.floor(share * count));
  return (
    <output className={styles.readout} aria-label="Under the pointer">
      <span>
        x {formatFixed(at.xMm, 2)} y {formatFixed(at.yMm, 2)}
        {THIN_SPACE}mm
      </span>
      {grid !== null && (
        <span>
          cell {cell(across, grid.nx)}, {cell(up, grid.ny)}
        </span>
      )}
      {frame !== null && value !== null && (
        <span>
          {labelOf(frame.quantity)} {valueWords(frame, value)}
        </span>
      )}
      <span>{mediumAt(at) ?? ""}</span>
    </output>
  );
}

/** As exactly as the levels know it: small values are bounded by half a level, cut ones by the range. */
function valueWords(frame: Frame, value: number): string {
  const unit = unitOf(frame.quantity);
  if (Math.abs(value) < resolution(frame)) return `under ${formatSi(resolution(frame), unit, 1)}`;
  const cut = frame.peak > frame.range * 1.001 && Math.abs(value) > frame.range * 0.999;
  return `${cut ? "beyond " : ""}${formatSi(value, unit)}`;
}
