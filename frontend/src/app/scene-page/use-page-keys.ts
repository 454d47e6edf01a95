import { useEffect, useRef } from "react";

/** Ctrl+S saves at once, Ctrl+Enter runs, pauses or resumes, wherever the keyboard is. */
export function usePageKeys(keys: { onSave: () => void; onRun: () => void }): void {
  const latest = useRef(keys);
  useEffect(() => {
    latest.current = keys;
  });
  useEffect(() => {
    const onKeyDown = (event: KeyboardEvent): void => {
      if (!(event.ctrlKey || event.metaKey) || event.shiftKey || event.altKey) return;
      if (event.key === "s") latest.current.onSave();
      else if (event.key === "Enter") latest.current.onRun();
      else return;
      event.preventDefault();
    };
    globalThis.addEventListener("keydown", onKeyDown);
    return () => {
      globalThis.removeEventListener("keydown", onKeyDown);
    };
  }, []);
}
