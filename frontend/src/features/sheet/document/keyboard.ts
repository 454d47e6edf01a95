import type { SheetKey } from "../tools/tool";
import {
  deleteSelection,
  duplicateSelection,
  nudgeSelection,
  selectAll,
  TOOL_KEYS,
  ZOOM_STEP,
} from "./commands";
import type { SheetEditor } from "./editor";
import type { ToolId } from "./store";

const ARROWS: ReadonlyMap<string, readonly [number, number]> = new Map([
  ["ArrowLeft", [-1, 0]],
  ["ArrowRight", [1, 0]],
  ["ArrowUp", [0, 1]],
  ["ArrowDown", [0, -1]],
]);

const toolOf = (letter: string): ToolId | undefined =>
  (Object.keys(TOOL_KEYS) as ToolId[]).find((tool) => TOOL_KEYS[tool] === letter.toUpperCase());

function withControl(editor: SheetEditor, key: SheetKey): boolean {
  switch (key.key.toLowerCase()) {
    case "z":
      if (key.shift) editor.redo();
      else editor.undo();
      return true;
    case "y":
      editor.redo();
      return true;
    case "d":
      duplicateSelection(editor);
      return true;
    case "a":
      selectAll(editor);
      return true;
    default:
      return false;
  }
}

function plain(editor: SheetEditor, key: SheetKey): boolean {
  switch (key.key) {
    case "Escape":
      editor.tools.escape();
      return true;
    case "Delete":
    case "Backspace":
      deleteSelection(editor);
      return true;
    case "+":
    case "=":
      editor.zoom(ZOOM_STEP);
      return true;
    case "-":
    case "−":
      editor.zoom(1 / ZOOM_STEP);
      return true;
    case "0":
      editor.fit();
      return true;
    case "g":
    case "G":
      editor.setSnapping(!editor.state.snapping);
      return true;
    default:
      break;
  }
  const tool = key.key.length === 1 ? toolOf(key.key) : undefined;
  if (tool === undefined) return false;
  editor.setTool(tool);
  return true;
}

/** One key pressed while the sheet has the keyboard. True where it was used up. */
export function pressKey(editor: SheetEditor, key: SheetKey): boolean {
  if (editor.tools.keyDown(key)) return true;
  if (key.ctrl) return withControl(editor, key);
  if (key.alt) return false;
  const arrow = ARROWS.get(key.key);
  if (arrow !== undefined) {
    if (editor.state.selection.size > 0 && !editor.state.readOnly)
      nudgeSelection(editor, arrow[0], arrow[1], key.shift);
    else editor.pan(-arrow[0] * 40, arrow[1] * 40);
    return true;
  }
  return plain(editor, key);
}
