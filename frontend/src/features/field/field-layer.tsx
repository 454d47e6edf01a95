import { useEffect, useLayoutEffect, useMemo, useRef, useState } from "react";
import { isSigned } from "@heddle/kernels/frames";
import type { TokenColours } from "../../hooks/token-colours";
import { useTokenColours } from "../../hooks/token-colours";
import type { Viewport } from "../../hooks/viewport";
import { toPx, useViewport } from "../../hooks/viewport";
import { createCanvasRenderer } from "./canvas-renderer";
import type { Scale } from "./colour-maps";
import { colourMap } from "./colour-maps";
import { parseColour } from "./colour-space";
import type { FieldRenderer, Placement } from "./field-renderer";
import type { FieldSlot } from "./field-slot";
import { createWebglRenderer } from "./webgl-renderer";

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

const tablesOf = (tokens: TokenColours, scale: Scale): { signed: Uint8Array; unsigned: Uint8Array } => {
  const sheet = parseColour(tokens.sheet) ?? [255, 255, 255];
  const table = (signed: boolean): Uint8Array => colourMap({ signed, sheet, scale }).data;
  return { signed: table(true), unsigned: table(false) };
};

/** What the drawing loop reads; kept out of React so that a frame renders no component. */
interface Scene {
  renderer: FieldRenderer | null;
  placement: Placement;
  tables: { signed: Uint8Array; unsigned: Uint8Array };
  /** The table that the renderer holds, and the frame. */
  shownTable: Uint8Array | null;
  shownFrame: object | null;
}

function drawNow(scene: Scene, slot: FieldSlot): void {
  const { renderer, placement, tables } = scene;
  if (renderer === null || placement.surfaceWidthPx < 1 || placement.surfaceHeightPx < 1) return;
  const frame = slot.latest();
  const table = frame === null || isSigned(frame.quantity) ? tables.signed : tables.unsigned;
  if (scene.shownTable !== table) {
    renderer.setColours(table);
    scene.shownTable = table;
  }
  if (scene.shownFrame !== frame) {
    renderer.setFrame(frame);
    scene.shownFrame = frame;
  }
  renderer.draw(placement);
  slot.drawn();
}

/** The field as ink wash under the line work: one canvas that fills the drawing surface. */
export function FieldLayer({ slot, section, scale, onPlainCanvas }: FieldLayerProps) {
  const view = useViewport();
  const tokens = useTokenColours();
  const canvasRef = useRef<HTMLCanvasElement>(null);
  const placement = placementOf(view, section);
  const tables = useMemo(() => tablesOf(tokens, scale), [tokens, scale]);
  const [scene] = useState<Scene>(() => ({
    renderer: null,
    placement,
    tables,
    shownTable: null,
    shownFrame: null,
  }));
  // A canvas that once had a WebGL context gives no other, so the plain one is a new element.
  const [plain, setPlain] = useState(false);

  useEffect(() => {
    if (plain)
      onPlainCanvas?.("This browser gives no WebGL, so the field is drawn on a plain canvas and may lag.");
  }, [plain, onPlainCanvas]);

  useEffect(() => {
    const canvas = canvasRef.current;
    if (canvas === null) return;
    let animation = 0;
    const draw = (): void => {
      animation = 0;
      drawNow(scene, slot);
    };
    const markDirty = (): void => {
      if (animation === 0) animation = requestAnimationFrame(draw);
    };
    try {
      scene.renderer = plain
        ? createCanvasRenderer(canvas)
        : createWebglRenderer({ canvas, onRestored: markDirty });
    } catch {
      setPlain(true);
      return;
    }
    fit(canvas, scene);
    markDirty();
    const leave = slot.subscribe(markDirty);
    return () => {
      leave();
      cancelAnimationFrame(animation);
      scene.renderer?.destroy();
      scene.renderer = null;
      scene.shownTable = null;
      scene.shownFrame = null;
    };
  }, [scene, slot, plain]);

  // Drawn in the same frame as the line work above it, so that the two never part while panning.
  useLayoutEffect(() => {
    scene.placement = placement;
    scene.tables = tables;
    if (canvasRef.current !== null) fit(canvasRef.current, scene);
    drawNow(scene, slot);
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

function fit(canvas: HTMLCanvasElement, scene: Scene): void {
  const ratio = Math.min(2, globalThis.devicePixelRatio);
  scene.renderer?.resize(
    Math.max(1, Math.round(canvas.clientWidth * ratio)),
    Math.max(1, Math.round(canvas.clientHeight * ratio)),
  );
}
