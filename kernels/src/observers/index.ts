/** What reads the fields. */
export { AreaProbe, sumsOf } from "./area-probe.js";
export type { LossyMedia } from "./dissipation.js";
export { storedEnergy } from "./energy.js";
export { FrameTransform } from "./frame-transform.js";
export { LinePower } from "./line-power.js";
export { balanceSums, PowerBalance } from "./power-balance.js";
export { powerTaps, voltageTaps } from "./line-probe.js";
export { RunningTransform } from "./running-transform.js";
export type { TransformChannel, TransformValues } from "./running-transform.js";
export { engineFieldOf, firstSampleStep, pointProbeTaps, unitOf } from "./point-probe.js";
export type { Component } from "./point-probe.js";
