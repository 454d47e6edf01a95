/** The engines behind one interface. */
export * from "./engine.js";
export { packArrays, unpackArrays } from "./packing.js";
export { ReferenceEngine } from "./reference.js";
export { loadKernel } from "./wasm/kernel.js";
export type { KernelOutcome } from "./wasm/kernel.js";
export { WasmEngine } from "./wasm/wasm-engine.js";
export type { SpawnHelper, WasmOptions } from "./wasm/wasm-engine.js";
