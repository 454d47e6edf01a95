import type { Resonance } from "@heddle/kernels/scene";
import { frequency } from "../../lib/figures";
import styles from "./traces.module.css";

export interface ResonanceMarksProps {
  resonances: readonly Resonance[];
  band: { fromGHz: number; toGHz: number };
  x: (GHz: number) => number;
  top: number;
  bottom: number;
}

/** A tick at the top of the plot and a faint line down to the axis where the section rings. */
export function ResonanceMarks({ resonances, band, x, top, bottom }: ResonanceMarksProps) {
  return (
    <g>
      {resonances
        .filter(({ GHz }) => GHz >= band.fromGHz && GHz <= band.toGHz)
        .map(({ GHz }) => (
          <g key={GHz}>
            <title>{`Rings at ${frequency(GHz, 5)}`}</title>
            <line x1={x(GHz)} x2={x(GHz)} y1={top} y2={bottom} className={styles.ring} />
            <path d={`M${x(GHz).toString()} ${(top + 6).toString()}l-4 -6h8z`} className={styles.ringMark} />
          </g>
        ))}
    </g>
  );
}
