/** What is left of one leg of a run when its engine has gone: everything that the result needs. */
import type { Lattice } from "../lattice/index.js";
import type { ResolvedScene, Scene } from "../scene/index.js";
import type { EngineName, Precision } from "./engines.js";
import type { FrameLooks } from "./frame-looks.js";
import type { DrivePlan } from "./plan.js";
import type { PortPlan } from "./port-plan.js";
import type { PlannedProbe } from "./probe-plan.js";
import type { EditLogEntry, GridSummary, StopReason } from "./session.js";

export interface LegRecord {
  scene: Scene;
  sceneSha256: string;
  resolved: ResolvedScene;
  engine: { name: EngineName; precision: Precision; threads: number };
  lattice: Lattice;
  grid: GridSummary;
  steps: number;
  probes: readonly PlannedProbe[];
  drives: DrivePlan;
  /** Null where sources drive. */
  ports: PortPlan | null;
  /** Null where nothing looks at whole frames. */
  frames: FrameLooks | null;
  /** Samples by column: the probes in their order, then those of the ports. */
  traces: (column: number) => Float64Array;
  frequenciesGHz: readonly number[];
  reason: StopReason;
  /** J/m, at the stop and at its largest. */
  energy: number;
  energyMax: number;
  edits: readonly EditLogEntry[];
  warnings: readonly string[];
  seconds: number;
  cellSteps: number;
}
