import type { Viewport } from "../../../hooks/viewport";
import { visibleBox } from "../camera/camera";
import { roundStep } from "../camera/ticks";
import type { Drawing } from "../document/drawing";
import { type BoxMm, boxCentre, roundMm, type Xy } from "../geometry/points";

/** The middle of what is seen of the section, on a round millimetre. */
export function defaultPoint(drawing: Drawing, view: Viewport): Xy {
  const box = seen(drawing, view);
  const step = roundStep(Math.min(box.right - box.left, box.top - box.bottom) / 40);
  const [x, y] = boxCentre(box);
  return [roundMm(Math.round(x / step) * step), roundMm(Math.round(y / step) * step)];
}

/** A box in the middle of what is seen of the section, about a fifth of it wide, on round millimetres. */
export function defaultBox(drawing: Drawing, view: Viewport): BoxMm {
  const box = seen(drawing, view);
  const size = roundStep(Math.min(box.right - box.left, box.top - box.bottom) / 10);
  const [x, y] = defaultPoint(drawing, view);
  return {
    left: roundMm(x - size),
    right: roundMm(x + size),
    bottom: roundMm(y - size / 2),
    top: roundMm(y + size / 2),
  };
}

function seen(drawing: Drawing, view: Viewport): BoxMm {
  const whole = { left: 0, bottom: 0, right: drawing.widthMm, top: drawing.heightMm };
  if (view.widthPx === 0) return whole;
  const visible = visibleBox(view);
  const part = {
    left: Math.max(0, visible.left),
    bottom: Math.max(0, visible.bottom),
    right: Math.min(drawing.widthMm, visible.right),
    top: Math.min(drawing.heightMm, visible.top),
  };
  return part.left < part.right && part.bottom < part.top ? part : whole;
}
