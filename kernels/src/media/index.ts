/** Media: what their figures mean to a wave. */
export * from "./figures.js";
