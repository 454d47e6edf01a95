export type { LibraryMedium } from "./api";
export { useMedia } from "./api";
export { DeleteMediumDialog } from "./delete-medium-dialog";
export { FigureField } from "./figure-field";
export { MediaTable } from "./media-table";
export { MediumDialog } from "./medium-dialog";
export { StackPanel } from "./stack/stack-panel";
