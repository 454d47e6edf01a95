import { type PointPx, toMm, type Viewport } from "../../../hooks/viewport";
import type { BoxMm } from "../geometry/points";

/** Pixels kept free between the surface's edges and what is fitted into it. */
export interface Insets {
  left: number;
  top: number;
  right: number;
  bottom: number;
}

/** From a kilometre across the sheet down to a micrometre a pixel. */
const SCALE = { least: 1e-3, most: 2e3 } as const;

export const clampScale = (pxPerMm: number): number => Math.min(SCALE.most, Math.max(SCALE.least, pxPerMm));

/** The view in which `box` is as large as the free area allows, and in its middle. */
export function fitBox(box: BoxMm, size: { widthPx: number; heightPx: number }, insets: Insets): Viewport {
  const free = {
    width: Math.max(20, size.widthPx - insets.left - insets.right),
    height: Math.max(20, size.heightPx - insets.top - insets.bottom),
  };
  const [width, height] = [Math.max(1e-6, box.right - box.left), Math.max(1e-6, box.top - box.bottom)];
  const pxPerMm = clampScale(Math.min(free.width / width, free.height / height));
  return {
    pxPerMm,
    originXPx: insets.left + free.width / 2 - ((box.left + box.right) / 2) * pxPerMm,
    originYPx: insets.top + free.height / 2 + ((box.bottom + box.top) / 2) * pxPerMm,
    // Named one by one: a caller may give a whole view as the size.
    widthPx: size.widthPx,
    heightPx: size.heightPx,
  };
}

/**
 * Fits the section beside or above a title block that sits in the lower right corner, whichever leaves the
 * section larger, so that the block covers none of it. What else stands at the right edge may stand above the block.
 */
export function fitClearOf(
  box: BoxMm,
  size: { widthPx: number; heightPx: number },
  insets: Insets,
  block: { widthPx: number; heightPx: number } | null,
): Viewport {
  if (block === null) return fitBox(box, size, insets);
  const beside = fitBox(box, size, { ...insets, right: Math.max(insets.right, block.widthPx) });
  const above = fitBox(box, size, { ...insets, bottom: insets.bottom + block.heightPx });
  return beside.pxPerMm > above.pxPerMm ? beside : above;
}

/** Zooms by `factor` while the point of the section under `at` stays under it. */
export function zoomAt(view: Viewport, at: PointPx, factor: number): Viewport {
  const fixed = toMm(view, at);
  const pxPerMm = clampScale(view.pxPerMm * factor);
  return {
    ...view,
    pxPerMm,
    originXPx: at.xPx - fixed.xMm * pxPerMm,
    originYPx: at.yPx + fixed.yMm * pxPerMm,
  };
}

export const panBy = (view: Viewport, dxPx: number, dyPx: number): Viewport => ({
  ...view,
  originXPx: view.originXPx + dxPx,
  originYPx: view.originYPx + dyPx,
});

/** The same scale and middle on a surface of another size. */
export const resizeView = (view: Viewport, widthPx: number, heightPx: number): Viewport => ({
  ...panBy(view, (widthPx - view.widthPx) / 2, (heightPx - view.heightPx) / 2),
  widthPx,
  heightPx,
});

/** The part of the section's plane that the surface shows. */
export function visibleBox(view: Viewport): BoxMm {
  const lowerLeft = toMm(view, { xPx: 0, yPx: view.heightPx });
  const upperRight = toMm(view, { xPx: view.widthPx, yPx: 0 });
  return { left: lowerLeft.xMm, bottom: lowerLeft.yMm, right: upperRight.xMm, top: upperRight.yMm };
}
