/** What drives the fields. */
export { lineSourcePoints } from "./line-source.js";
export { bilinear } from "./spreading.js";
export type { LatticeShare, PointAxis } from "./spreading.js";
export { compileWaveform } from "./waveforms.js";
export type { CompiledWaveform } from "./waveforms.js";
