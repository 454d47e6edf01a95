/** Shapes and what they cover: areas of cells, lengths along lines. Pure; also drives the editor's preview. */
export { CoverageSweep } from "./coverage.js";
export { areaOf, commonLength, continued, OpenCellSweep, SLIVER, spansOf } from "./open-cells.js";
export type { CutCell, OpenCell } from "./open-cells.js";
export type { MediumShare, PaintedRow } from "./coverage.js";
export { LineCutter } from "./cuts.js";
export type { Interval } from "./cuts.js";
export { CHORD_TOLERANCE } from "./edge-table.js";
export type { PaintedArea, Raster } from "./edge-table.js";
export { materialFraction } from "./fractions.js";
export { outlineOf } from "./outline.js";
export type { AreaShape, Point } from "./outline.js";
