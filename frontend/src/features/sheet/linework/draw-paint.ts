import type { Medium, ResolvedAreaPatch, ResolvedPatch } from "@heddle/kernels/scene";
import type { Viewport } from "../../../hooks/viewport";
import type { Drawing } from "../document/drawing";
import { groupPaint, type PaintGroup } from "./groups";
import { bandMiddleGHz, type Hatching, hatchingOf } from "./hatch";
import type { HatchPatterns } from "./hatch-pattern";
import type { Palette } from "./palette";
import { pathOf } from "./paths";

/** What drawing on one canvas takes. */
export interface Pen {
  context: CanvasRenderingContext2D;
  palette: Palette;
  patterns: HatchPatterns;
  pixelRatio: number;
  view: Viewport;
}

/** Puts millimetres, y up, under the pen. */
export function inMillimetres({ context, pixelRatio, view }: Pen): void {
  const scale = view.pxPerMm * pixelRatio;
  context.setTransform(scale, 0, 0, -scale, view.originXPx * pixelRatio, view.originYPx * pixelRatio);
}

/** Puts CSS pixels, y down, under the pen. */
export function inPixels({ context, pixelRatio }: Pen): void {
  context.setTransform(pixelRatio, 0, 0, pixelRatio, 0, 0);
}

function fillShape(context: CanvasRenderingContext2D, patch: ResolvedAreaPatch): void {
  const path = pathOf(patch);
  if (patch.kind === "stroke") {
    context.lineWidth = patch.widthMm;
    context.lineCap = "round";
    context.lineJoin = "round";
    context.stroke(path);
  } else context.fill(path, "evenodd");
}

/** The rim around a shape, `px` wide outside it; its inner half is painted over by the fill. */
function rimShape({ context, view }: Pen, patch: ResolvedAreaPatch, px: number): void {
  const mm = (2 * px) / view.pxPerMm;
  context.lineCap = "round";
  context.lineJoin = patch.kind === "stroke" ? "round" : "miter";
  context.lineWidth = patch.kind === "stroke" ? patch.widthMm + mm : mm;
  context.stroke(pathOf(patch));
}

function setInk(context: CanvasRenderingContext2D, style: string | CanvasPattern, alpha = 1): void {
  context.fillStyle = style;
  context.strokeStyle = style;
  context.globalAlpha = alpha;
}

function fillGround(pen: Pen, patch: ResolvedAreaPatch, hatching: Hatching): void {
  const { context, palette } = pen;
  if (hatching.opaque) {
    setInk(context, palette.sheet);
    fillShape(context, patch);
  } else {
    // Later paint covers earlier: what lay here goes, so that the field shows through this medium alone.
    context.globalCompositeOperation = "destination-out";
    setInk(context, "#000");
    fillShape(context, patch);
    context.globalCompositeOperation = "source-over";
  }
  if (hatching.wash > 0) {
    setInk(context, palette.sheet, hatching.wash);
    fillShape(context, patch);
  }
  if (hatching.tint > 0) {
    setInk(context, palette.ink, hatching.tint);
    fillShape(context, patch);
  }
}

function fillHatch(pen: Pen, patch: ResolvedAreaPatch, hatching: Hatching): void {
  const { context, palette, patterns, pixelRatio, view } = pen;
  for (const strokes of hatching.strokes) {
    const halo = hatching.opaque ? null : palette.sheet;
    const pattern = patterns.get(context, strokes, pixelRatio, { ink: palette.ink, halo }, view);
    if (pattern === null) continue;
    setInk(context, pattern);
    fillShape(context, patch);
  }
}

function drawGroup(pen: Pen, group: PaintGroup, hatching: Hatching): void {
  const { context, palette } = pen;
  for (const [colour, px, alpha] of [
    [palette.sheet, hatching.outlinePx + 1, 0.8],
    [palette.ink, hatching.outlinePx, 1],
  ] as const) {
    setInk(context, colour, alpha);
    for (const patch of group.patches) rimShape(pen, patch, px);
  }
  for (const patch of group.patches) {
    fillGround(pen, patch, hatching);
    fillHatch(pen, patch, hatching);
  }
  context.globalAlpha = 1;
}

