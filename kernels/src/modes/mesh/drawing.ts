/** A painted section as the mesh generator needs it: areas with straight edges, thin lines, kinds of media and edges. */
import type { AreaShape, PaintedArea, Point } from "../../geometry/index.js";
import { outlineOf } from "../../geometry/index.js";
import type { ResolvedScene } from "../../scene/index.js";
import { isPerfect } from "../../scene/index.js";

/** What a medium is to the eigenproblem. ε and μ are relative; σ in S/m, σ* in Ω/m. */
export type SectionMedium =
  | { kind: "electric" | "magnetic" }
  | { kind: "fill"; epsilon: number; mu: number; sigma: number; sigmaStar: number };

export interface ThinLine {
  points: readonly Point[];
  /** Ω per square of a film; null: a perfect electric conductor. */
  ohmsPerSquare: number | null;
}

export const SIDES = ["left", "right", "bottom", "top"] as const;
export type SectionSide = (typeof SIDES)[number];

export interface Drawing {
  widthMm: number;
  heightMm: number;
  media: readonly SectionMedium[];
  mediumIds: readonly string[];
  background: number;
  /** Polygons only: curves are replaced by polygons of the same area. */
  areas: readonly PaintedArea[];
  lines: readonly ThinLine[];
  edges: Readonly<Record<SectionSide, "absorbing" | "electric" | "magnetic">>;
}

/** Chords of curves are at most about this many element legs, and this many radii, long. */
const CHORD_LEGS = 0.7;
const CHORD_RADII = 0.3;

/**
 * How far a chord of length c may leave a curve of radius r: c²/8r. With polygons of the curve's own area the first-order
 * effect of the chords on an eigenvalue cancels, so what is left is of fourth order in the leg.
 */
function toleranceMm(radiusMm: number, legMm: number): number {
  const chord = Math.min(CHORD_LEGS * legMm, CHORD_RADII * radiusMm);
  return chord ** 2 / (8 * radiusMm);
}

function radiusOf(shape: AreaShape): number {
  if (shape.kind === "ellipse") return Math.max(shape.rx, shape.ry);
  return shape.kind === "stroke" ? shape.widthMm / 2 : Number.POSITIVE_INFINITY;
}

/** A shape as polygons; the capsules of a stroke one by one, each over the others, which paints their union. */
function polygonsOf(shape: AreaShape, legMm: number): AreaShape[] {
  const outline = outlineOf(shape, toleranceMm(radiusOf(shape), legMm));
  if (outline.rule === "non-zero")
    return outline.rings.map((points) => ({ kind: "polygon", points, holes: [] }));
  const [points, ...holes] = outline.rings;
  return [{ kind: "polygon", points, holes }];
}

/** The drawing of a resolved scene for elements with legs of `legMm`. */
export function drawingOf(scene: ResolvedScene, legMm: number): Drawing {
  const mediumIds = [...scene.mediaById.keys()];
  const media = [...scene.mediaById.values()].map(
    (medium): SectionMedium =>
      isPerfect(medium)
        ? { kind: medium.perfect }
        : {
            kind: "fill",
            epsilon: medium.relativePermittivity,
            mu: medium.relativePermeability,
            sigma: medium.conductivity,
            sigmaStar: medium.magneticLoss,
          },
  );
  const areas: PaintedArea[] = [];
  const lines: ThinLine[] = [];
  for (const patch of scene.paint) {
    if (patch.kind === "wall") lines.push({ points: patch.points, ohmsPerSquare: null });
    else if (patch.kind === "film") lines.push({ points: patch.points, ohmsPerSquare: patch.ohmsPerSquare });
    else {
      const medium = mediumIds.indexOf(patch.medium);
      for (const shape of polygonsOf(patch, legMm)) areas.push({ shape, medium });
    }
  }
  return {
    widthMm: scene.section.widthMm,
    heightMm: scene.section.heightMm,
    media,
    mediumIds,
    background: mediumIds.indexOf(scene.background),
    areas,
    lines,
    edges: scene.edges,
  };
}
