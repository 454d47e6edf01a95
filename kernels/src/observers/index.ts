/** What reads the fields. */
export { storedEnergy } from "./energy.js";
export { engineFieldOf, firstSampleStep, pointProbeTaps, unitOf } from "./point-probe.js";
export type { Component } from "./point-probe.js";
