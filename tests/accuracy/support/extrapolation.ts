/** Values at zero cell size from two meshes, the second `ratio` times as fine, whose error falls with the order given. */
export interface Complex {
  re: number;
  im: number;
}

export function extrapolated(coarse: Complex, fine: Complex, order: number, ratio = 2): Complex {
  const share = 1 / (ratio ** order - 1);
  return { re: fine.re + share * (fine.re - coarse.re), im: fine.im + share * (fine.im - coarse.im) };
}

export const distance = (a: Complex, b: Complex): number => Math.hypot(a.re - b.re, a.im - b.im);
export const sizeOf = (a: Complex): number => Math.hypot(a.re, a.im);

/** Degrees between two phases. */
export const phaseBetween = (a: Complex, b: Complex): number =>
  Math.abs((Math.atan2(a.im * b.re - a.re * b.im, a.re * b.re + a.im * b.im) * 180) / Math.PI);
