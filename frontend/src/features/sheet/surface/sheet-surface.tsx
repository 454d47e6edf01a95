import {
  type PointerEvent as ReactPointerEvent,
  type ReactNode,
  useCallback,
  useEffect,
  useId,
  useLayoutEffect,
  useRef,
  useState,
} from "react";
import { type PointMm, type PointPx, toMm, ViewportContext } from "../../../hooks/viewport";
import type { Insets } from "../camera/camera";
import { pressKey } from "../document/keyboard";
import type { SheetEditor } from "../document/editor";
import { RULER_PX } from "../linework/draw-rulers";
import type { RawPointer } from "../tools/toolbox";
import { sheetInWords } from "./in-words";
import { SheetRenderer } from "./renderer";
import { TitleBlock, type TitleBlockFacts } from "./title-block";
import { useSheet } from "./use-sheet";
import "./sheet-surface.css";

export interface SheetSurfaceProps {
  editor: SheetEditor;
  /** Lies on the paper under the line work; finds its place with `useViewport`. */
  fieldLayer?: ReactNode;
  /** Lies over the line work: colour key, notes. */
  overlays?: ReactNode;
  /** What the scene itself cannot know; absent: no title block. */
  titleBlock?: TitleBlockFacts;
  /** Pixels beyond the sheet's own margins that a fitted section keeps clear of, for overlays. */
  clearance?: Partial<Insets>;
  onHover?: (at: PointMm | null) => void;
}

const MARGIN: Insets = { left: RULER_PX + 22, top: RULER_PX + 18, right: 20, bottom: 44 };
/** Free pixels around the title block. */
const BLOCK_GAP = 12;

