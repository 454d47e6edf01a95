import type { FieldQuantity } from "@heddle/kernels/frames";

/** What each quantity is called on the sheet, and the unit of its values. */
const WORDS: Record<FieldQuantity, { label: string; unit: string }> = {
  Ez: { label: "Ez", unit: "V/m" },
  Hx: { label: "Hx", unit: "A/m" },
  Hy: { label: "Hy", unit: "A/m" },
  Hz: { label: "Hz", unit: "A/m" },
  Ex: { label: "Ex", unit: "V/m" },
  Ey: { label: "Ey", unit: "V/m" },
  absE: { label: "|E|", unit: "V/m" },
  absH: { label: "|H|", unit: "A/m" },
  energyDensity: { label: "Energy", unit: "J/m³" },
  lossDensity: { label: "Loss", unit: "W/m³" },
};

export const labelOf = (quantity: FieldQuantity): string => WORDS[quantity].label;
export const unitOf = (quantity: FieldQuantity): string => WORDS[quantity].unit;

const COMMON: readonly FieldQuantity[] = ["absE", "absH", "energyDensity", "lossDensity"];

/** What a polarization offers, the out-of-plane component first. */
export const quantitiesOf = (polarization: "TMz" | "TEz"): readonly FieldQuantity[] =>
  polarization === "TMz" ? ["Ez", "Hx", "Hy", ...COMMON] : ["Hz", "Ex", "Ey", ...COMMON];

/** The next range in the sequence 1, 2, 5, 10: `direction` 1 goes up, −1 down. */
export function nextRange(range: number, direction: 1 | -1): number {
  const decade = 10 ** Math.floor(Math.log10(range));
  const ladder = [0.1, 0.2, 0.5, 1, 2, 5, 10, 20].map((factor) => Number((factor * decade).toPrecision(6)));
  const tolerance = 1e-6 * range;
  const found =
    direction === 1
      ? ladder.find((candidate) => candidate > range + tolerance)
      : ladder.findLast((candidate) => candidate < range - tolerance);
  return found ?? range;
}
