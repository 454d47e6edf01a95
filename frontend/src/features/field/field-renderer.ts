import type { Frame } from "@heddle/kernels/frames";

/** Where the section lies on the canvas, in CSS pixels. */
export interface Placement {
  leftPx: number;
  topPx: number;
  widthPx: number;
  heightPx: number;
  surfaceWidthPx: number;
  surfaceHeightPx: number;
}

/** Draws the latest frame; knows nothing of runs or React. */
export interface FieldRenderer {
  readonly kind: "webgl" | "canvas";
  /** Canvas size in device pixels. */
  resize(width: number, height: number): void;
  setFrame(frame: Frame | null): void;
  /** 256 × RGBA. */
  setColours(table: Uint8Array): void;
  draw(placement: Placement): void;
  destroy(): void;
}