/** The drawing sheet: paper, field, line work, rulers, title block, and the tools at the pointer and the keyboard. */
export function SheetSurface(props: SheetSurfaceProps) {
  const { editor, fieldLayer, overlays, titleBlock, clearance, onHover } = props;
  const surface = useRef<HTMLDivElement>(null);
  const paint = useRef<HTMLCanvasElement>(null);
  const marks = useRef<HTMLCanvasElement>(null);
  const renderer = useRef<SheetRenderer | null>(null);
  const hintId = useId();
  const view = useSheet(editor, (state) => state.view);
  const words = useSheet(editor, (state) => sheetInWords(state));
  const notice = useSheet(editor, (state) => state.notice);
  const cursor = useSheet(editor, () => editor.tools.cursor);
  const [block, setBlock] = useState<{ widthPx: number; heightPx: number } | null>(null);

  useEffect(() => {
    if (paint.current === null || marks.current === null) return;
    const made = new SheetRenderer(editor, paint.current, marks.current);
    renderer.current = made;
    return () => {
      made.dispose();
      renderer.current = null;
    };
  }, [editor]);

  useLayoutEffect(() => {
    const element = surface.current;
    if (element === null) return;
    const measure = (): void => {
      editor.resize(element.clientWidth, element.clientHeight);
    };
    measure();
    const observer = new ResizeObserver(measure);
    observer.observe(element);
    return () => {
      observer.disconnect();
    };
  }, [editor]);

  const { left = 0, top = 0, right = 0, bottom = 0 } = clearance ?? {};
  useLayoutEffect(() => {
    const insets = {
      left: MARGIN.left + left,
      top: MARGIN.top + top,
      right: MARGIN.right + right,
      bottom: MARGIN.bottom + bottom,
    };
    const kept = block && {
      widthPx: block.widthPx + 2 * BLOCK_GAP,
      // The margin below the section is already free; the block needs what is higher than it.
      heightPx: Math.max(0, block.heightPx + 2 * BLOCK_GAP - MARGIN.bottom),
    };
    editor.setFitArea(insets, kept);
  }, [editor, block, left, top, right, bottom]);

  useEffect(() => {
    const element = surface.current;
    if (element === null) return;
    // React's wheel listener is passive and could not keep the page from scrolling.
    const onWheel = (event: WheelEvent): void => {
      event.preventDefault();
      const lines = event.deltaMode === WheelEvent.DOM_DELTA_LINE ? 16 : 1;
      if (event.shiftKey) editor.pan(-(event.deltaX + event.deltaY) * lines, 0);
      else editor.zoom(Math.exp(-event.deltaY * lines * 0.0016), placeOn(element, event));
    };
    const onBlur = (): void => {
      editor.tools.releaseSpace();
    };
    element.addEventListener("wheel", onWheel, { passive: false });
    window.addEventListener("blur", onBlur);
    return () => {
      element.removeEventListener("wheel", onWheel);
      window.removeEventListener("blur", onBlur);
    };
  }, [editor]);

  useBodyKeys(editor);

  const raw = useCallback((event: ReactPointerEvent | PointerEvent | React.MouseEvent): RawPointer => {
    return {
      px: placeOn(surface.current, event),
      button: event.button,
      shift: event.shiftKey,
      alt: event.altKey,
      ctrl: event.ctrlKey || event.metaKey,
    };
  }, []);

  const onPointerMove = (event: ReactPointerEvent): void => {
    const pointer = raw(event);
    renderer.current?.setCursor(pointer.px);
    onHover?.(toMm(editor.view, pointer.px));
    const pressed = event.buttons !== 0;
    const steps = pressed ? event.nativeEvent.getCoalescedEvents() : [];
    if (steps.length > 1) for (const step of steps) editor.tools.pointerMove(raw(step));
    else editor.tools.pointerMove(pointer);
  };

  return (
    <div className="sheet-surface">
      <div
        ref={surface}
        className="sheet-paper"
        // Keys go to the sheet's own commands; the patch list beside it is the way in for screen readers.
        role="application"
        aria-label={words}
        aria-describedby={hintId}
        tabIndex={0}
        // Where millimetres lie in pixels, for whoever drives the page from outside.
        data-view={`${view.pxPerMm} ${view.originXPx} ${view.originYPx}`}
        style={{ cursor }}
        onPointerDown={(event) => {
          surface.current?.focus({ preventScroll: true });
          event.currentTarget.setPointerCapture(event.pointerId);
          if (event.button === 1) event.preventDefault();
          editor.tools.pointerDown(raw(event));
        }}
        onPointerMove={onPointerMove}
        onPointerUp={(event) => {
          editor.tools.pointerUp(raw(event));
        }}
        onPointerCancel={() => {
          editor.tools.pointerCancel();
        }}
        onPointerLeave={() => {
          renderer.current?.setCursor(null);
          onHover?.(null);
        }}
        onDoubleClick={(event) => {
          editor.tools.doubleClick(raw(event));
        }}
        onContextMenu={(event) => {
          event.preventDefault();
        }}
        onKeyDown={(event) => {
          if (pressKey(editor, keyOf(event))) event.preventDefault();
        }}
        onKeyUp={(event) => {
          editor.tools.keyUp(keyOf(event));
        }}
      >
        <ViewportContext.Provider value={view}>
          <div className="sheet-layer">{view.widthPx > 0 ? fieldLayer : null}</div>
          <canvas ref={paint} className="sheet-layer" aria-hidden="true" />
          <canvas ref={marks} className="sheet-layer" aria-hidden="true" />
        </ViewportContext.Provider>
      </div>
      <ViewportContext.Provider value={view}>
        <div className="sheet-overlays">{overlays}</div>
      </ViewportContext.Provider>
      {titleBlock === undefined ? null : <TitleBlock editor={editor} facts={titleBlock} onSize={setBlock} />}
      <p id={hintId} className="visually-hidden">
        Letters choose tools, Enter places a shape in the middle, arrows move the selection, plus and minus
        zoom, zero fits.
      </p>
      <p className="visually-hidden" role="status">
        {notice}
      </p>
    </div>
  );
}

/** The pointer's place on the drawing surface, within its frame. */
function placeOn(element: HTMLElement | null, event: { clientX: number; clientY: number }): PointPx {
  const bounds = element?.getBoundingClientRect();
  return {
    xPx: event.clientX - (bounds?.left ?? 0) - (element?.clientLeft ?? 0),
    yPx: event.clientY - (bounds?.top ?? 0) - (element?.clientTop ?? 0),
  };
}

export const keyOf = (event: {
  key: string;
  shiftKey: boolean;
  altKey: boolean;
  ctrlKey: boolean;
  metaKey: boolean;
}): { key: string; shift: boolean; alt: boolean; ctrl: boolean } => ({
  key: event.key,
  shift: event.shiftKey,
  alt: event.altKey,
  ctrl: event.ctrlKey || event.metaKey,
});

/** While nothing on the page has the keyboard, the sheet has it. */
function useBodyKeys(editor: SheetEditor): void {
  useEffect(() => {
    const idle = (): boolean => document.activeElement === null || document.activeElement === document.body;
    const onKeyDown = (event: KeyboardEvent): void => {
      if (idle() && !event.defaultPrevented && pressKey(editor, keyOf(event))) event.preventDefault();
    };
    const onKeyUp = (event: KeyboardEvent): void => {
      if (idle()) editor.tools.keyUp(keyOf(event));
    };
    window.addEventListener("keydown", onKeyDown);
    window.addEventListener("keyup", onKeyUp);
    return () => {
      window.removeEventListener("keydown", onKeyDown);
      window.removeEventListener("keyup", onKeyUp);
    };
  }, [editor]);
}
