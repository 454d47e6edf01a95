/** Waveguide ports: a mode on the lattice's own line, driven one way and received as power waves. */
export { drivingGain, GuideLine, LATER_STEPS, portDrivePoints } from "./guide-line.js";
export { portMode } from "./port-mode.js";
export type { PortMode, PortSpec } from "./port-mode.js";
export { complexTable, largestGain, scatteringColumns } from "./s-matrix.js";
export type { ComplexTable } from "./s-matrix.js";
export { guidePhase, latticeCutoff, PORT_FIRST_SAMPLES, PORT_RECORDS, portTaps, portWaves } from "./waves.js";
export type { PortWaves } from "./waves.js";
