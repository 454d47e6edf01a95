/** The lattice: where the fields live, how long a step is, and how its waves travel. */
export * from "./constants.js";
export * from "./dispersion.js";
export * from "./lattice.js";
export * from "./units.js";
export * from "./views.js";
