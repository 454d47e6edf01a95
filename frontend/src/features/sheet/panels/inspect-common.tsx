import type { ReactNode } from "react";
import { deleteSelection, duplicateSelection } from "../document/commands";
import { changeItems } from "../document/edits";
import type { SheetEditor } from "../document/editor";
import type { Item, ItemRef } from "../document/refs";

/** Puts the changed item in the place of the old one, as one step. */
export function putItem(editor: SheetEditor, ref: ItemRef, label: string, item: Item): void {
  editor.edit(label, (scene) => changeItems(scene, [ref], () => item));
}

/** The object without an optional key: an absent key says "the default", which undefined does not in JSON. */
export function without<T extends object>(object: T, key: OptionalKey<T>): T {
  // Only an optional key was taken out, so what remains is still a T.
  return Object.fromEntries(Object.entries(object).filter(([name]) => name !== key)) as T;
}
type OptionalKey<T> = T extends unknown
  ? { [K in keyof T]-?: undefined extends T[K] ? K : never }[keyof T]
  : never;

export function InspectorHead(props: { title: string; aside?: string; children?: ReactNode }) {
  return (
    <header className="shelf-head">
      <h2 className="label">{props.title}</h2>
      {props.aside === undefined ? null : <span className="label plain">{props.aside}</span>}
      {props.children}
    </header>
  );
}

export function SelectionActions({ editor }: { editor: SheetEditor }) {
  return (
    <div className="shelf-actions">
      <button
        type="button"
        className="quiet-button"
        onClick={() => {
          duplicateSelection(editor);
        }}
      >
        Duplicate
      </button>
      <button
        type="button"
        className="quiet-button"
        onClick={() => {
          deleteSelection(editor);
        }}
      >
        Delete
      </button>
    </div>
  );
}
