/** A medium's derived figures as the table shows and sorts them. */
import type { MediumFigures } from "@heddle/kernels/media";
import { mediumFigures } from "@heddle/kernels/media";
import type { Medium } from "@heddle/kernels/scene";
import { isPerfect } from "@heddle/kernels/scene";
import { decibels, figure, formatSi, MINUS, prefixOf, THIN_SPACE } from "../../lib/figures";

/** The figures at a frequency; null for a perfect conductor, which has no inside. */
export const figuresOf = (medium: Medium, gigahertz: number): MediumFigures | null =>
  isPerfect(medium) ? null : mediumFigures(medium, gigahertz);

export const skinDepthWords = (figures: MediumFigures): string => formatSi(figures.skinDepthMm / 1000, "m");

export const attenuationWords = (figures: MediumFigures): string => figure(figures.attenuationDbPerMm);

/** "377 Ω", "12.3 + 12.3j Ω". */
export function impedanceWords({ impedanceOhm: { re, im } }: MediumFigures): string {
  if (Math.abs(im) < 5e-4 * Math.abs(re)) return formatSi(re, "Ω");
  const { prefix, factor } = prefixOf(Math.max(Math.abs(re), Math.abs(im)));
  const [real, imaginary] = [figure(re / factor), figure(Math.abs(im) / factor)];
  return `${real} ${im < 0 ? MINUS : "+"} ${imaginary}j${THIN_SPACE}${prefix}Ω`;
}

export const reflectionWords = (figures: MediumFigures): string =>
  figures.reflectionDb < -120 ? `under ${MINUS}120${THIN_SPACE}dB` : decibels(figures.reflectionDb);

/** How far the losses are from matched, with σ over ε equal to σ* over μ. */
export function matchWords({ matchRatio }: MediumFigures): string {
  if (matchRatio === null) return "no loss";
  if (matchRatio === 0) return "σ only";
  if (matchRatio === Number.POSITIVE_INFINITY) return "σ* only";
  if (Math.abs(Math.log(matchRatio)) < 0.005) return "matched";
  return `${figure(matchRatio)}${THIN_SPACE}× match`;
}

/** Distance from matched for sorting: 0 is matched. */
export const matchDistance = ({ matchRatio }: MediumFigures): number | null =>
  matchRatio === null ? null : Math.abs(Math.log(matchRatio));
