import type { CSSProperties, ReactNode } from "react";

interface NoticeProps {
  /** "limit" is for what failed or was refused; "plain" for what should be known. */
  tone: "limit" | "plain";
  children: ReactNode;
  style?: CSSProperties;
}

/** A sentence that must be seen where it stands: a bar at its left, no icon. */
export function Notice({ tone, children, style }: NoticeProps) {
  return (
    <div
      role={tone === "limit" ? "alert" : "status"}
      style={{
        borderLeft: `3px solid ${tone === "limit" ? "var(--limit)" : "var(--accent)"}`,
        background: tone === "limit" ? "var(--limit-wash)" : "var(--accent-wash)",
        padding: "7px 10px",
        overflowWrap: "anywhere",
        ...style,
      }}
    >
      {children}
    </div>
  );
}
