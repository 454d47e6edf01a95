import type { OutOfPlane } from "@heddle/kernels/scene";
import { figure } from "../../lib/figures";

/** What the section leaves out, in one sentence, by what z is in the real object. */
export function cautionOf(outOfPlane: OutOfPlane): string {
  switch (outOfPlane.kind) {
    case "unbounded":
      return "A section says nothing of what varies along z.";
    case "height":
      return `A section between plates ${figure(outOfPlane.mm, 4)} mm apart: the plates' loss and modes that vary along z come on top.`;
    case "guide-width":
      return `An E-plane part of a guide ${figure(outOfPlane.mm, 4)} mm wide: frequencies hold after re-mapping by its cut-off.`;
    case "along-guide":
      return "A cross-section of a guide along z: it shows cut-offs, not what happens along the guide.";
  }
}

export const DESIGN_CAUTION =
  "Shielding and emission figures support a design decision; they replace neither an accredited measurement nor the limits of the standard that applies.";
