/** Edges of the section: absorbing layers. Electric and magnetic walls are update coefficients, made in `media`. */
export * from "./cpml.js";
export { evanescentReflection, evanescentReflectionDb, layerReflectionDb } from "./layer-reflection.js";
export type { ReflectionQuery } from "./layer-reflection.js";
