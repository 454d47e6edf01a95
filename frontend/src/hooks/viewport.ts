import { createContext, useContext } from "react";

/**
 * Where the section lies on the sheet: millimetres of the section to CSS pixels of the drawing surface.
 * x runs right in both; y runs up in millimetres and down in pixels.
 */
export interface Viewport {
  pxPerMm: number;
  /** Pixel position of the section's origin, its lower-left corner. */
  originXPx: number;
  originYPx: number;
  /** Size of the drawing surface. */
  widthPx: number;
  heightPx: number;
}

export interface PointMm {
  xMm: number;
  yMm: number;
}

export interface PointPx {
  xPx: number;
  yPx: number;
}

export const toPx = (view: Viewport, at: PointMm): PointPx => ({
  xPx: view.originXPx + at.xMm * view.pxPerMm,
  yPx: view.originYPx - at.yMm * view.pxPerMm,
});

export const toMm = (view: Viewport, at: PointPx): PointMm => ({
  xMm: (at.xPx - view.originXPx) / view.pxPerMm,
  yMm: (view.originYPx - at.yPx) / view.pxPerMm,
});

/** Given by the sheet; read by every layer that lies on it (field, read-out). */
export const ViewportContext = createContext<Viewport | null>(null);

export function useViewport(): Viewport {
  const view = useContext(ViewportContext);
  if (view === null) throw new Error("useViewport is for layers inside the sheet.");
  return view;
}
