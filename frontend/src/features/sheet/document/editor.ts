import type { Scene } from "@heddle/kernels/scene";
import { Toolbox } from "../tools/toolbox";
import { SheetStore, type SheetStoreOptions } from "./store";

/** The document store with its tools: what the sheet, the rail, the shelf and the inspector work on. */
export class SheetEditor extends SheetStore {
  readonly tools: Toolbox;

  constructor(document: Scene, options: SheetStoreOptions = {}) {
    super(document, options);
    this.tools = new Toolbox(this);
  }

  override dispose(): void {
    this.tools.dispose();
    super.dispose();
  }
}

export const createSheetEditor = (document: Scene, options?: SheetStoreOptions): SheetEditor =>
  new SheetEditor(document, options);
