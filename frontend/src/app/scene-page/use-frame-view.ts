import type { FieldQuantity } from "@heddle/kernels/frames";
import { useEffect, useMemo, useState } from "react";
import type { FrameView } from "../../features/runs";
import type { SheetEditor } from "../../features/sheet";
import { useSheet } from "../../features/sheet";

/** Sizes are asked for in these steps, so that zooming asks seldom and viewers of one run can share frames. */
const STEP_PX = 128;
const LARGEST_PX = 2048;
/** A zoom under way asks once it rests. */
const REST_MS = 200;
const FRAMES_PER_SECOND = 30;

export const frameSide = (lengthMm: number, pxPerMm: number, pixelRatio: number): number =>
  Math.min(LARGEST_PX, Math.max(STEP_PX, STEP_PX * Math.ceil((lengthMm * pxPerMm * pixelRatio) / STEP_PX)));

/** The frames that the sheet as it is shown can use. */
export function useFrameView(editor: SheetEditor, quantity: FieldQuantity, range: number | null): FrameView {
  const ratio = Math.min(2, globalThis.devicePixelRatio);
  const width = useSheet(editor, ({ drawing, view }) => frameSide(drawing.widthMm, view.pxPerMm, ratio));
  const height = useSheet(editor, ({ drawing, view }) => frameSide(drawing.heightMm, view.pxPerMm, ratio));
  const [size, setSize] = useState({ width, height });
  useEffect(() => {
    const timer = setTimeout(() => {
      setSize((before) => (before.width === width && before.height === height ? before : { width, height }));
    }, REST_MS);
    return () => {
      clearTimeout(timer);
    };
  }, [width, height]);
  return useMemo(
    () => ({ quantity, range, ...size, framesPerSecond: FRAMES_PER_SECOND }),
    [quantity, range, size],
  );
}
