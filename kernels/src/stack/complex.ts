/** Complex arithmetic for the layer recursion. */
import type { Complex } from "../scene/index.js";

export const complex = (re: number, im = 0): Complex => ({ re, im });
export const add = (a: Complex, b: Complex): Complex => ({ re: a.re + b.re, im: a.im + b.im });
export const subtract = (a: Complex, b: Complex): Complex => ({ re: a.re - b.re, im: a.im - b.im });
export const scale = (a: Complex, s: number): Complex => ({ re: a.re * s, im: a.im * s });
export const multiply = (a: Complex, b: Complex): Complex => ({
  re: a.re * b.re - a.im * b.im,
  im: a.re * b.im + a.im * b.re,
});

/** Smith's division: no overflow where the plain formula squares. */
export const divide = (a: Complex, b: Complex): Complex => {
  if (Math.abs(b.re) >= Math.abs(b.im)) {
    const ratio = b.im / b.re;
    const down = b.re + b.im * ratio;
    return { re: (a.re + a.im * ratio) / down, im: (a.im - a.re * ratio) / down };
  }
  const ratio = b.re / b.im;
  const down = b.re * ratio + b.im;
  return { re: (a.re * ratio + a.im) / down, im: (a.im * ratio - a.re) / down };
};

export const magnitude = (a: Complex): number => Math.hypot(a.re, a.im);
export const exponential = (a: Complex): Complex => {
  const size = Math.exp(a.re);
  return { re: size * Math.cos(a.im), im: size * Math.sin(a.im) };
};

/** The square root that decays with exp(−jkx): im ≤ 0, and re ≥ 0 where im vanishes. */
export const decayingRoot = (a: Complex): Complex => {
  const size = magnitude(a);
  // The larger of the two parts by the sum, the other from a.im = 2·re·im: nothing cancels.
  let re = Math.sqrt((size + Math.abs(a.re)) / 2);
  let im = re === 0 ? 0 : Math.abs(a.im) / (2 * re);
  if (a.re < 0) [re, im] = [im, re];
  const signed = a.im > 0 ? complex(re, im) : complex(re, -im);
  return signed.im > 0 ? complex(-signed.re, -signed.im) : signed;
};
