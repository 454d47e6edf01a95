import type { RunState } from "@heddle/backend/contract";

const SIGNS: Record<RunState, string> = {
  queued: "○",
  running: "◐",
  paused: "◫",
  done: "●",
  stopped: "◌",
  failed: "×",
  interrupted: "×",
};

/** A run's state as a sign and its word; broken ones in the limit's red. */
export function RunStateWord({ state }: { state: RunState }) {
  const broken = state === "failed" || state === "interrupted";
  return (
    <span style={{ color: broken ? "var(--limit)" : undefined, whiteSpace: "nowrap" }}>
      <span
        aria-hidden="true"
        style={{ display: "inline-block", width: 14, color: broken ? undefined : "var(--accent)" }}
      >
        {SIGNS[state]}
      </span>
      {state}
    </span>
  );
}
