import type { ReactNode } from "react";
import type { ToolId } from "../document/store";

/** Strokes of 1.4 on a 20 × 20 field, drawn for this rail. */
const SHAPES: Readonly<Record<ToolId, ReactNode>> = {
  select: <path d="M5.5 3.5 15 11l-4.4.7L8.2 16z" />,
  brush: (
    <>
      <path d="M16 3.5c-3.4 2-5.8 4.4-7.2 7.4l1.6 1.5c3-1.6 4.7-4.6 5.6-8.9Z" />
      <path d="M8.2 11.6c-2.2 0-3.2 1.2-3.3 3.1-.1.9-.6 1.5-1.4 1.8 3.6.8 6.3-.6 6.3-3.4" />
    </>
  ),
  rectangle: <path d="M3.5 5.5h13v9h-13z" />,
  ellipse: <ellipse cx="10" cy="10" rx="6.8" ry="5" />,
  polygon: <path d="M4 8.5 10.5 4l6 4-2 8H6.5z" />,
  wall: (
    <>
      <path d="M3 15.5 7.5 6l6.5 4.5L17 5" />
      <path d="M7.5 6v.01M14 10.5v.01" strokeWidth="3.4" strokeLinecap="round" />
    </>
  ),
  source: (
    <>
      <circle cx="10" cy="10" r="6" />
      <circle cx="10" cy="10" r="1.6" fill="currentColor" stroke="none" />
    </>
  ),
  probe: (
    <>
      <path d="M6 17V3.5l9.5 3.8L6 11" />
      <circle cx="6" cy="17" r="1.4" fill="currentColor" stroke="none" />
    </>
  ),
  measure: (
    <>
      <path d="M3.5 6v8M16.5 6v8M4 10h12" />
      <path d="m6.8 7.8-2.6 2.2 2.6 2.2M13.2 7.8l2.6 2.2-2.6 2.2" />
    </>
  ),
};

export function Icon({ children }: { children: ReactNode }) {
  return (
    <svg
      width="20"
      height="20"
      viewBox="0 0 20 20"
      fill="none"
      stroke="currentColor"
      strokeWidth="1.4"
      strokeLinejoin="round"
      aria-hidden="true"
    >
      {children}
    </svg>
  );
}

export const ToolIcon = ({ tool }: { tool: ToolId }) => <Icon>{SHAPES[tool]}</Icon>;
