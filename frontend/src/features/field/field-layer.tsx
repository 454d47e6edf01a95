import { useEffect, useLayoutEffect, useMemo, useRef, useState } from "react";
import type { TokenColours } from "../../hooks/token-colours";
import { useTokenColours } from "../../hooks/token-colours";
import type { Viewport } from "../../hooks/viewport";
import { toPx, useViewport } from "../../hooks/viewport";
import type { Scale } from "./colour-maps";
import { colourMap } from "./colour-maps";
import { parseColour } from "./colour-space";
import type { ColourTables } from "./field-painter";
import { FieldPainter } from "./field-painter";
import type { Placement } from "./field-renderer";
import type { FieldSlot } from "./field-slot";

export interface SectionSize {
  widthMm: number;
  heightMm: number;
}

export interface FieldLayerProps {
  slot: FieldSlot;
  section: SectionSize;
  scale: Scale;
  /** Called once, with a sentence, where the field is drawn without WebGL. */
  onPlainCanvas?: (sentence: string) => void;
}

const placementOf = (view: Viewport, { widthMm, heightMm }: SectionSize): Placement => {
  const corner = toPx(view, { xMm: 0, yMm: heightMm });
  return {
    leftPx: corner.xPx,
    topPx: corner.yPx,
    widthPx: widthMm * view.pxPerMm,
    heightPx: heightMm * view.pxPerMm,
    surfaceWidthPx: view.widthPx,
    surfaceHeightPx: view.heightPx,
  };
};

const tablesOf = (tokens: TokenColours, scale: Scale): ColourTables => {
  const sheet = parseColour(tokens.sheet) ?? [255, 255, 255];
  const table = (signed: boolean): Uint8Array => colourMap({ signed, sheet, scale }).data;
  return { signed: table(true), unsigned: table(false) };
};

/** The field as ink wash under the line work: one canvas that fills the drawing surface. */
export function FieldLayer({ slot, section, scale, onPlainCanvas }: FieldLayerProps) {
  const view = useViewport();
  const tokens = useTokenColours();
  const canvasRef = useRef<HTMLCanvasElement>(null);
  const placement = placementOf(view, section);
  const tables = useMemo(() => tablesOf(tokens, scale), [tokens, scale]);
  const painter = useMemo(() => new FieldPainter(slot), [slot]);
  // A canvas that once had a WebGL context gives no other, so the plain one is a new element.
  const [plain, setPlain] = useState(false);

  useEffect(() => {
    if (plain)
      onPlainCanvas?.("This browser gives no WebGL, so the field is drawn on a plain canvas and may lag.");
  }, [plain, onPlainCanvas]);

  useEffect(() => {
    const canvas = canvasRef.current;
    if (canvas === null) return;
    painter.mount(canvas, plain, () => {
      setPlain(true);
    });
    return () => {
      painter.unmount();
    };
  }, [painter, plain]);

  // Drawn in the same frame as the line work above it, so that the two never part while panning.
  useLayoutEffect(() => {
    painter.show(placement, tables);
  });

  return (
    <canvas
      key={plain ? "plain" : "webgl"}
      ref={canvasRef}
      aria-hidden="true"
      data-layer="field"
      style={{ position: "absolute", inset: 0, width: "100%", height: "100%", pointerEvents: "none" }}
    />
  );
}
