import { type KeyboardEvent, memo, type MouseEvent, useDeferredValue, useId, useRef } from "react";
import { deleteSelection } from "../document/commands";
import { type Drawing, drawnItem, type DrawnItem } from "../document/drawing";
import type { SheetEditor } from "../document/editor";
import { allRefs, findItem, type Item, type ItemRef } from "../document/refs";
import { itemInWords } from "../surface/in-words";
import { useSheet } from "../surface/use-sheet";

/** As many rows as are laid out at a time; the rest is a count. */
const MOST_ROWS = 300;

interface RowProps {
  itemRef: ItemRef;
  /** The item as written and as drawn: a row is written anew when one of them changes, and not before. */
  item: Item | undefined;
  drawn: DrawnItem | null;
  media: Drawing["mediaById"];
  words: () => string;
  selected: boolean;
  current: boolean;
  broken: string | undefined;
}

const Row = memo(
  ({ itemRef, words, selected, current, broken }: RowProps) => (
    <li
      role="option"
      aria-selected={selected}
      tabIndex={current ? 0 : -1}
      data-ref={itemRef}
      className={broken === undefined ? undefined : "broken"}
      title={broken}
    >
      {words()}
    </li>
  ),
  (before, after) =>
    before.itemRef === after.itemRef &&
    before.item === after.item &&
    before.drawn === after.drawn &&
    before.media === after.media &&
    before.selected === after.selected &&
    before.current === after.current &&
    before.broken === after.broken,
);

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

  const rowOf = (target: EventTarget): { ref: ItemRef; at: number } | null => {
    const row = target instanceof Element ? target.closest<HTMLElement>("[data-ref]") : null;
    const at = shown.findIndex((ref) => ref === row?.dataset["ref"]);
    return at < 0 ? null : { ref: shown[at], at };
  };
  const focusRow = (at: number): void => {
    const rows = list.current?.querySelectorAll<HTMLElement>("[role=option]");
    rows?.item(Math.min(Math.max(at, 0), rows.length - 1)).focus();
  };
  const pick = (ref: ItemRef, add: boolean): void => {
    if (!add) editor.select([ref]);
    else if (selection.has(ref)) editor.select([...selection].filter((other) => other !== ref));
    else editor.select([...selection, ref]);
  };
  const onClick = (event: MouseEvent): void => {
    const row = rowOf(event.target);
    if (row !== null) pick(row.ref, event.ctrlKey || event.metaKey || event.shiftKey);
  };
  const onKeyDown = (event: KeyboardEvent): void => {
    const row = rowOf(event.target);
    if (row === null) return;
    const { ref, at } = row;
    if (event.key === "ArrowDown" || event.key === "ArrowUp") {
      const to = at + (event.key === "ArrowDown" ? 1 : -1);
      if (to >= 0 && to < shown.length && !event.ctrlKey && !event.shiftKey) editor.select([shown[to]]);
      focusRow(to);
    } else if (event.key === "Home") focusRow(0);
    else if (event.key === "End") focusRow(shown.length - 1);
    else if (event.key === " " || event.key === "Enter") pick(ref, event.ctrlKey || event.shiftKey);
    else if (event.key === "Delete") {
      deleteSelection(editor);
      // The row goes with its item; the one that takes its place gets the keyboard.
      requestAnimationFrame(() => {
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
        <ul
          ref={list}
          role="listbox"
          aria-multiselectable="true"
          aria-labelledby={titleId}
          onClick={onClick}
          onKeyDown={onKeyDown}
        >
          {shown.map((ref) => (
            <Row
              key={ref}
              itemRef={ref}
              item={findItem(drawing.scene, ref)}
              drawn={drawnItem(drawing, ref)}
              media={drawing.mediaById}
              words={() => itemInWords(ref, drawing)}
              selected={selection.has(ref)}
              current={ref === current}
              broken={broken.get(ref)}
            />
          ))}
        </ul>
      )}
      {refs.length > shown.length ? (
        <p className="panel-note">and {String(refs.length - shown.length)} painted before these</p>
      ) : null}
    </div>
  );
}
