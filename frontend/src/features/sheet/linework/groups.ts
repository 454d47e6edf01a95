import type { ResolvedAreaPatch, ResolvedPatch } from "@heddle/kernels/scene";
import { type BoxMm, boxesMeet, joinBoxes } from "../geometry/points";
import { patchBox } from "../geometry/shapes";

/** Areas of one medium that are drawn as one body: outlined around their union, not where they meet. */
export interface PaintGroup {
  medium: string;
  patches: ResolvedAreaPatch[];
  /** Around all of them. */
  box: BoxMm;
}

/** How many groups back a patch may look for its like; bounds the work on a scene of thousands. */
const LOOK_BACK = 16;

const isArea = (patch: ResolvedPatch): patch is ResolvedAreaPatch => "medium" in patch;

const boxes = new WeakMap<ResolvedPatch, BoxMm>();
function boxOfPatch(patch: ResolvedPatch): BoxMm {
  let box = boxes.get(patch);
  if (box === undefined) {
    box = patchBox(patch);
    boxes.set(patch, box);
  }
  return box;
}

/**
 * Gathers areas of the same medium without changing the picture: a patch joins an earlier group of its medium only
 * where nothing painted in between could lie under it.
 */
export function groupPaint(paint: readonly ResolvedPatch[]): PaintGroup[] {
  const groups: PaintGroup[] = [];
  for (const patch of paint) {
    if (!isArea(patch)) continue;
    const box = boxOfPatch(patch);
    let joined = false;
    for (let i = groups.length - 1; i >= Math.max(0, groups.length - LOOK_BACK); i -= 1) {
      const group = groups[i];
      if (group.medium === patch.medium) {
        group.patches.push(patch);
        group.box = joinBoxes(group.box, box);
        joined = true;
        break;
      }
      if (boxesMeet(group.box, box) && group.patches.some((other) => boxesMeet(boxOfPatch(other), box)))
        break;
    }
    if (!joined) groups.push({ medium: patch.medium, patches: [patch], box });
  }
  return groups;
}
