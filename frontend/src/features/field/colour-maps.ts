/**
 * Colour maps as tables of one colour per level, so that a draw is one look-up and a change of scale is a new table.
 *
 * Signed quantities: the brown-to-teal diverging scheme BrBG of C. A. Brewer (ColorBrewer 2.0; M. Harrower and
 * C. A. Brewer, The Cartographic Journal 40 (2003) 27). Its middle is the sheet's own colour, so that a quiet region
 * is bare paper; on a dark sheet the arms run from dark to light, so that lightness is monotone there too.
 * Levels: cividis (J. R. Nuñez, C. R. Anderton, R. S. Renslow, PLoS ONE 13 (2018) e0199239), dark for strong by day
 * and light for strong by night; its quiet end fades to the sheet.
 * Along an arm the colours are respaced to equal CIE 1976 differences.
 */
import ndarray from "ndarray";
import type { NdArray } from "ndarray";
import type { Lab, Rgb } from "./colour-space";
import { difference, mixLab, parseColour, toLab, toRgb } from "./colour-space";

export const LEVELS = 256;
/** Level of the value 0 of a signed quantity; level 1 is −range, level 255 is +range. */
export const ZERO_LEVEL = 128;

export interface LinearScale {
  kind: "linear";
}
/** Linear below `linearShare` of the range, logarithmic above it, on either side of zero. */
export interface SymmetricLogScale {
  kind: "symlog";
  linearShare: number;
}
export type Scale = LinearScale | SymmetricLogScale;

export interface ColourMapRequest {
  signed: boolean;
  sheet: Rgb;
  scale: Scale;
}

const lab = (hex: string): Lab => toLab(parseColour(hex) ?? [0, 0, 0]);
/** From the middle outward, light to dark. */
const BROWN = ["#f6e8c3", "#dfc27d", "#bf812d", "#8c510a", "#543005"].map(lab);
const TEAL = ["#c7eae5", "#80cdc1", "#35978f", "#01665e", "#003c30"].map(lab);
/** Every sixteenth entry of the published table of 256, dark to light. */
const CIVIDIS = [
  "#00224e",
  "#002e6a",
  "#1a386f",
  "#32436d",
  "#434e6c",
  "#535a6d",
  "#61656f",
  "#6f7073",
  "#7d7c78",
  "#8b8778",
  "#9a9376",
  "#aaa073",
  "#bbad6d",
  "#ccba64",
  "#ddc858",
  "#efd748",
  "#fee838",
].map(lab);
/** Share of a sequential map over which its quiet end fades to the sheet. */
const FADE_SHARE = 0.12;

/** The colour at `share` (0…1) of the length of a polyline of colours. */
function along(anchors: readonly Lab[], share: number): Lab {
  const first = anchors[0] ?? ([0, 0, 0] as const);
  let total = 0;
  for (let i = 1; i < anchors.length; i += 1)
    total += difference(anchors[i - 1] ?? first, anchors[i] ?? first);
  let left = total * share;
  for (let i = 1; i < anchors.length; i += 1) {
    const from = anchors[i - 1] ?? first;
    const to = anchors[i] ?? first;
    const length = difference(from, to);
    if (left <= length) return mixLab(from, to, length === 0 ? 0 : left / length);
    left -= length;
  }
  return anchors[anchors.length - 1] ?? first;
}

const isDark = (sheet: Rgb): boolean => toLab(sheet)[0] < 50;

/** The arm of a diverging map from the sheet outward. A dark sheet takes the scheme's dark colours first and omits its palest. */
function arm(light: readonly Lab[], sheet: Rgb): readonly Lab[] {
  return isDark(sheet) ? [toLab(sheet), ...light.slice(1).reverse()] : [toLab(sheet), ...light];
}

function sequential(sheet: Rgb, share: number): Lab {
  const anchors = isDark(sheet) ? CIVIDIS : [...CIVIDIS].reverse();
  const colour = along(anchors, share);
  return share < FADE_SHARE ? mixLab(toLab(sheet), colour, share / FADE_SHARE) : colour;
}

/** Where on a map (0…1) a value at `share` (0…1) of the range is drawn. */
export function scaled(scale: Scale, share: number): number {
  if (scale.kind === "linear") return share;
  return Math.log1p(share / scale.linearShare) / Math.log1p(1 / scale.linearShare);
}

/** The value (0…1 of the range) drawn at `place` (0…1) on a map: the inverse of `scaled`. */
export function unscaled(scale: Scale, place: number): number {
  if (scale.kind === "linear") return place;
  return scale.linearShare * Math.expm1(place * Math.log1p(1 / scale.linearShare));
}

/** Share of the range, −1…1 or 0…1, that a level stands for. */
export const shareOfLevel = (level: number, signed: boolean): number =>
  signed ? Math.max(-1, (level - ZERO_LEVEL) / (LEVELS - 1 - ZERO_LEVEL)) : level / (LEVELS - 1);

/** The colour of a share of the range, −1…1 (signed) or 0…1. */
export function colourOf(request: ColourMapRequest, share: number): Rgb {
  const place = scaled(request.scale, Math.min(1, Math.abs(share)));
  // Exactly the sheet at zero, without a round trip through L*a*b*.
  if (place === 0) return request.sheet;
  if (!request.signed) return toRgb(sequential(request.sheet, place));
  return toRgb(along(arm(share < 0 ? BROWN : TEAL, request.sheet), place));
}

/** One RGBA colour per level: shape [256, 4], rows contiguous, fit for a texture of 256 × 1. */
export function colourMap(request: ColourMapRequest): NdArray<Uint8Array> {
  const table = ndarray(new Uint8Array(LEVELS * 4), [LEVELS, 4]);
  for (let level = 0; level < LEVELS; level += 1) {
    const colour = colourOf(request, shareOfLevel(level, request.signed));
    for (let channel = 0; channel < 3; channel += 1) table.set(level, channel, colour[channel] ?? 0);
    table.set(level, 3, 255);
  }
  return table;
}
