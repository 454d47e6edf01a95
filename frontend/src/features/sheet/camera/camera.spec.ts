import { describe, expect, it } from "vitest";
import { toMm, toPx } from "../../../hooks/viewport";
import { SheetEditor } from "../document/editor";
import { emptyScene } from "../driver/sheet-driver";
import { fitBox, fitClearOf, zoomAt } from "./camera";
import { gridStepMm, isMultiple, roundStep, scaleBarMm, tickSteps } from "./ticks";

const section = { left: 0, bottom: 0, right: 300, top: 200 };
const insets = { left: 40, top: 30, right: 20, bottom: 44 };

describe("view", () => {
  it("turns millimetres into pixels and back", () => {
    const view = fitBox(section, { widthPx: 900, heightPx: 600 }, insets);
    const there = toPx(view, { xMm: 12.3, yMm: 45.6 });
    const back = toMm(view, there);
    expect(back.xMm).toBeCloseTo(12.3, 10);
    expect(back.yMm).toBeCloseTo(45.6, 10);
  });

  it("fits the section into what the insets leave", () => {
    const view = fitBox(section, { widthPx: 900, heightPx: 600 }, insets);
    const low = toPx(view, { xMm: 0, yMm: 0 });
    const high = toPx(view, { xMm: 300, yMm: 200 });
    expect(low.xPx).toBeGreaterThanOrEqual(40 - 1e-9);
    expect(high.xPx).toBeLessThanOrEqual(880 + 1e-9);
    expect(high.yPx).toBeGreaterThanOrEqual(30 - 1e-9);
    expect(low.yPx).toBeLessThanOrEqual(556 + 1e-9);
  });

  it.each([
    [1000, 480],
    [700, 900],
    [936, 466],
  ])("keeps the section clear of a block in the corner of a %i × %i sheet", (widthPx, heightPx) => {
    const block = { widthPx: 330, heightPx: 120 };
    const view = fitClearOf(section, { widthPx, heightPx }, insets, block);
    const corner = toPx(view, { xMm: 300, yMm: 0 });
    const beside = corner.xPx <= widthPx - block.widthPx + 1e-9;
    const above = corner.yPx <= heightPx - insets.bottom - block.heightPx + 1e-9;
    expect(beside || above).toBe(true);
  });

  it("zooms with the point under the pointer standing still", () => {
    const view = fitBox(section, { widthPx: 900, heightPx: 600 }, insets);
    const at = { xPx: 333, yPx: 222 };
    const fixed = toMm(view, at);
    const near = zoomAt(zoomAt(view, at, 3.7), at, 1.9);
    expect(near.pxPerMm).toBeCloseTo(view.pxPerMm * 7.03, 9);
    expect(toPx(near, fixed).xPx).toBeCloseTo(333, 8);
    expect(toPx(near, fixed).yPx).toBeCloseTo(222, 8);
  });
});

describe("a sheet that is opened", () => {
  it("fits the section at once and again when the surface changes size, until the user zooms", () => {
    const editor = new SheetEditor(emptyScene());
    editor.resize(1000, 600);
    const first = editor.view;
    expect(first.pxPerMm).toBeCloseTo((1000 - 48) / 200, 10);
    editor.resize(500, 600);
    expect(editor.view.pxPerMm).toBeCloseTo((500 - 48) / 200, 10);
    editor.zoom(2);
    editor.resize(1000, 600);
    expect(editor.view.pxPerMm).toBeCloseTo((2 * (500 - 48)) / 200, 10);
    editor.fit();
    expect(editor.view).toEqual(first);
  });
});

describe("ticks", () => {
  it.each([
    [0.7, 1],
    [1, 1],
    [1.1, 2],
    [2.1, 5],
    [51, 100],
    [0.03, 0.05],
  ])("rounds a step of at least %f up to %f", (least, step) => {
    expect(roundStep(least)).toBe(step);
  });

  it("has readable distances and round numbers at every zoom", () => {
    for (let exponent = -3; exponent <= 3; exponent += 0.05) {
      const pxPerMm = 10 ** exponent;
      const { labelledMm, minorMm, middleMm } = tickSteps(pxPerMm);
      expect(labelledMm * pxPerMm).toBeGreaterThanOrEqual(64 - 1e-6);
      expect(labelledMm * pxPerMm).toBeLessThanOrEqual(64 * 2.5 + 1e-6);
      expect(minorMm * pxPerMm).toBeGreaterThanOrEqual(5 - 1e-6);
      expect(isMultiple(labelledMm, minorMm)).toBe(true);
      if (middleMm !== null) expect(isMultiple(middleMm, minorMm)).toBe(true);
      expect(scaleBarMm(pxPerMm) * pxPerMm).toBeLessThanOrEqual(150);
      expect(scaleBarMm(pxPerMm) * pxPerMm).toBeGreaterThan(50);
      expect(gridStepMm(pxPerMm) * pxPerMm).toBeGreaterThanOrEqual(6 - 1e-6);
    }
  });
});
