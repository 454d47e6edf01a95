/** The result document of a session. */
import { judgeLevels } from "../analysis/index.js";
import type {
  ComplexSpectrum,
  LimitResult,
  PowerSpectrum,
  ProbeResult,
  ResolvedScene,
  Scene,
  SolveResult,
} from "../scene/index.js";
import type { Engine } from "../stepping/index.js";
import type { DrivePlan } from "./plan.js";
import type { PlannedProbe } from "./probe-plan.js";
import { qualityOf } from "./quality.js";
import type { EditLogEntry, GridSummary, StopReason } from "./session.js";
import { judgeQ, resonancesInDocument } from "./resonances.js";
import type { SpectrumInput } from "./spectra.js";
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

/** 20·lg of fields and voltages, 10·lg of the magnitude of powers; null where undefined. */
const levelsOf = (spectrum: ComplexSpectrum | PowerSpectrum): (number | null)[] =>
  "re" in spectrum
    ? spectrum.re.map((re, index) => {
        const im = spectrum.im[index];
        return re === null || im === null ? null : 20 * Math.log10(Math.hypot(re, im));
      })
    : spectrum.value.map((value) => (value === null ? null : 10 * Math.log10(Math.abs(value))));

/**
 * Limits on the levels of probes: 20·lg of V/m, A/m or V, 10·lg of W/m per unit source. None is judged on a trace that had not rung down, nor on a
 * run that was edited. Limits on Q are judged beside them; other kinds of limit are not computed yet, and the warnings of the scene say so.
 */
function judgeLimits(
  input: ResultInput,
  results: readonly ProbeResult[],
  unfinished: ReadonlySet<string>,
): LimitResult[] {
  return input.resolved.limits.flatMap((limit): LimitResult[] => {
    if (!("points" in limit) || !("probe" in limit.of)) return [];
    const id = limit.of.probe;
    const spectrum = results.find((probe) => probe.id === id)?.spectrum ?? null;
    if (!spectrum || unfinished.has(id)) {
      return [{ id: limit.id, holds: null, margin: null, atGHz: null, uncertainty: null }];
    }
    const levels = levelsOf(spectrum);
    return [{ id: limit.id, ...judgeLevels(limit, spectrum.GHz, levels), uncertainty: null }];
  });
}

export function buildResult(input: ResultInput): SolveResult {
  const { engine, grid, probes } = input;
  const { dt } = engine.lattice;
  const edited = input.edits.length > 0;
  const driven: SpectrumInput = {
    probes,
    drives: input.drives,
    traces: input.traces,
    dt,
    steps: engine.step,
    frequenciesGHz: input.frequenciesGHz,
    band: input.resolved.band,
  };
  const spectra = edited ? null : spectraOf(driven);
  const resonances = edited ? undefined : resonancesInDocument(driven, input.resolved);
  const results = probes.map(
    (probe, index): ProbeResult => ({
      id: probe.id,
      drive: null,
      kind: probe.kind,
      quantity: probe.quantity,
      unit: probe.unit,
      trace: {
        startNs: (input.drives.firstStep + probe.firstSampleStep) * dt * 1e9,
        stepNs: dt * 1e9,
        values: Array.from(input.traces(index)),
      },
      spectrum: spectra?.spectra[index] ?? null,
    }),
  );
  const limits = spectra
    ? [...judgeLimits(input, results, spectra.unfinished), ...judgeQ(input.resolved, resonances)]
    : [];
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
    ...(resonances ? { resonances } : {}),
    ...(limits.length > 0 ? { limits } : {}),
    quality: qualityOf({ ...input, warnings }),
    ...(edited ? { edits: [...input.edits] } : {}),
    timing: {
      seconds: input.seconds,
      cellStepsPerSecond: input.cellStepsPerSecond,
      threads: engine.threads,
    },
  };
}
