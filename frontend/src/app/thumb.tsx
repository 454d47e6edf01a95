import type { ReactNode } from "react";

/** A scene document as a small drawing, for every page that lists scenes. */
export const thumb = (_document: Record<string, unknown>): ReactNode => null;
