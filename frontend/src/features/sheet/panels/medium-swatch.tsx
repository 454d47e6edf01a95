import type { Medium } from "@heddle/kernels/scene";
import { useEffect, useRef } from "react";
import { drawSwatch } from "../linework/draw-paint";
import { HatchPatterns } from "../linework/hatch-pattern";
import { readPalette, watchScheme } from "../linework/palette";

const SIZE = { widthPx: 34, heightPx: 24 };

/** A medium as the section shows it, drawn by the section's own code. */
export function MediumSwatch({ medium, GHz }: { medium: Medium; GHz: number }) {
  const canvas = useRef<HTMLCanvasElement>(null);
  useEffect(() => {
    const element = canvas.current;
    if (element === null) return;
    const draw = (): void => {
      const context = element.getContext("2d");
      if (context === null) return;
      const pixelRatio = window.devicePixelRatio;
      element.width = Math.round(SIZE.widthPx * pixelRatio);
      element.height = Math.round(SIZE.heightPx * pixelRatio);
      const view = { pxPerMm: 1, originXPx: 0, originYPx: SIZE.heightPx, ...SIZE };
      const pen = { context, palette: readPalette(element), patterns: new HatchPatterns(), pixelRatio, view };
      drawSwatch(pen, medium, GHz, SIZE);
    };
    draw();
    return watchScheme(draw);
  }, [medium, GHz]);
  return (
    <canvas
      ref={canvas}
      className="medium-swatch"
      aria-hidden="true"
      style={{ width: SIZE.widthPx, height: SIZE.heightPx }}
    />
  );
}
