import { describe, expect, it } from "vitest";
import { fourierSum } from "../analysis/index.js";
import { RunningTransform } from "./index.js";

const STEP = 2e-12;
const frequencies = [1.3e9, 9e9, 2e9, 5.5e9];

/** A ringing pulse with much outside the band, and one that is cut off while it rings. */
const signals: readonly ((n: number) => number)[] = [
  (n) => Math.exp(-(((n - 300) / 40) ** 2)) * Math.sin(0.11 * n) + Math.exp(-n / 900) * Math.sin(1.9 * n),
  (n) => Math.exp(-n / 4000) * Math.sin(0.07 * n),
];
const starts = [STEP, 0.5 * STEP];

describe("a running transform", () => {
  it.each([
    [frequencies, 18],
    [[3e9, 200e9], 1],
  ])("is the Fourier sum of all samples, %j Hz by every sample number %i", (asked, decimation) => {
    const running = new RunningTransform(
      starts.map((start) => ({ start })),
      STEP,
      asked,
    );
    expect(running.decimation).toBe(decimation);
    const count = 3001;
    for (let from = 0, steps = 1; from < count; from += steps, steps = Math.min(count - from, steps * 3)) {
      const records = Float64Array.from({ length: 2 * steps }, (_, k) => signals[k % 2](from + (k >> 1)));
      running.append(records, steps);
    }
    const got = running.finish();
    signals.forEach((signal, channel) => {
      const values = Float64Array.from({ length: count }, (_, n) => signal(n));
      const expected = fourierSum({ start: starts[channel], step: STEP, values }, asked);
      // What the filter lets through of the strongest line of the whole spectrum, 120 dB down.
      const all = Array.from({ length: 500 }, (_, k) => k * 0.5e9);
      const whole = fourierSum({ start: 0, step: STEP, values }, all);
      const strongest = whole.re.reduce((most, re, k) => Math.max(most, Math.hypot(re, whole.im[k])), 0);
      asked.forEach((_, index) => {
        const error = Math.hypot(
          got[channel].re[index] - expected.re[index],
          got[channel].im[index] - expected.im[index],
        );
        expect(error / strongest).toBeLessThan(1e-6);
      });
    });
  });

  it("refuses frequencies that samples cannot hold", () => {
    expect(() => new RunningTransform([{ start: 0 }], STEP, [3e11])).toThrow(RangeError);
    expect(() => new RunningTransform([{ start: 0 }], STEP, [])).toThrow(RangeError);
  });
});
