/** The result document of a session. */
import type { ProbeResult, ResolvedScene, Scene, SolveResult } from "../scene/index.js";
import type { Engine } from "../stepping/index.js";
import type { DrivePlan, PlannedProbe } from "./plan.js";
import { qualityOf } from "./quality.js";
import type { EditLogEntry, GridSummary, StopReason } from "./session.js";
import { spectraOf } from "./spectra.js";
import { SOLVER_VERSION } from "./version.js";

export interface ResultInput {
  scene: Scene;
  sceneSha256: string;
  resolved: ResolvedScene;
  engine: Engine;
  grid: GridSummary;
  probes: readonly PlannedProbe[];
  drives: DrivePlan;
  traces: (probe: number) => Float64Array;
  frequenciesGHz: readonly number[];
  reason: StopReason;
  energy: number;
  energyMax: number;
  edits: readonly EditLogEntry[];
  warnings: readonly string[];
  seconds: number;
  cellStepsPerSecond: number;
}

export function buildResult(input: ResultInput): SolveResult {
  const { engine, grid, probes } = input;
  const { dt } = engine.lattice;
  const edited = input.edits.length > 0;
  const spectra = edited
    ? null
    : spectraOf({
        probes,
        drives: input.drives,
        traces: input.traces,
        dt,
        steps: engine.step,
        frequenciesGHz: input.frequenciesGHz,
      });
  const results = probes.map(
    (probe, index): ProbeResult => ({
      id: probe.id,
      drive: null,
      kind: "point",
      quantity: probe.component,
      unit: probe.unit,
      trace: {
        startNs: probe.firstSampleStep * dt * 1e9,
        stepNs: dt * 1e9,
        values: Array.from(input.traces(index)),
      },
      spectrum: spectra?.spectra[index] ?? null,
    }),
  );
  const warnings = [...input.warnings, ...(spectra?.warnings ?? [])];
  if (edited) {
    warnings.push(
      "The scene was edited while it ran: there are traces and fields but no spectra and no limits. Run the edited scene cleanly.",
    );
  }
  const decayDb =
    input.energyMax > 0 && input.energy > 0 ? -10 * Math.log10(input.energy / input.energyMax) : null;
  return {
    format: "heddle-result",
    version: 1,
    scene: { name: input.scene.name, sha256: input.sceneSha256 },
    solver: { version: SOLVER_VERSION, engine: engine.name, precision: engine.precision },
    grid: {
      nx: grid.nx,
      ny: grid.ny,
      dxMm: grid.dxMm,
      dyMm: grid.dyMm,
      stepPs: grid.stepPs,
      steps: engine.step,
      courant: grid.courant,
    },
    stopped: { reason: input.reason, decayDb },
    probes: results,
    quality: qualityOf({ ...input, warnings }),
    ...(edited ? { edits: [...input.edits] } : {}),
    timing: {
      seconds: input.seconds,
      cellStepsPerSecond: input.cellStepsPerSecond,
      threads: engine.threads,
    },
  };
}
