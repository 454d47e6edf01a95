import type { Medium } from "@heddle/kernels/scene";
import { readScene } from "@heddle/kernels/scene";
import { useMemo } from "react";
import { MediumSwatch, SectionThumb } from "../../features/sheet";

interface ThumbProps {
  document: Record<string, unknown>;
  widthPx: number;
  heightPx: number;
}

/** A scene document as a small drawing; a document that cannot be read says so in its place. */
export function Thumb({ document, widthPx, heightPx }: ThumbProps) {
  const outcome = useMemo(() => readScene(document), [document]);
  if (!outcome.ok) return <span style={{ color: "var(--soft)" }}>This drawing cannot be read.</span>;
  return <SectionThumb document={outcome.scene} widthPx={widthPx} heightPx={heightPx} />;
}

export function Swatch({ medium, gigahertz }: { medium: Medium; gigahertz: number }) {
  return <MediumSwatch medium={medium} GHz={gigahertz} />;
}
