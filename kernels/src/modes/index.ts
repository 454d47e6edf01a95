/** Modes of a closed section by a direct eigen-solution, independent of time stepping. */
export { modesDocumentSchema } from "./document.js";
export type { ModesDocument } from "./document.js";
export { DEFAULT_MODES, findModes, MOST_MODES, solveModes } from "./solve-modes.js";
export type { ModesProgress } from "./solve-modes.js";
