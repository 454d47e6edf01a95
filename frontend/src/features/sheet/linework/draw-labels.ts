import type { Pen } from "./draw-paint";
import { drawText, textWidth } from "./draw-text";

/** Height that a line of a label takes, in CSS pixels. */
const LINE_PX = 15;

interface Box {
  left: number;
  top: number;
  right: number;
  bottom: number;
}

interface Label {
  text: string;
  x: number;
  y: number;
  gap: number;
}

const overlap = (a: Box, b: Box): number =>
  Math.max(0, Math.min(a.right, b.right) - Math.max(a.left, b.left)) *
  Math.max(0, Math.min(a.bottom, b.bottom) - Math.max(a.top, b.top));

/** Labels of marks, drawn together so that they keep clear of the marks and of each other. */
export interface LabelBoard {
  /** A rectangle that labels should leave free. */
  occupy: (left: number, top: number, width: number, height: number) => void;
  /** A label for the point: `gap` pixels to its right, or where there is more room to its left, above or below. */
  add: (text: string, x: number, y: number, gap: number) => void;
  draw: () => void;
}

export function labelBoard(pen: Pen): LabelBoard {
  const taken: Box[] = [];
  const labels: Label[] = [];
  const draw = (): void => {
    for (const { text, x, y, gap } of labels) {
      const width = textWidth(pen, text);
      const places = [
        [x + gap, y],
        [x - 8 - width, y],
        [x + gap, y - LINE_PX],
        [x + gap, y + LINE_PX],
        [x - width / 2, y + 2 * LINE_PX],
        [x - width / 2, y - 1.5 * LINE_PX],
      ] as const;
      let best: { cost: number; box: Box } | null = null;
      for (const [left, middle] of places) {
        const box = { left, top: middle - LINE_PX / 2, right: left + width, bottom: middle + LINE_PX / 2 };
        const cost = taken.reduce((sum, other) => sum + overlap(box, other), 0);
        // The first of equal places stands, so that a label stays to the right where it can.
        if (best === null || cost < best.cost) best = { cost, box };
      }
      if (best === null) continue;
      taken.push(best.box);
      drawText(pen, text, best.box.left, (best.box.top + best.box.bottom) / 2);
    }
  };
  return {
    occupy: (left, top, width, height) => {
      taken.push({ left, top, right: left + width, bottom: top + height });
    },
    add: (text, x, y, gap) => {
      labels.push({ text, x, y, gap });
    },
    draw,
  };
}
