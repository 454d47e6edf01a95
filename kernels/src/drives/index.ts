/** What drives the fields. */
export { loadGenerators, saveGenerators, waveformSignals } from "./generators.js";
export type { SignalGenerator } from "./generators.js";
export { lineSourcePoints } from "./line-source.js";
export { bilinear } from "./spreading.js";
export type { LatticeShare, PointAxis } from "./spreading.js";
export { compileWaveform } from "./waveforms.js";
export type { CompiledWaveform } from "./waveforms.js";
export { PlaneWaveSignals } from "./plane-wave.js";
export { planeWavePoints, totalFieldBox } from "./total-field-box.js";
