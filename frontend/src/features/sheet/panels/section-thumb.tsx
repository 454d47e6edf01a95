import type { Scene } from "@heddle/kernels/scene";
import { useEffect, useRef } from "react";
import { fitBox } from "../camera/camera";
import { drawingOf } from "../document/drawing";
import { drawPaint, inPixels } from "../linework/draw-paint";
import { drawSection } from "../linework/draw-section";
import { HatchPatterns } from "../linework/hatch-pattern";
import { readPalette, watchScheme } from "../linework/palette";
import "./panels.css";

/** A small drawing of a section for lists: paint, edges, sources and probes as dots; nothing to be used. */
export function SectionThumb(props: {
  document: Scene;
  widthPx?: number;
  heightPx?: number;
  label?: string;
}) {
  const { document: scene, widthPx = 132, heightPx = 88, label = `Drawing of ${scene.name}` } = props;
  const canvas = useRef<HTMLCanvasElement>(null);
  useEffect(() => {
    const element = canvas.current;
    if (element === null) return;
    const draw = (): void => {
      drawThumb(element, scene, widthPx, heightPx);
    };
    draw();
    return watchScheme(draw);
  }, [scene, widthPx, heightPx]);
  return (
    <canvas
      ref={canvas}
      className="section-thumb"
      role="img"
      aria-label={label}
      style={{ width: widthPx, height: heightPx }}
    />
  );
}

function drawThumb(canvas: HTMLCanvasElement, scene: Scene, widthPx: number, heightPx: number): void {
  const context = canvas.getContext("2d");
  if (context === null) return;
  const pixelRatio = window.devicePixelRatio;
  canvas.width = Math.round(widthPx * pixelRatio);
  canvas.height = Math.round(heightPx * pixelRatio);
  const drawing = drawingOf(scene);
  const box = { left: 0, bottom: 0, right: drawing.widthMm, top: drawing.heightMm };
  const view = fitBox(box, { widthPx, heightPx }, { left: 5, top: 5, right: 5, bottom: 5 });
  const pen = { context, palette: readPalette(canvas), patterns: new HatchPatterns(), pixelRatio, view };
  drawPaint(pen, drawing);
  inPixels(pen);
  drawSection(pen, drawing);
  const dot = (x: number, y: number, filled: boolean): void => {
    context.beginPath();
    context.arc(view.originXPx + x * view.pxPerMm, view.originYPx - y * view.pxPerMm, 2.4, 0, 2 * Math.PI);
    context.fillStyle = filled ? pen.palette.accent : pen.palette.sheet;
    context.fill();
    context.strokeStyle = pen.palette.ink;
    context.lineWidth = 1;
    context.stroke();
  };
  for (const source of drawing.sources) if (source.kind === "line") dot(source.x, source.y, true);
  for (const probe of drawing.probes) if (probe.kind === "point") dot(probe.x, probe.y, false);
}
