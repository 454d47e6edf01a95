import type { ReactNode } from "react";

/** A page, or a part of one, that has only a sentence to say and a way on. */
export function PageMessage({
  title,
  children,
  actions,
}: {
  title: string;
  children: ReactNode;
  actions?: ReactNode;
}) {
  return (
    <section style={{ maxWidth: 520, margin: "12vh auto 0", padding: "0 20px" }}>
      <h1 style={{ fontSize: 22, fontWeight: 500, lineHeight: 1.25, margin: "0 0 8px" }}>{title}</h1>
      <div style={{ color: "var(--soft)" }}>{children}</div>
      {actions === undefined ? null : (
        <div style={{ display: "flex", flexWrap: "wrap", gap: 8, marginTop: 20 }}>{actions}</div>
      )}
    </section>
  );
}
