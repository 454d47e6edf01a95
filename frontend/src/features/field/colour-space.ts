/** sRGB and CIE L*a*b* (D65), as far as building colour maps needs them. */

export type Rgb = readonly [red: number, green: number, blue: number];
export type Lab = readonly [lightness: number, a: number, b: number];

const toLinear = (byte: number): number => {
  const share = byte / 255;
  return share <= 0.04045 ? share / 12.92 : ((share + 0.055) / 1.055) ** 2.4;
};
const toByte = (linear: number): number => {
  const share = linear <= 0.0031308 ? 12.92 * linear : 1.055 * linear ** (1 / 2.4) - 0.055;
  return Math.round(255 * Math.min(1, Math.max(0, share)));
};

// IEC 61966-2-1 (sRGB) primaries; CIE 15 for L*a*b*; the white point is D65.
const WHITE = [0.95047, 1, 1.08883] as const;
const EPSILON = 216 / 24389;
const KAPPA = 24389 / 27;
const compress = (t: number): number => (t > EPSILON ? Math.cbrt(t) : (KAPPA * t + 16) / 116);
const expand = (t: number): number => (t ** 3 > EPSILON ? t ** 3 : (116 * t - 16) / KAPPA);

export function toLab([red, green, blue]: Rgb): Lab {
  const r = toLinear(red);
  const g = toLinear(green);
  const b = toLinear(blue);
  const x = compress((0.4124564 * r + 0.3575761 * g + 0.1804375 * b) / WHITE[0]);
  const y = compress((0.2126729 * r + 0.7151522 * g + 0.072175 * b) / WHITE[1]);
  const z = compress((0.0193339 * r + 0.119192 * g + 0.9503041 * b) / WHITE[2]);
  return [116 * y - 16, 500 * (x - y), 200 * (y - z)];
}

export function toRgb([lightness, a, b]: Lab): Rgb {
  const fy = (lightness + 16) / 116;
  const x = expand(fy + a / 500) * WHITE[0];
  const y = expand(fy) * WHITE[1];
  const z = expand(fy - b / 200) * WHITE[2];
  return [
    toByte(3.2404542 * x - 1.5371385 * y - 0.4985314 * z),
    toByte(-0.969266 * x + 1.8760108 * y + 0.041556 * z),
    toByte(0.0556434 * x - 0.2040259 * y + 1.0572252 * z),
  ];
}

/** CIE 1976 colour difference. */
export const difference = (p: Lab, q: Lab): number => Math.hypot(p[0] - q[0], p[1] - q[1], p[2] - q[2]);

export const mixLab = (p: Lab, q: Lab, share: number): Lab => [
  p[0] + (q[0] - p[0]) * share,
  p[1] + (q[1] - p[1]) * share,
  p[2] + (q[2] - p[2]) * share,
];

/** `#rrggbb`, `#rgb` or `rgb(r, g, b)`, as style sheets give a colour; null for anything else. */
export function parseColour(text: string): Rgb | null {
  const trimmed = text.trim();
  const hex = /^#([0-9a-f]{6})$/i.exec(trimmed)?.[1];
  if (hex !== undefined) {
    const value = Number.parseInt(hex, 16);
    return [value >> 16, (value >> 8) & 255, value & 255];
  }
  const short = /^#([0-9a-f])([0-9a-f])([0-9a-f])$/i.exec(trimmed);
  if (short !== null) {
    const [r = 0, g = 0, b = 0] = short.slice(1).map((digit) => Number.parseInt(digit, 16) * 17);
    return [r, g, b];
  }
  const parts = /^rgba?\(\s*(\d+)[\s,]+(\d+)[\s,]+(\d+)/.exec(trimmed);
  return parts === null ? null : [Number(parts[1]), Number(parts[2]), Number(parts[3])];
}
