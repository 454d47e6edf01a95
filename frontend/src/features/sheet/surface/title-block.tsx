import { type ReactNode, useLayoutEffect, useRef, useState } from "react";
import { figure, quantity } from "../camera/lengths-in-words";
import type { SheetEditor } from "../document/editor";
import { useSheet } from "./use-sheet";

/** What the scene itself cannot say of itself. Absent facts show as a dash. */
export interface TitleBlockFacts {
  /** "rev 12", "rev C, edited". */
  revision?: string;
  cellMm?: number;
  stepPs?: number;
  /** Who saved it last, and when, in words. */
  who?: string;
  when?: string;
  /** A sentence: "holds, 4.1 dB ± 0.6". */
  verdict?: { sentence: string; broken: boolean };
}

interface Size {
  widthPx: number;
  heightPx: number;
}

const NONE = "–";

const ORDINATE = {
  unbounded: "unbounded",
  height: "height",
  "guide-width": "guide width",
  "along-guide": "along guide",
};

/** The drawing's title block, filled by the scene. It can be folded to its first line. */
export function TitleBlock(props: {
  editor: SheetEditor;
  facts: TitleBlockFacts;
  onSize: (size: Size) => void;
}) {
  const { editor, facts, onSize } = props;
  const element = useRef<HTMLElement>(null);
  const [folded, setFolded] = useState(false);
  const scene = useSheet(editor, (state) => state.document);
  const drawing = useSheet(editor, (state) => state.drawing);

  useLayoutEffect(() => {
    const block = element.current;
    if (block === null) return;
    const measure = (): void => {
      onSize({ widthPx: block.offsetWidth, heightPx: block.offsetHeight });
    };
    measure();
    const observer = new ResizeObserver(measure);
    observer.observe(block);
    return () => {
      observer.disconnect();
    };
  }, [onSize]);

  const { kind } = scene.outOfPlane;
  const along =
    "mm" in scene.outOfPlane && scene.outOfPlane.mm !== undefined ? ` ${figure(scene.outOfPlane.mm)} mm` : "";
  const rows: [string, ReactNode][] = [
    ["field", scene.polarization === "TMz" ? "Ez, TMz" : "Hz, TEz"],
    ["section", `${figure(drawing.widthMm)} × ${figure(drawing.heightMm)} mm`],
    ["along z", `${ORDINATE[kind]}${along}`],
    ["cell", facts.cellMm === undefined ? meshInWords(scene.mesh) : `${facts.cellMm.toPrecision(3)} mm`],
    ["step", facts.stepPs === undefined ? NONE : quantity(facts.stepPs * 1e-12, "s", 4)],
    ["band", `${figure(scene.band.fromGHz)} – ${figure(scene.band.toGHz)} GHz`],
    ["saved by", facts.who ?? NONE],
    ["saved", facts.when ?? NONE],
    ["media", String(scene.media.length)],
  ];
  return (
    <section ref={element} className="title-block" aria-label="Title block">
      <div className="title-block-head">
        <h2 className="title-block-name" title={scene.name}>
          {scene.name}
        </h2>
        <span className="title-block-revision">{facts.revision ?? ""}</span>
        <button
          type="button"
          className="title-block-fold"
          aria-expanded={!folded}
          aria-label={folded ? "Unfold the title block" : "Fold the title block"}
          onClick={() => {
            setFolded(!folded);
          }}
        >
          <svg width="12" height="12" viewBox="0 0 12 12" aria-hidden="true">
            <path
              d={folded ? "M2.5 7.5 6 4l3.5 3.5" : "M2.5 4.5 6 8l3.5-3.5"}
              fill="none"
              stroke="currentColor"
              strokeWidth="1.4"
            />
          </svg>
        </button>
      </div>
      {folded ? null : (
        <dl className="title-block-facts">
          {rows.map(([name, value], i) => (
            <div key={name} className={i % 3 === 0 ? "starts-row" : undefined}>
              <dt>{name}</dt>
              <dd>{value}</dd>
            </div>
          ))}
          {facts.verdict === undefined ? null : (
            <div className="starts-row spans">
              <dt>verdict</dt>
              <dd className={facts.verdict.broken ? "broken" : undefined}>{facts.verdict.sentence}</dd>
            </div>
          )}
        </dl>
      )}
    </section>
  );
}

const meshInWords = (mesh: { cellMm: number } | { cellsPerWavelength: number }): string =>
  "cellMm" in mesh ? `${mesh.cellMm.toPrecision(3)} mm` : `λ/${figure(mesh.cellsPerWavelength)}`;
