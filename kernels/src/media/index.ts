/** Media: what they are, how they mix in a partial cell, and the update coefficients they make. */
export { SectionCoefficients } from "./coefficients.js";
export type { SectionBefore, SectionMedia } from "./coefficients.js";
export type { FieldCorner } from "./corner-links.js";
export type { LatticeBox } from "./conductors.js";
export { wholeLattice } from "./conductors.js";
export type { Pair, Properties, RelativeProperties, SolverMedium } from "./properties.js";
export { propertiesOf, VACUUM } from "./properties.js";
export { FIXED, halfStorage, lossOf, updateOf } from "./update.js";
export type { Update } from "./update.js";
export type { MediumFigures } from "./figures.js";
export { mediumFigures } from "./figures.js";
export type { Film } from "./films.js";
