/** What is made of traces. */
export { fallenDb } from "./decay.js";
export { judgeLevels, limitAt } from "./limits.js";
export type { Judgement, LevelLimit } from "./limits.js";
export { finalPeriods, fourierSum, quotient, tonePhasor } from "./spectrum.js";
export type { ComplexValues, SampledSignal } from "./spectrum.js";
