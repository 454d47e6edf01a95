import { describe, expect, it, vi } from "vitest";
import { completeRingDown, fourierSum, resonancesOf } from "./index.js";

vi.setConfig({ testTimeout: 60_000 });

const DT = 5e-12;
const BAND = { from: 1e9, to: 4e9 };
interface Mode {
  GHz: number;
  q: number;
  amplitude: number;
}
const MODES: Mode[] = [
  { GHz: 1.7, q: 900, amplitude: 1 },
  { GHz: 2.9, q: 400, amplitude: 0.3 },
];
const ring = (modes: readonly Mode[], samples: number) => ({
  start: DT,
  step: DT,
  values: Float64Array.from({ length: samples }, (_, n) =>
    modes.reduce((sum, { GHz, q, amplitude }) => {
      const omega = 2e9 * Math.PI * GHz;
      return sum + amplitude * Math.exp((-omega * n * DT) / (2 * q)) * Math.sin(omega * n * DT + 0.4);
    }, 0),
  ),
});
const FREQUENCIES = [1.69e9, 1.7e9, 1.701e9, 2.3e9, 2.9e9];

describe("a cut-off ring-down", () => {
  it("is completed to the spectrum of the whole one", () => {
    const whole = fourierSum(ring(MODES, 1_000_000), FREQUENCIES);
    const cut = ring(MODES, 20_000);
    const seen = fourierSum(cut, FREQUENCIES);
    const completion = completeRingDown(cut, BAND, 0, FREQUENCIES, 16);
    if (!completion) throw new Error("not completed");
    expect(completion.left).toBeLessThan(1e-4);
    FREQUENCIES.forEach((_, n) => {
      const size = Math.hypot(whole.re[n], whole.im[n]);
      const off = Math.hypot(
        seen.re[n] + completion.tail.re[n] - whole.re[n],
        seen.im[n] + completion.tail.im[n] - whole.im[n],
      );
      expect(off / size).toBeLessThan(1e-5);
    });
    expect(Math.hypot(seen.re[1], seen.im[1]) / Math.hypot(whole.re[1], whole.im[1])).toBeLessThan(0.6);
  });

  it("that does not decay, or has a part that no pole tells, says so", () => {
    expect(
      completeRingDown(ring([{ GHz: 2, q: 1e12, amplitude: 1 }], 20_000), BAND, 0, FREQUENCIES, 16),
    ).toBeNull();
    const cut = ring(MODES, 20_000);
    let state = 1;
    const values = cut.values.map((value) => {
      state = (Math.imul(1664525, state) + 1013904223) >>> 0;
      return value + 0.1 * (state / 2 ** 31 - 1);
    });
    const left = completeRingDown({ ...cut, values }, BAND, 0, FREQUENCIES, 16)?.left ?? 1;
    expect(left).toBeGreaterThan(0.01);
  });
});

describe("resonances", () => {
  it("stand once for several probes, with a level that the spectrum has there", () => {
    // One impulse drives: its transform is 1 everywhere.
    const waveform = { start: 0, step: DT, values: Float64Array.of(1 / DT) };
    const probes = [
      { id: "a", signal: ring(MODES, 400_000) },
      { id: "b", signal: ring([{ ...MODES[0], amplitude: 0.1 }], 400_000) },
    ];
    const found = resonancesOf(probes, BAND, 0, waveform);
    expect(found.map(({ hz }) => Math.round(hz / 1e6))).toEqual([1700, 2900]);
    found.forEach((resonance, n) => {
      expect(Math.abs((resonance.q ?? 0) / MODES[n].q - 1)).toBeLessThan(1e-4);
      const signal = probes.find(({ id }) => id === resonance.probe)?.signal;
      if (!signal) throw new Error("no such probe");
      const { re, im } = fourierSum(signal, [resonance.hz]);
      expect(resonance.levelDb).toBeCloseTo(20 * Math.log10(Math.hypot(re[0], im[0])), 1);
    });
  });

  it("have no Q where nothing decays", () => {
    const [found] = resonancesOf(
      [{ id: "a", signal: ring([{ GHz: 2, q: 1e13, amplitude: 1 }], 60_000) }],
      BAND,
      0,
      null,
    );
    expect(found).toMatchObject({ q: null, qUncertainty: null, levelDb: null });
    expect(found.hz / 2e9).toBeCloseTo(1, 7);
  });
});
