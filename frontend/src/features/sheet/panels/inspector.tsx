import type { SheetEditor } from "../document/editor";
import { findItem, onlyRef, splitRef } from "../document/refs";
import { useSheet } from "../surface/use-sheet";
import { ManyInspector } from "./inspect-many";
import { PatchInspector } from "./inspect-patch";
import { PortInspector } from "./inspect-port";
import { ProbeInspector } from "./inspect-probe";
import { SectionInspector } from "./inspect-section";
import { SourceInspector } from "./inspect-source";
import { PatchList } from "./patch-list";
import type { Patch, Port, Probe, Source } from "@heddle/kernels/scene";
import "./panels.css";

/** Numbers of what is selected, or of the section; below them the list of all that is drawn. */
export function Inspector({ editor }: { editor: SheetEditor }) {
  return (
    <section className="inspector" aria-label="Inspector">
      <Selected editor={editor} />
      <PatchList editor={editor} />
    </section>
  );
}

function Selected({ editor }: { editor: SheetEditor }) {
  const selection = useSheet(editor, (state) => state.selection);
  const scene = useSheet(editor, (state) => state.document);
  const only = onlyRef(selection);
  if (selection.size > 1) return <ManyInspector editor={editor} />;
  if (only === undefined) return <SectionInspector editor={editor} />;
  const item = findItem(scene, only);
  if (item === undefined) return null;
  // A key of its own for each item: an entry under way belongs to the item it was begun for.
  switch (splitRef(only).list) {
    case "paint":
      return <PatchInspector key={only} editor={editor} patch={item as Patch} itemRef={only} />;
    case "sources":
      return <SourceInspector key={only} editor={editor} source={item as Source} itemRef={only} />;
    case "probes":
      return <ProbeInspector key={only} editor={editor} probe={item as Probe} itemRef={only} />;
    case "ports":
      return <PortInspector key={only} editor={editor} port={item as Port} itemRef={only} />;
  }
}
