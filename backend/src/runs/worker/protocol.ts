/**
 * What passes between the server and the thread of one run. Every message is structured-cloneable; frames and
 * trace arrays are transferred. The server never touches field data: it asks for views and hands on bytes.
 */
import type { FieldQuantity, ViewRequest } from "@heddle/kernels/frames";
import type { GridSummary, StopReason } from "@heddle/kernels/solving";

/** Given to the thread at its start. */
export interface SolverTask {
  runId: string;
  /** The scene document of the revision; the thread reads it by the kernels' own door. */
  document: unknown;
  startPaused: boolean;
  pacePsPerSecond: number | null;
  /** Further runs for comparison, after the scene's own. */
  twoMesh: boolean;
  shielding: boolean;
}

/** A view as the thread keeps it: what to sample and how to scale it. */
export interface ThreadView {
  viewId: number;
  request: ViewRequest;
  /** Value of the highest level; null: each frame's own peak. */
  range: number | null;
}

export type ToThread =
  | { kind: "pause" }
  | { kind: "resume" }
  | { kind: "step"; steps: number }
  | { kind: "stop" }
  | { kind: "pace"; picosecondsPerSecond: number | null }
  /** Answered by `edit-answer` with the same `requestId`. */
  | { kind: "edit"; requestId: number; document: unknown }
  /** Answered by `trace-answer`, after the samples so far have gone out as an increment. */
  | { kind: "traces"; requestId: number }
  | { kind: "view"; view: ThreadView }
  | { kind: "forget-view"; viewId: number }
  /** One frame of the view as soon as the field is newer than `newerThan`; a later wish replaces an earlier one. */
  | { kind: "want"; viewId: number; newerThan: number };

export interface Problem {
  path: string;
  sentence: string;
}

/** Samples of one probe, rounded to seven significant digits for the wire; the result keeps them whole. */
export interface TraceChunk {
  probe: string;
  unit: string;
  startNs: number;
  stepNs: number;
  from: number;
  values: number[];
}

export interface Progress {
  step: number;
  timeNs: number;
  decayDb: number | null;
  /** Cells times steps over wall time of the last second or so; null while nothing is stepped. */
  cellStepsPerSecond: number | null;
}

export interface ThreadFrame {
  viewId: number;
  /** Rises with every frame of the run, whichever view it is for. */
  sequence: number;
  /** Rises whenever the field changes, so that a paused run is not sent twice. */
  version: number;
  bytes: Uint8Array<ArrayBuffer>;
}

/** A result whose longest arrays were taken out: `text` refers to them by their hash. */
export interface PackedResult {
  /** The document as JSON text; an array that was taken out stands as {"array": sha256, "length": n}. */
  text: string;
  arrays: { sha256: string; bytes: Uint8Array<ArrayBuffer> }[];
}

export type FromThread =
  | { kind: "started"; grid: GridSummary; quantities: readonly FieldQuantity[] }
  | { kind: "refused"; problems: Problem[] }
  | { kind: "activity"; activity: "running" | "paused"; progress: Progress }
  | { kind: "progress"; progress: Progress }
  | { kind: "frame"; frame: ThreadFrame }
  | { kind: "traces"; traces: TraceChunk[] }
  | { kind: "trace-answer"; requestId: number; traces: TraceChunk[] }
  | { kind: "edit-answer"; requestId: number; step: number; sceneSha256: string }
  | { kind: "edit-refused"; requestId: number; problems: Problem[] }
  | { kind: "ended"; reason: StopReason; progress: Progress; result: PackedResult }
  | { kind: "failed"; sentence: string; progress: Progress | null };
