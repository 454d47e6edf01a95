import { Tooltip } from "@mui/material";
import type { KeyboardEvent, ReactNode } from "react";
import { deleteSelection, TOOL_KEYS, ZOOM_STEP } from "../document/commands";
import type { SheetEditor } from "../document/editor";
import { pressKey } from "../document/keyboard";
import type { ToolId } from "../document/store";
import { keyOf } from "../surface/sheet-surface";
import { useSheet } from "../surface/use-sheet";
import { Icon, ToolIcon } from "./tool-icons";
import "./panels.css";

const NAMES: Readonly<Record<ToolId, string>> = {
  select: "Select and move",
  brush: "Brush",
  rectangle: "Rectangle",
  ellipse: "Ellipse",
  polygon: "Polygon",
  wall: "Thin wall",
  source: "Line source",
  probe: "Point probe",
  measure: "Measure",
};

const EDITING: readonly (readonly ToolId[])[] = [
  ["select", "brush", "rectangle", "ellipse", "polygon", "wall"],
  ["source", "probe"],
  ["measure"],
];
const READING: readonly (readonly ToolId[])[] = [["select"], ["measure"]];

/** The tools in a column: up and down arrows walk through them. For a reader, selection and measuring remain. */
export function ToolRail({ editor }: { editor: SheetEditor }) {
  const active = useSheet(editor, (state) => state.tool);
  const readOnly = useSheet(editor, (state) => state.readOnly);
  const undoLabel = useSheet(editor, (state) => state.undoLabel);
  const redoLabel = useSheet(editor, (state) => state.redoLabel);
  const chosen = useSheet(editor, (state) => state.selection.size > 0);
  const groups = readOnly ? READING : EDITING;
  return (
    <div
      className="tool-rail"
      role="toolbar"
      aria-label="Drawing tools"
      aria-orientation="vertical"
      onKeyDown={(event) => {
        walk(event);
        const own = event.key === "Enter" || event.key === " " || event.key === "Tab";
        if (!own && !event.defaultPrevented && pressKey(editor, keyOf(event))) event.preventDefault();
      }}
    >
      {groups.map((tools) => (
        <div key={tools.join()} className="tool-rail-group">
          {tools.map((tool) => (
            <RailButton
              key={tool}
              name={NAMES[tool]}
              keys={TOOL_KEYS[tool]}
              pressed={active === tool}
              onClick={() => {
                editor.setTool(tool);
              }}
            >
              <ToolIcon tool={tool} />
            </RailButton>
          ))}
        </div>
      ))}
      {readOnly ? null : (
        <div className="tool-rail-group">
          <RailButton
            name={undoLabel === null ? "Undo" : `Undo: ${undoLabel}`}
            keys="Ctrl+Z"
            disabled={undoLabel === null}
            onClick={() => {
              editor.undo();
            }}
          >
            <Icon>
              <path d="M7.5 4.5 4 8l3.5 3.5M4.4 8H12a4 4 0 0 1 0 8H9" />
            </Icon>
          </RailButton>
          <RailButton
            name={redoLabel === null ? "Redo" : `Redo: ${redoLabel}`}
            keys="Ctrl+Y"
            disabled={redoLabel === null}
            onClick={() => {
              editor.redo();
            }}
          >
            <Icon>
              <path d="M12.5 4.5 16 8l-3.5 3.5M15.6 8H8a4 4 0 0 0 0 8h3" />
            </Icon>
          </RailButton>
          <RailButton
            name="Delete the selection"
            keys="Del"
            disabled={!chosen}
            onClick={() => {
              deleteSelection(editor);
            }}
          >
            <Icon>
              <path d="M5 5l10 10M15 5 5 15" />
            </Icon>
          </RailButton>
        </div>
      )}
      <div className="tool-rail-group tool-rail-end">
        <RailButton
          name="Zoom in"
          keys="+"
          onClick={() => {
            editor.zoom(ZOOM_STEP);
          }}
        >
          <Icon>
            <path d="M10 5v10M5 10h10" />
          </Icon>
        </RailButton>
        <RailButton
          name="Zoom out"
          keys="−"
          onClick={() => {
            editor.zoom(1 / ZOOM_STEP);
          }}
        >
          <Icon>
            <path d="M5 10h10" />
          </Icon>
        </RailButton>
        <RailButton
          name="Fit the section"
          keys="0"
          onClick={() => {
            editor.fit();
          }}
        >
          <Icon>
            <path d="M3.5 7V4h3M16.5 7V4h-3M3.5 13v3h3M16.5 13v3h-3M7 7.5h6v5H7z" />
          </Icon>
        </RailButton>
      </div>
    </div>
  );
}

function RailButton(props: {
  name: string;
  keys: string;
  pressed?: boolean;
  disabled?: boolean;
  onClick: () => void;
  children: ReactNode;
}) {
  const { name, keys, pressed, disabled = false, onClick, children } = props;
  return (
    <Tooltip
      title={
        <>
          {name} <kbd className="key">{keys}</kbd>
        </>
      }
      placement="right"
      enterDelay={400}
    >
      <button
        type="button"
        className="rail-button"
        aria-label={name}
        aria-keyshortcuts={keys.replace("Ctrl", "Control").replace("Del", "Delete")}
        aria-pressed={pressed}
        // Kept focusable while it has nothing to do, so that focus is not lost after the last undo.
        aria-disabled={disabled}
        onClick={() => {
          if (!disabled) onClick();
        }}
      >
        {children}
      </button>
    </Tooltip>
  );
}

/** Up and down walk through the buttons, Home and End jump. */
function walk(event: KeyboardEvent<HTMLElement>): void {
  const step = { ArrowDown: 1, ArrowUp: -1 }[event.key];
  const buttons = [...event.currentTarget.querySelectorAll<HTMLButtonElement>("button")];
  const at = buttons.findIndex((button) => button === document.activeElement);
  const to =
    step !== undefined
      ? at + step
      : event.key === "Home"
        ? 0
        : event.key === "End"
          ? buttons.length - 1
          : null;
  if (to === null || at < 0) return;
  event.preventDefault();
  buttons[(to + buttons.length) % buttons.length]?.focus();
}
