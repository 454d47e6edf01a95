import { whenInWords } from "../../lib/moments";
import type { SaveState } from "./autosave";

/** "rev 3, saved 14:02": what follows the scene's name in the header. */
export function saveWords(state: SaveState): string {
  switch (state.kind) {
    case "saved":
      return `saved ${whenInWords(state.at)}`;
    case "saving":
      return "saving…";
    case "unsaved":
      return "not saved yet";
    case "offline":
      return "kept on this machine, not saved";
    case "refused":
      return "not saved";
    case "stale":
      return "not saved: another version stands";
  }
}

export function SaveNote({
  revision,
  state,
  readOnly,
}: {
  revision: number;
  state: SaveState;
  readOnly: boolean;
}) {
  const bad = state.kind === "offline" || state.kind === "refused" || state.kind === "stale";
  return (
    <span aria-live="polite" data-testid="save-note" style={bad ? { color: "var(--limit)" } : undefined}>
      rev {revision}, {readOnly ? "read only" : saveWords(state)}
    </span>
  );
}
