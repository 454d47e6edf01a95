import { describe, expect, it, vi } from "vitest";
import { complexMatrix } from "./complex-matrix.js";
import { complexEigenvalues } from "./eigenvalues.js";
import { ringDownPoles } from "./index.js";
import { rightSingular } from "./right-singular.js";

vi.setConfig({ testTimeout: 60_000 });

/** Evenly spread numbers in −1 … 1, the same each time (linear congruence of D. E. Knuth, TAOCP vol. 2). */
function randomNumbers(seed: number): () => number {
  let state = seed;
  return () => {
    state = (Math.imul(1664525, state) + 1013904223) >>> 0;
    return state / 2 ** 31 - 1;
  };
}
const gaussian = (next: () => number): number =>
  Array.from({ length: 12 }, next).reduce((sum, value) => sum + value, 0) / 2;

interface Mode {
  GHz: number;
  q: number;
  amplitude: number;
}
const DT = 5e-12;
function trace(modes: readonly Mode[], samples: number, noise = 0): Float64Array {
  const next = randomNumbers(7);
  return Float64Array.from({ length: samples }, (_, n) => {
    const t = n * DT;
    const clean = modes.reduce((sum, { GHz, q, amplitude }, index) => {
      const omega = 2e9 * Math.PI * GHz;
      return sum + amplitude * Math.exp((-omega * t) / (2 * q)) * Math.cos(omega * t + index);
    }, 0);
    return clean + (noise > 0 ? noise * gaussian(next) : 0);
  });
}
const find = (values: Float64Array, from = 1e9, to = 4e9) =>
  ringDownPoles(values, DT, { from, to }, 16).map((pole) => ({
    GHz: pole.omega / 2e9 / Math.PI,
    q: pole.omega / 2 / pole.alpha,
    amplitude: 2 * Math.hypot(pole.re, pole.im),
    qUncertainty: ((pole.omega / 2 / pole.alpha) * pole.alphaUncertainty) / pole.alpha,
  }));

describe("linear algebra of the pencil", () => {
  it("gives the singular values of a matrix with known ones", () => {
    // Columns of a unitary Fourier matrix times 3, 2, 1e-9.
    const matrix = complexMatrix(8, 3);
    [3, 2, 1e-9].forEach((size, j) => {
      for (let i = 0; i < 8; i += 1) {
        const phase = (2 * Math.PI * i * j) / 8;
        matrix.re[i + 8 * j] = (size * Math.cos(phase)) / Math.sqrt(8);
        matrix.im[i + 8 * j] = (size * Math.sin(phase)) / Math.sqrt(8);
      }
    });
    const { values } = rightSingular(matrix);
    expect(values[0]).toBeCloseTo(3, 12);
    expect(values[1]).toBeCloseTo(2, 12);
    expect(values[2] / 1e-9).toBeCloseTo(1, 6);
  });

  it("gives the eigenvalues of the companion matrix of a known polynomial", () => {
    const roots: [number, number][] = [
      [1, 0],
      [0.5, 0.8],
      [-0.3, 0.2],
      [0.5, -0.8],
      [0, 1.5],
    ];
    let coefficients: [number, number][] = [[1, 0]];
    for (const [rr, ri] of roots) {
      const next: [number, number][] = [...coefficients, [0, 0]];
      coefficients.forEach(([cr, ci], k) => {
        const [nr, ni] = next[k + 1];
        next[k + 1] = [nr - (cr * rr - ci * ri), ni - (cr * ri + ci * rr)];
      });
      coefficients = next;
    }
    const matrix = complexMatrix(5, 5);
    for (let i = 1; i < 5; i += 1) matrix.re[i + 5 * (i - 1)] = 1;
    for (let i = 0; i < 5; i += 1) {
      matrix.re[i + 20] = -coefficients[5 - i][0];
      matrix.im[i + 20] = -coefficients[5 - i][1];
    }
    const found = complexEigenvalues(matrix);
    for (const [re, im] of roots) {
      const distance = Math.min(...found.map(([a, b]) => Math.hypot(a - re, b - im)));
      expect(distance).toBeLessThan(1e-11);
    }
  });
});

describe("poles of a ring-down", () => {
  const modes: Mode[] = [
    { GHz: 1.3, q: 300, amplitude: 1 },
    { GHz: 2.2, q: 45, amplitude: 0.5 },
    { GHz: 3.61, q: 1200, amplitude: 0.02 },
  ];

  it("are those of a clean sum of damped cosines, with their amplitudes", () => {
    const found = find(trace(modes, 30_000));
    expect(found).toHaveLength(3);
    found.forEach((pole, index) => {
      expect(Math.abs(pole.GHz / modes[index].GHz - 1)).toBeLessThan(1e-8);
      expect(Math.abs(pole.q / modes[index].q - 1)).toBeLessThan(1e-5);
      expect(Math.abs(pole.amplitude / modes[index].amplitude - 1)).toBeLessThan(1e-5);
    });
  });

  it("lie within their uncertainties where there is noise, and noise makes none", () => {
    const found = find(trace(modes, 30_000, 1e-3));
    expect(found).toHaveLength(3);
    found.forEach((pole, index) => {
      const off = Math.abs(pole.q - modes[index].q);
      expect(off).toBeLessThan(3 * pole.qUncertainty + 1e-9);
      expect(pole.qUncertainty / pole.q).toBeLessThan(0.05);
    });
  });

  it("are told apart where two lie closer than their widths", () => {
    const close: Mode[] = [
      { GHz: 2.5, q: 200, amplitude: 1 },
      { GHz: 2.508, q: 260, amplitude: 0.7 },
    ];
    const found = find(trace(close, 30_000, 1e-5));
    expect(found).toHaveLength(2);
    found.forEach((pole, index) => {
      expect(Math.abs(pole.GHz / close[index].GHz - 1)).toBeLessThan(1e-5);
      expect(Math.abs(pole.q / close[index].q - 1)).toBeLessThan(5e-3);
    });
  });

  it("are no more than there are where a short look would take several for one", () => {
    const many = [1.31, 1.58, 1.676, 2.119, 2.134, 2.303, 2.46, 2.498, 2.608, 2.702].map((GHz, index) => ({
      GHz,
      q: 1e9,
      amplitude: 1 / (1 + index),
    }));
    const found = find(trace(many, 20_000));
    expect(found.map(({ GHz }) => GHz.toFixed(6))).toEqual(many.map(({ GHz }) => GHz.toFixed(6)));
  });

  it("are none in silence, in noise alone, or in a mode outside the band", () => {
    expect(find(new Float64Array(20_000))).toEqual([]);
    expect(find(trace([], 20_000, 1))).toEqual([]);
    expect(find(trace([{ GHz: 6, q: 100, amplitude: 1 }], 20_000))).toEqual([]);
  });

  it("are found where one dies long before another", () => {
    const unlike: Mode[] = [
      { GHz: 1.5, q: 12, amplitude: 1 },
      { GHz: 3, q: 20_000, amplitude: 0.1 },
    ];
    const found = find(trace(unlike, 60_000));
    expect(found).toHaveLength(2);
    expect(Math.abs(found[0].q / 12 - 1)).toBeLessThan(1e-3);
    expect(Math.abs(found[1].q / 20_000 - 1)).toBeLessThan(1e-3);
  });
});
