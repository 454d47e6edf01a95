/** What is made of traces. */
export { completeRingDown, excitedBand } from "./completion.js";
export type { Completion } from "./completion.js";
export { extrapolate, unsteady, widest } from "./extrapolation.js";
export type { Extrapolated } from "./extrapolation.js";
export { fallenDb } from "./decay.js";
export { judgeLevels, limitAt } from "./limits.js";
export type { Judgement, LevelLimit } from "./limits.js";
export type { WideBand } from "./poles/index.js";
export { resonancesOf, ringDownLasts } from "./resonances.js";
export type { FoundResonance, ProbeTrace } from "./resonances.js";
export { finalPeriods, fourierSum, quotient, tonePhasor } from "./spectrum.js";
export type { ComplexValues, SampledSignal } from "./spectrum.js";
