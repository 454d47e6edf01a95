/** Layers as typed, and what they say once every figure is valid. */
import type { FillMedium, Medium } from "@heddle/kernels/scene";
import { AIR, isPerfect } from "@heddle/kernels/scene";
import type { Stack, StackElement, StackResponse } from "@heddle/kernels/stack";
import { stackResponse } from "@heddle/kernels/stack";
import { readNumber } from "../../../lib/figures";

export type ElementDraft =
  | { key: number; kind: "layer"; mediumId: string; thicknessMm: string }
  | { key: number; kind: "film"; ohmsPerSquare: string };

/** The backing that is no medium. */
export const METAL = "metal" as const;

export interface StackDraft {
  elements: readonly ElementDraft[];
  /** A medium's id, or METAL. */
  backing: string;
  polarization: "TMz" | "TEz";
  angleDeg: string;
  fromGHz: string;
  toGHz: string;
}

/** A resistive film a quarter of a 10 GHz wavelength before metal. */
export const FIRST_DRAFT: StackDraft = {
  elements: [
    { key: 1, kind: "film", ohmsPerSquare: "377" },
    { key: 2, kind: "layer", mediumId: "air", thicknessMm: "7.5" },
  ],
  backing: METAL,
  polarization: "TMz",
  angleDeg: "0",
  fromGHz: "2",
  toGHz: "18",
};

const MOST_ELEMENTS = 20;
const POINTS = 241;

/** Sentences by field: `elements.<key>`, `angleDeg`, `fromGHz`, `toGHz`. */
export type StackFaults = Readonly<Partial<Record<string, string>>>;

export interface StackPlan {
  stack: Stack;
  polarization: "TMz" | "TEz";
  angleDeg: number;
  fromGHz: number;
  toGHz: number;
}

/** The media that can be a layer: air and all that are not perfect conductors, by id. */
export function layerMedia(media: readonly Medium[]): ReadonlyMap<string, FillMedium> {
  const fills = new Map<string, FillMedium>([[AIR.id, AIR]]);
  for (const medium of media) if (!isPerfect(medium)) fills.set(medium.id, medium);
  return fills;
}

export const mayAdd = (draft: StackDraft): boolean => draft.elements.length < MOST_ELEMENTS;

const inRange = (text: string, low: number, high: number): number | null => {
  const value = readNumber(text);
  return value !== null && value >= low && value <= high ? value : null;
};

/** Reads a draft: the plan, or what is wrong with which field. */
export function readDraft(
  draft: StackDraft,
  media: ReadonlyMap<string, FillMedium>,
): { plan: StackPlan | null; faults: StackFaults } {
  const faults: Record<string, string> = {};
  const elements: StackElement[] = [];
  const gone = "This medium is no longer in the library; choose another.";
  for (const element of draft.elements) {
    const field = `elements.${String(element.key)}`;
    if (element.kind === "film") {
      const ohmsPerSquare = inRange(element.ohmsPerSquare, 1e-6, 1e9);
      if (ohmsPerSquare === null) faults[field] = "Above 0, to 10⁹ Ω.";
      else elements.push({ kind: "film", ohmsPerSquare });
      continue;
    }
    const medium = media.get(element.mediumId);
    const thicknessMm = inRange(element.thicknessMm, 0, 1e6);
    if (medium === undefined) faults[field] = gone;
    else if (thicknessMm === null) faults[field] = "0 to 10⁶ mm.";
    else elements.push({ kind: "layer", medium, thicknessMm });
  }
  const backing = draft.backing === METAL ? METAL : media.get(draft.backing);
  if (backing === undefined) faults.backing = gone;
  const angleDeg = inRange(draft.angleDeg, 0, 89.9);
  if (angleDeg === null) faults.angleDeg = "0 to 89.9°.";
  const fromGHz = inRange(draft.fromGHz, 1e-6, 1e5);
  const toGHz = inRange(draft.toGHz, 1e-6, 1e5);
  if (fromGHz === null) faults.fromGHz = "Above 0, to 10⁵ GHz.";
  if (toGHz === null) faults.toGHz = "Above 0, to 10⁵ GHz.";
  else if (fromGHz !== null && toGHz <= fromGHz) faults.toGHz = "Above where the range begins.";
  const complete =
    Object.keys(faults).length === 0 &&
    backing !== undefined &&
    angleDeg !== null &&
    fromGHz !== null &&
    toGHz !== null;
  const plan = complete
    ? { stack: { elements, backing }, polarization: draft.polarization, angleDeg, fromGHz, toGHz }
    : null;
  return { plan, faults };
}

export interface StackPoint {
  GHz: number;
  reflectedDb: number;
  /** Power passed, in dB; null over metal. */
  transmittedDb: number | null;
  absorbed: number;
}

const decibelsOf = (share: number): number => (share > 0 ? 10 * Math.log10(share) : Number.NEGATIVE_INFINITY);

/** What the stack does at one frequency. */
export function pointAt(plan: StackPlan, GHz: number): StackPoint {
  const { stack, polarization, angleDeg } = plan;
  const response: StackResponse = stackResponse(stack, { polarization, angleDeg, frequencyGHz: GHz });
  return {
    GHz,
    reflectedDb: decibelsOf(response.reflected),
    transmittedDb: response.transmission === null ? null : decibelsOf(response.transmitted),
    absorbed: response.absorbed,
  };
}

/** Points evenly over the plan's range. */
export const curveOf = (plan: StackPlan): StackPoint[] =>
  Array.from({ length: POINTS }, (_, n) =>
    pointAt(plan, plan.fromGHz + ((plan.toGHz - plan.fromGHz) * n) / (POINTS - 1)),
  );

/** Where the chart ends below: the lowest value by tens, between −20 and −100 dB. */
export function floorDb(points: readonly StackPoint[]): number {
  const lowest = Math.min(
    ...points.flatMap(({ reflectedDb, transmittedDb }) => [reflectedDb, transmittedDb ?? 0]),
  );
  return Math.max(-100, Math.min(-20, Math.floor(lowest / 10) * 10));
}
