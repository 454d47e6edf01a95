/** The engines behind one interface. */
export * from "./engine.js";
export { packArrays, unpackArrays } from "./packing.js";
export { ReferenceEngine } from "./reference.js";
