import { describe, expect, it, vi } from "vitest";
import { createTraceStore } from "./trace-store";

const chunk = (from: number, values: number[], probe = "p1") => ({
  probe,
  unit: "V/m",
  startNs: 0,
  stepNs: 0.5,
  from,
  values,
});

const valuesOf = (store: ReturnType<typeof createTraceStore>, index = 0): number[] => {
  const trace = store.traces().at(index);
  return trace === undefined ? [] : [...trace.values.subarray(0, trace.length)];
};

describe("trace store", () => {
  it("grows by what is new and skips what is known", () => {
    const store = createTraceStore();
    store.reset("r", [chunk(0, [1, 2])]);
    expect(store.append("r", [chunk(1, [2, -3])])).toBe(true);
    expect(store.append("r", [chunk(0, [1])])).toBe(true);
    expect(valuesOf(store)).toEqual([1, 2, -3]);
    expect(store.traces()[0]?.peak).toBe(3);
    expect(store.endNs()).toBe(1);
  });

  it("tells a gap and keeps what it has", () => {
    const store = createTraceStore();
    store.reset("r", [chunk(0, [1])]);
    expect(store.append("r", [chunk(5, [9])])).toBe(false);
    expect(valuesOf(store)).toEqual([1]);
  });

  it("ignores another run's samples, without asking for them again", () => {
    const store = createTraceStore();
    store.reset("r", [chunk(0, [1])]);
    expect(store.append("other", [chunk(7, [9])])).toBe(true);
    expect(valuesOf(store)).toEqual([1]);
  });

  it("holds many samples of several probes", () => {
    const store = createTraceStore();
    const listener = vi.fn();
    store.subscribe(listener);
    store.reset("r", [chunk(0, [], "a"), chunk(0, [], "b")]);
    for (let i = 0; i < 50; i += 1) {
      const values = Array.from({ length: 100 }, (_, k) => i * 100 + k);
      store.append("r", [chunk(i * 100, values, "a"), chunk(i * 100, values, "b")]);
    }
    expect(store.traces()[1]?.length).toBe(5000);
    expect(valuesOf(store, 1)[4321]).toBe(4321);
    expect(listener).toHaveBeenCalledTimes(51);
  });
});
