/**
 * The one door through which a caller (command line, server worker, test) runs a scene. It hides which engine
 * steps the fields, how rows are blocked and where observers are read, so that a faster engine fits in without
 * a caller noticing.
 */
import type { Problem, Scene } from "../scene/index.js";
import type { SolveResult } from "../scene/result.js";
import type {
  EnvelopeRequest,
  FieldQuantity,
  FieldSample,
  MapRequest,
  ViewRequest,
} from "../frames/index.js";
import type { EngineOptions } from "./engines.js";

export type { EngineName, Precision } from "./engines.js";

/** Further runs, which the session takes after its own, and whose figures its result carries. */
export interface ComparisonOptions {
  /** On cells half as large: `extrapolation`. */
  twoMesh?: boolean;
  /** Without the patches marked `shield`: `shielding`. */
  shielding?: boolean;
}

export interface SessionOptions extends EngineOptions, ComparisonOptions {
  /** Spectrum frequencies in GHz, in the order wanted; default 401 evenly over the scene's band. */
  frequenciesGHz?: readonly number[];
  /** Frequencies in GHz of which the run keeps the whole map: see `sampleMap`. Default: none. */
  mapsGHz?: readonly number[];
  /** Keeps the peak envelope: see `sampleEnvelope`. Default: no. */
  envelope?: boolean;
}

/** What the run costs and on what mesh it is computed; known before the first step. */
export interface GridSummary {
  /** Cells of the section, without absorbing layers. */
  nx: number;
  ny: number;
  dxMm: number;
  dyMm: number;
  stepPs: number;
  /** Δt over the stability limit of the plain grid. */
  courant: number;
  /** Steps at which the run ends at the latest. */
  maxSteps: number;
}

export type StopReason = "decay" | "time" | "cancelled";

/** Why a run cannot go on; `sentence` names the medium or source where one is to blame. */
export interface RunFailure {
  code: "non-finite" | "out-of-memory";
  sentence: string;
}

export type AdvanceOutcome =
  | { kind: "running" }
  | { kind: "ended"; reason: StopReason }
  | { kind: "failed"; failure: RunFailure };

/** New samples of one probe since the caller last asked. Times are the component's own sample times. */
export interface TraceIncrement {
  probe: string;
  unit: string;
  /** Time of the probe's sample 0, and the spacing, in ns. */
  startNs: number;
  stepNs: number;
  /** Steps from sample to sample; left out: 1. */
  every?: number;
  /** Index of `values[0]` in the whole trace. */
  from: number;
  values: Float64Array;
}

/** A person's edit during the run; kept in order, with the step at which it took effect. */
export interface EditLogEntry {
  step: number;
  sceneSha256: string;
}

export type EditOutcome = { kind: "applied"; step: number } | { kind: "refused"; problems: Problem[] };

/** Everything needed to go on bit for bit: opaque to callers, structured-cloneable. */
export interface SessionSnapshot {
  version: 1;
  step: number;
  bytes: Uint8Array;
}

export interface SolveSession {
  readonly grid: GridSummary;
  readonly step: number;
  readonly timeNs: number;
  /** Stored field energy relative to its maximum so far, in dB; 0 before anything has decayed. */
  readonly decayDb: number;
  readonly edits: readonly EditLogEntry[];
  /** Quantities that this scene's polarization offers. */
  readonly quantities: readonly FieldQuantity[];

  /** Up to `steps` steps; returns early when the run ends. Never leaves a non-finite field unreported. */
  advance(steps: number): AdvanceOutcome;
  /** Ends the run here; the result then says "cancelled". */
  cancel(): void;
  /** Samples recorded at step `from` and later, per probe in the scene's order. */
  tracesSince(from: number): TraceIncrement[];
  /** One field quantity resampled to the size asked for (never finer than the lattice). */
  sampleField(request: ViewRequest): FieldSample;
  /**
   * A phasor of the run so far (of several runs: of the one that is on) at one of `mapsGHz`, per unit of the waveform that drives.
   * Throws a RangeError where there is no such map, or sources drive with different waveforms.
   */
  sampleMap?(request: MapRequest): FieldSample;
  /** The largest |E| or |H| so far. Throws a RangeError where the run keeps none. */
  sampleEnvelope?(request: EnvelopeRequest): FieldSample;
  /** Paint, media and sources of `scene` from the next step on; grid and time step stay. */
  edit(scene: Scene): EditOutcome;
  snapshot(): SessionSnapshot;
  /** Throws a RangeError where the snapshot belongs to another scene, grid or precision. */
  restore(snapshot: SessionSnapshot): void;
  /** The result document; an edited run has traces but no spectra and no limits. */
  result(): SolveResult;
  dispose(): void;
}
