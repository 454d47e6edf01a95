/** The damped exponentials of which a ring-down consists. */
export type { Pole } from "./band-fit.js";
export type { WideBand } from "./ring-down.js";
export { longestFor, polesOver, ringDownPoles, samePole } from "./ring-down.js";
