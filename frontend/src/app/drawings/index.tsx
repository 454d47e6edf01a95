/** The sheet's own small drawings, for pages that list scenes and media. They come in a chunk of their own. */
import type { Medium } from "@heddle/kernels/scene";
import type { ReactNode } from "react";
import { lazy, Suspense } from "react";

const Thumb = lazy(async () => ({ default: (await import("./small-drawings")).Thumb }));
const Swatch = lazy(async () => ({ default: (await import("./small-drawings")).Swatch }));

/** A scene document as a drawing of that size. */
export const thumb = (document: Record<string, unknown>, widthPx: number, heightPx: number): ReactNode => (
  <Suspense fallback={<span style={{ width: widthPx, height: heightPx }} />}>
    <Thumb document={document} widthPx={widthPx} heightPx={heightPx} />
  </Suspense>
);

/** A cut of a medium as the sheet hatches it. */
export const swatch = (medium: Medium, gigahertz: number): ReactNode => (
  <span style={{ display: "block", width: 34, height: 24 }}>
    <Suspense fallback={null}>
      <Swatch medium={medium} gigahertz={gigahertz} />
    </Suspense>
  </span>
);
