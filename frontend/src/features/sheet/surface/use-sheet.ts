import type { Scene } from "@heddle/kernels/scene";
import { useEffect, useState, useSyncExternalStore } from "react";
import { createSheetEditor, type SheetEditor } from "../document/editor";
import type { SheetState, SheetStore, SheetStoreOptions } from "../document/store";

/** A part of the sheet's state. `pick` must give the same object for the same state. */
export function useSheet<T>(store: SheetStore, pick: (state: SheetState) => T): T {
  return useSyncExternalStore(store.subscribe, () => pick(store.getState()));
}

/**
 * One editor for as long as the page shows the scene. Another document is shown with `editor.load`; a change of
 * `readOnly` is followed.
 */
export function useSheetEditor(document: Scene, options: SheetStoreOptions = {}): SheetEditor {
  const [editor] = useState(() => createSheetEditor(document, options));
  const readOnly = options.readOnly ?? false;
  useEffect(() => {
    editor.setReadOnly(readOnly);
  }, [editor, readOnly]);
  return editor;
}
