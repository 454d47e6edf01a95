const THIN_SPACE = "\u202f";

/** A figure with as many decimals as it needs, up to `decimals`, and a true minus. */
export function figure(value: number, decimals = 3): string {
  const rounded = Number(value.toFixed(decimals));
  return String(rounded === 0 ? 0 : rounded).replace("-", "−");
}

/** A length in mm, or in µm and m where that reads better: "12.5 mm", "80 µm", "1.2 m". */
export function lengthInWords(mm: number): string {
  const size = Math.abs(mm);
  if (size > 0 && size < 0.1) return `${figure(mm * 1000, 2)}${THIN_SPACE}µm`;
  if (size >= 10_000) return `${figure(mm / 1000, 3)}${THIN_SPACE}m`;
  return `${figure(mm, 3)}${THIN_SPACE}mm`;
}

const PREFIXES: readonly (readonly [number, string])[] = [
  [1e9, "G"],
  [1e6, "M"],
  [1e3, "k"],
  [1, ""],
  [1e-3, "m"],
  [1e-6, "µ"],
  [1e-9, "n"],
  [1e-12, "p"],
  [1e-15, "f"],
];

/** A quantity with an SI prefix and `digits` significant figures: quantity(2840, "Ω/m") is "2.84 kΩ/m". */
export function quantity(value: number, unit: string, digits = 3): string {
  if (value === 0) return `0${THIN_SPACE}${unit}`;
  const size = Math.abs(value);
  const [scale, prefix] = PREFIXES.find(([least]) => size >= least * (1 - 1e-9)) ?? [1e-15, "f"];
  const text = String(Number((value / scale).toPrecision(digits))).replace("-", "−");
  return `${text}${THIN_SPACE}${prefix}${unit}`;
}
