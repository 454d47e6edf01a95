export type { SheetEditor } from "./document/editor";
export { makeRef } from "./document/refs";
export { Inspector } from "./panels/inspector";
export { MediaShelf } from "./panels/media-shelf";
export { MediumSwatch } from "./panels/medium-swatch";
export { SectionThumb } from "./panels/section-thumb";
export { ToolRail } from "./panels/tool-rail";
export { SheetSurface } from "./surface/sheet-surface";
export { useSheet, useSheetEditor } from "./surface/use-sheet";
