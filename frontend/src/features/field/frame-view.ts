/** Reading values back from a frame's 8-bit levels. */
import type { Frame } from "@heddle/kernels/frames";
import { isSigned } from "@heddle/kernels/frames";
import type { NdArray } from "ndarray";
import ndarray from "ndarray";
import { shareOfLevel } from "./colour-maps";

/** The levels as [row, column]; row 0 is the bottom of the section. */
export const levelView = (frame: Frame): NdArray<Uint8Array> =>
  ndarray(frame.levels, [frame.height, frame.width]);

/** Half a level in the quantity's unit: as exactly as a read-out can know the value. */
export const resolution = (frame: Frame): number => frame.range / (isSigned(frame.quantity) ? 254 : 510);

/**
 * The value at a place given as shares of the section's width and height (0…1, from the lower-left corner), bilinear
 * between the frame's samples, in the quantity's SI unit; null outside the section.
 */
export function valueAt(frame: Frame, acrossShare: number, upShare: number): number | null {
  if (!(acrossShare >= 0 && acrossShare <= 1 && upShare >= 0 && upShare <= 1)) return null;
  const levels = levelView(frame);
  const signed = isSigned(frame.quantity);
  const x = Math.min(frame.width - 1, Math.max(0, acrossShare * frame.width - 0.5));
  const y = Math.min(frame.height - 1, Math.max(0, upShare * frame.height - 0.5));
  const column = Math.min(frame.width - 1, Math.floor(x));
  const row = Math.min(frame.height - 1, Math.floor(y));
  const right = Math.min(frame.width - 1, column + 1);
  const above = Math.min(frame.height - 1, row + 1);
  const share = (r: number, c: number): number => shareOfLevel(levels.get(r, c), signed);
  const tx = x - column;
  const ty = y - row;
  const lower = share(row, column) * (1 - tx) + share(row, right) * tx;
  const upper = share(above, column) * (1 - tx) + share(above, right) * tx;
  return (lower * (1 - ty) + upper * ty) * frame.range;
}
