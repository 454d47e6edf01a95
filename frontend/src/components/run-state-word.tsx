import type { RunState } from "@heddle/backend/contract";
import type { ReactNode } from "react";

const ring = <circle cx={5} cy={5} r={4} fill="none" />;
const SIGNS: Record<RunState, ReactNode> = {
  queued: <circle cx={5} cy={5} r={4} fill="none" strokeDasharray="2 2.19" />,
  running: (
    <>
      {ring}
      <path d="M5 1a4 4 0 0 1 0 8z" fill="currentColor" stroke="none" />
    </>
  ),
  paused: (
    <>
      {ring}
      <path d="M3.8 3.2v3.6M6.2 3.2v3.6" />
    </>
  ),
  done: <circle cx={5} cy={5} r={4} fill="currentColor" />,
  stopped: (
    <>
      {ring}
      <path d="M3.5 3.5h3v3h-3z" fill="currentColor" stroke="none" />
    </>
  ),
  failed: <path d="M1.5 1.5l7 7M8.5 1.5l-7 7" />,
  interrupted: <path d="M1 5h2.5M6.5 5H9M4 8.5l2-7" />,
};

/** A run's state as a sign and its word; broken ones in the limit's red. */
export function RunStateWord({ state }: { state: RunState }) {
  const broken = state === "failed" || state === "interrupted";
  return (
    <span style={{ color: broken ? "var(--limit)" : undefined, whiteSpace: "nowrap" }}>
      <svg
        width={10}
        height={10}
        viewBox="0 0 10 10"
        stroke="currentColor"
        strokeWidth={1.2}
        aria-hidden="true"
        style={{ color: broken ? undefined : "var(--accent)", marginRight: 6 }}
      >
        {SIGNS[state]}
      </svg>
      {state}
    </span>
  );
}
