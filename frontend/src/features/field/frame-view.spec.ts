import type { Frame } from "@heddle/kernels/frames";
import { describe, expect, it } from "vitest";
import { valueAt } from "./frame-view";

const frame = (over: Partial<Frame>): Frame => ({
  quantity: "Ez",
  width: 2,
  height: 2,
  step: 0,
  timeNs: 0,
  sequence: 0,
  range: 10,
  peak: 10,
  levels: new Uint8Array([1, 255, 128, 128]),
  ...over,
});

describe("valueAt", () => {
  it("reads signed levels with row 0 at the bottom", () => {
    expect(valueAt(frame({}), 0.25, 0.25)).toBeCloseTo(-10, 12);
    expect(valueAt(frame({}), 0.75, 0.25)).toBeCloseTo(10, 12);
    expect(valueAt(frame({}), 0.25, 0.75)).toBe(0);
  });

  it("is bilinear between samples and flat in the outer half cells", () => {
    expect(valueAt(frame({}), 0.5, 0.25)).toBeCloseTo(0, 12);
    expect(valueAt(frame({}), 0.75, 0.5)).toBeCloseTo(5, 12);
    expect(valueAt(frame({}), 1, 0)).toBeCloseTo(10, 12);
  });

  it("reads levels without sign from 0", () => {
    const levels = new Uint8Array([0, 51, 102, 255]);
    expect(valueAt(frame({ quantity: "absE", levels }), 0.25, 0.75)).toBeCloseTo(4, 12);
  });

  it("knows nothing outside the section", () => {
    expect(valueAt(frame({}), -0.01, 0.5)).toBeNull();
    expect(valueAt(frame({}), 0.5, Number.NaN)).toBeNull();
  });
});
