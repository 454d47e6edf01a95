import { type KeyboardEvent, useDeferredValue, useId, useRef } from "react";
import { deleteSelection } from "../document/commands";
import type { SheetEditor } from "../document/editor";
import { allRefs, type ItemRef } from "../document/refs";
import { useSheet } from "../surface/use-sheet";
import { itemInWords } from "../surface/in-words";

/** As many rows as are laid out at a time around the selection; the rest is a count. */
const MOST_ROWS = 300;

/** All that is drawn, last painted first: the way to the drawing for those who do not see it or have no pointer. */
export function PatchList({ editor }: { editor: SheetEditor }) {
  // A gesture under way need not wait for its rows to be written anew.
  const drawing = useDeferredValue(useSheet(editor, (state) => state.drawing));
  const selection = useSheet(editor, (state) => state.selection);
  const list = useRef<HTMLUListElement>(null);
  const titleId = useId();
  const refs = allRefs(drawing.scene).toReversed();
  const shown = refs.slice(0, MOST_ROWS);
  const first = selection.values().next().value;
  const current = first !== undefined && shown.includes(first) ? first : shown.at(0);
  const broken = new Map(drawing.undrawable.map(({ ref, sentence }) => [ref, sentence]));

  const focusRow = (at: number): void => {
    const rows = list.current?.querySelectorAll<HTMLElement>("[role=option]");
    rows?.item(Math.min(Math.max(at, 0), rows.length - 1)).focus();
  };
  const pick = (ref: ItemRef, add: boolean): void => {
    if (!add) editor.select([ref]);
    else if (selection.has(ref)) editor.select([...selection].filter((other) => other !== ref));
    else editor.select([...selection, ref]);
  };
  const onKeyDown = (event: KeyboardEvent, ref: ItemRef, at: number): void => {
    const step = { ArrowDown: 1, ArrowUp: -1 }[event.key];
    if (step !== undefined) {
      const next = at + step < 0 ? undefined : shown.at(at + step);
      if (next !== undefined && !event.ctrlKey && !event.shiftKey) editor.select([next]);
      focusRow(at + step);
    } else if (event.key === "Home") focusRow(0);
    else if (event.key === "End") focusRow(shown.length - 1);
    else if (event.key === " " || event.key === "Enter") pick(ref, event.ctrlKey || event.shiftKey);
    else if (event.key === "Delete") {
      deleteSelection(editor);
      queueMicrotask(() => {
        focusRow(at);
      });
    } else return;
    event.preventDefault();
  };

  return (
    <div className="patch-list">
      <header className="shelf-head">
        <h2 className="label" id={titleId}>
          Drawn, last on top
        </h2>
        <span className="label plain">{String(refs.length)}</span>
      </header>
      {refs.length === 0 ? (
        <p className="panel-note">
          Nothing yet. Choose a tool and draw, or press R and Enter for a rectangle.
        </p>
      ) : (
        <ul ref={list} role="listbox" aria-multiselectable="true" aria-labelledby={titleId}>
          {shown.map((ref, at) => (
            <li
              key={ref}
              role="option"
              aria-selected={selection.has(ref)}
              tabIndex={ref === current ? 0 : -1}
              className={broken.has(ref) ? "broken" : undefined}
              title={broken.get(ref)}
              onClick={(event) => {
                pick(ref, event.ctrlKey || event.metaKey || event.shiftKey);
              }}
              onKeyDown={(event) => {
                onKeyDown(event, ref, at);
              }}
            >
              {itemInWords(ref, drawing)}
            </li>
          ))}
        </ul>
      )}
      {refs.length > shown.length ? (
        <p className="panel-note">and {String(refs.length - shown.length)} painted before these</p>
      ) : null}
    </div>
  );
}
