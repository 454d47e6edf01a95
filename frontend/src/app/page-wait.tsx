import { Mark } from "../components/mark";

/** Shown while the first answer of the server is on its way. */
export function PageWait() {
  return (
    <div
      role="status"
      aria-label="Loading"
      style={{ display: "grid", placeItems: "center", height: "100%", opacity: 0.5 }}
    >
      <Mark size={36} />
    </div>
  );
}
