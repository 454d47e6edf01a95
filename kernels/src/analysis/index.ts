/** What is made of traces. */
export { fallenDb } from "./decay.js";
export { finalPeriods, fourierSum, quotient, tonePhasor } from "./spectrum.js";
export type { ComplexValues, SampledSignal } from "./spectrum.js";
