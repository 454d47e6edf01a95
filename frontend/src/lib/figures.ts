/** Numbers as people here read them: SI prefixes, a thin space before the unit, a true minus, ∞ and – where they say more. */
export const THIN_SPACE = "\u2009";
export const MINUS = "\u2212";

const PREFIXES: readonly (readonly [number, string])[] = [
  [1e12, "T"],
  [1e9, "G"],
  [1e6, "M"],
  [1e3, "k"],
  [1, ""],
  [1e-3, "m"],
  [1e-6, "µ"],
  [1e-9, "n"],
  [1e-12, "p"],
];

const trueMinus = (text: string): string => text.replaceAll("-", MINUS);
const notFinite = (value: number): string => (Number.isNaN(value) ? "–" : value > 0 ? "∞" : `${MINUS}∞`);
const SUPERSCRIPTS = "⁰¹²³⁴⁵⁶⁷⁸⁹";
const superscript = (exponent: number): string =>
  (exponent < 0 ? "⁻" : "") +
  Array.from(String(Math.abs(exponent)), (digit) => SUPERSCRIPTS[Number(digit)]).join("");

/** Whole digits in thin-spaced groups of three from five digits up: "12 480". */
const grouped = (text: string): string => {
  const [whole = "", ...fraction] = text.split(".");
  const spaced = whole.replace("-", "").length < 5 ? whole : whole.replace(/\B(?=(\d{3})+$)/g, THIN_SPACE);
  return [spaced, ...fraction].join(".");
};

/**
 * A number to so many significant digits, no trailing zeros: "0.05", "3.5 × 10⁷", "12 480".
 * Outside 10⁻⁴ … 10⁶ it is written with a power of ten.
 */
export function figure(value: number, digits = 3): string {
  if (!Number.isFinite(value)) return notFinite(value);
  if (value === 0) return "0";
  const rounded = Number(value.toPrecision(digits));
  const magnitude = Math.abs(rounded);
  if (magnitude >= 1e6 || magnitude < 1e-4) {
    const [mantissa = "", exponent = "0"] = rounded.toExponential().split("e");
    const power = `10${superscript(Number(exponent))}`;
    if (mantissa === "1") return power;
    return `${trueMinus(mantissa)}${THIN_SPACE}×${THIN_SPACE}${power}`;
  }
  return trueMinus(grouped(String(rounded)));
}

/** A number with its unit, no prefix chosen: "300 mm". */
export const withUnit = (value: number, unit: string, digits = 3): string =>
  unit === "" ? figure(value, digits) : `${figure(value, digits)}${THIN_SPACE}${unit}`;

/** The SI prefix that leaves one to three digits before the point, and the power of ten it stands for. */
export function prefixOf(value: number): { prefix: string; factor: number } {
  const magnitude = Math.abs(value);
  if (magnitude === 0 || !Number.isFinite(magnitude)) return { prefix: "", factor: 1 };
  const [factor, prefix] = PREFIXES.find(([size]) => magnitude >= size) ?? [1e-12, "p"];
  return { prefix, factor };
}

/** A number with its unit under the SI prefix that fits: "2.8 kΩ/m", "660 nm". */
export function formatSi(value: number, unit: string, digits = 3): string {
  if (!Number.isFinite(value)) return withUnit(value, unit, digits);
  const rounded = Number(value.toPrecision(digits));
  const { prefix, factor } = prefixOf(rounded);
  return withUnit(rounded / factor, `${prefix}${unit}`, digits);
}

/** A number with a fixed number of decimals and a true minus, so that columns align: "−7.90". */
export function formatFixed(value: number, decimals: number): string {
  if (!Number.isFinite(value)) return notFinite(value);
  const text = value.toFixed(decimals);
  return trueMinus(grouped(Number(text) === 0 ? text.replace("-", "") : text));
}

/** A level or margin with a fixed number of decimals: "−20.0 dB". */
export const decibels = (value: number, decimals = 1): string =>
  `${formatFixed(value, decimals)}${THIN_SPACE}dB`;

/** A margin, which may be small but is never rounded to nothing: "3.2 dB", "0.018 dB". */
export const marginDb = (value: number): string =>
  Math.abs(value) < 0.1 ? withUnit(value, "dB", 2) : decibels(value);

/** A frequency given in GHz with the prefix that fits: "912 MHz". */
export const frequency = (gigahertz: number, digits = 4): string => formatSi(gigahertz * 1e9, "Hz", digits);

/** A size given in mm, "300 × 200 mm". */
export const sizeMm = (widthMm: number, heightMm: number): string =>
  `${figure(widthMm, 4)}${THIN_SPACE}×${THIN_SPACE}${figure(heightMm, 4)}${THIN_SPACE}mm`;

/**
 * Reads a number as typed, with a decimal point or comma, a true minus, spaces between groups, "2e-3".
 * @returns null where it is not a number
 */
export function readNumber(text: string): number | null {
  const plain = text
    .trim()
    .replaceAll(MINUS, "-")
    .replaceAll(/[\s\u2009\u00a0]/g, "")
    .replace(",", ".");
  if (!/^[+-]?(\d+\.?\d*|\.\d+)(e[+-]?\d+)?$/i.test(plain)) return null;
  const value = Number(plain);
  return Number.isFinite(value) ? value : null;
}
