import type { Frame } from "@heddle/kernels/frames";
import { describe, expect, it, vi } from "vitest";
import { createFieldSlot } from "./field-slot";

const frame = (sequence: number): Frame => ({
  quantity: "Ez",
  width: 2,
  height: 1,
  step: sequence * 10,
  timeNs: sequence,
  sequence,
  range: 1,
  peak: 1,
  levels: new Uint8Array([128, 255]),
});

describe("field slot", () => {
  it("keeps only the latest frame and settles each once, drawn or replaced", () => {
    const slot = createFieldSlot();
    const settled: number[] = [];
    for (const n of [1, 2, 3]) slot.put(frame(n), () => settled.push(n));
    expect(slot.latest()?.sequence).toBe(3);
    expect(settled).toEqual([1, 2]);
    slot.drawn();
    slot.drawn();
    expect(settled).toEqual([1, 2, 3]);
    expect(slot.latest()?.sequence).toBe(3);
  });

  it("settles what was never drawn when it is cleared", () => {
    const slot = createFieldSlot();
    const settle = vi.fn();
    slot.put(frame(1), settle);
    slot.clear();
    expect(settle).toHaveBeenCalledTimes(1);
    expect(slot.latest()).toBeNull();
  });

  it("tells its listeners until they leave", () => {
    const slot = createFieldSlot();
    const listener = vi.fn();
    const leave = slot.subscribe(listener);
    slot.put(frame(1), () => undefined);
    leave();
    slot.put(frame(2), () => undefined);
    expect(listener).toHaveBeenCalledTimes(1);
  });
});
