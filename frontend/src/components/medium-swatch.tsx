import type { Medium } from "@heddle/kernels/scene";
import { useId } from "react";
import { hatchOf } from "../lib/hatch";

interface MediumSwatchProps {
  medium: Medium;
  width?: number;
  height?: number;
}

/** A small cut of a medium, hatched as it is on the sheet. */
export function MediumSwatch({ medium, width = 34, height = 22 }: MediumSwatchProps) {
  const id = useId();
  const hatch = hatchOf(medium);
  const falling = hatch.perfect === "magnetic" ? 5 : hatch.fallingPx;
  const rising = hatch.perfect === "electric" ? 5 : hatch.risingPx;
  const stroke = (name: string, spacing: number, angle: number) => (
    <pattern
      id={`${id}${name}`}
      width={spacing}
      height={spacing}
      patternUnits="userSpaceOnUse"
      patternTransform={`rotate(${angle})`}
    >
      <line
        x1={0}
        y1={0}
        x2={0}
        y2={spacing}
        stroke="var(--ink)"
        strokeWidth={hatch.perfect === null ? 0.9 : 1.1}
      />
    </pattern>
  );
  const tint = hatch.perfect === null ? hatch.tint * 0.3 : 0.2;
  const fill = hatch.perfect === null ? "var(--accent)" : "var(--hairline)";
  const whole = { x: 0.5, y: 0.5, width: width - 1, height: height - 1 };
  return (
    <svg width={width} height={height} aria-hidden="true" style={{ display: "block", flex: "none" }}>
      <defs>
        {falling === null ? null : stroke("f", falling, -45)}
        {rising === null ? null : stroke("r", rising, 45)}
      </defs>
      <rect {...whole} fill="var(--sheet)" />
      <rect {...whole} fill={fill} fillOpacity={hatch.perfect === null ? tint : 0.5} />
      {falling === null ? null : <rect {...whole} fill={`url(#${id}f)`} />}
      {rising === null ? null : <rect {...whole} fill={`url(#${id}r)`} />}
      <rect {...whole} fill="none" stroke="var(--ink)" strokeWidth={1} />
    </svg>
  );
}