function drawLines(pen: Pen, paint: readonly ResolvedPatch[]): void {
  const { context, palette, view } = pen;
  context.lineCap = "butt";
  context.lineJoin = "round";
  for (const patch of paint) {
    if (patch.kind !== "wall" && patch.kind !== "film") continue;
    const widthPx = patch.kind === "wall" ? 2.2 : 1.6;
    context.setLineDash(patch.kind === "film" ? [5 / view.pxPerMm, 3 / view.pxPerMm] : []);
    setInk(context, palette.sheet, 0.8);
    context.lineWidth = (widthPx + 2) / view.pxPerMm;
    context.stroke(pathOf(patch));
    setInk(context, palette.ink);
    context.lineWidth = widthPx / view.pxPerMm;
    context.stroke(pathOf(patch));
  }
  context.setLineDash([]);
  context.globalAlpha = 1;
}

/** All paint of the section in painting order, then walls and films over it; cut off at the section's edge. */
export function drawPaint(pen: Pen, drawing: Drawing): void {
  const { context } = pen;
  const GHz = bandMiddleGHz(drawing.scene.band);
  const hatchings = new Map<string, Hatching>();
  const hatchingFor = (id: string): Hatching => {
    let hatching = hatchings.get(id);
    if (hatching === undefined) {
      hatching = hatchingOf(drawing.mediaById.get(id), GHz);
      hatchings.set(id, hatching);
    }
    return hatching;
  };
  context.save();
  inMillimetres(pen);
  context.beginPath();
  context.rect(0, 0, drawing.widthMm, drawing.heightMm);
  context.clip();
  drawBackground(pen, drawing, hatchingFor(drawing.scene.background));
  for (const group of groupPaint(drawing.paint)) drawGroup(pen, group, hatchingFor(group.medium));
  drawLines(pen, drawing.paint);
  context.restore();
}

function drawBackground(pen: Pen, drawing: Drawing, hatching: Hatching): void {
  if (!hatching.opaque && hatching.tint === 0 && hatching.strokes.length === 0) return;
  const whole: ResolvedAreaPatch = {
    kind: "rectangle",
    id: "background",
    medium: drawing.scene.background,
    x: 0,
    y: 0,
    width: drawing.widthMm,
    height: drawing.heightMm,
    angle: 0,
  };
  fillGround(pen, whole, hatching);
  fillHatch(pen, whole, hatching);
  pen.context.globalAlpha = 1;
}

/** A shape that is still being drawn: its body, half seen. */
export function drawGhost(pen: Pen, patch: ResolvedPatch, medium: Medium | undefined, GHz: number): void {
  if (!("medium" in patch)) return;
  const { context } = pen;
  const hatching = hatchingOf(medium, GHz);
  context.save();
  inMillimetres(pen);
  context.globalAlpha = 0.6;
  fillHatch(pen, patch, hatching);
  context.restore();
}

/** A swatch of the medium over the whole of a small canvas, by the very code that draws the section. */
export function drawSwatch(
  pen: Pen,
  medium: Medium | undefined,
  GHz: number,
  size: { widthPx: number; heightPx: number },
): void {
  const patch: ResolvedAreaPatch = {
    kind: "rectangle",
    id: "swatch",
    medium: "swatch",
    x: 0,
    y: 0,
    width: size.widthPx,
    height: size.heightPx,
    angle: 0,
  };
  const hatching = hatchingOf(medium, GHz);
  inMillimetres(pen);
  pen.context.clearRect(0, 0, size.widthPx, size.heightPx);
  fillGround(pen, patch, hatching);
  fillHatch(pen, patch, hatching);
  pen.context.globalAlpha = 1;
}
