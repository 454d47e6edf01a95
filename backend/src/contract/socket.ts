/**
 * Events of the stream, both ways (socket.io, namespace "/runs", websocket only). Every client event carries a
 * schema that the gateway parses; every one but `credit` is answered by its acknowledgement.
 */
import { z } from "zod";
import { FIELD_QUANTITIES } from "@heddle/kernels/frames";
import type { ErrorDto } from "./errors.js";
import type { RunDto } from "./runs.js";

export const STREAM_NAMESPACE = "/runs";
/** Frames that may be on their way to one viewer without an acknowledgement. */
export const FRAME_CREDITS = 2;

export const JoinRunEvent = z.strictObject({ runId: z.uuid() });
export const ViewEvent = z.strictObject({
  runId: z.uuid(),
  quantity: z.enum(FIELD_QUANTITIES),
  width: z.int().min(16).max(4096),
  height: z.int().min(16).max(4096),
  /** Value of the highest level; null: each frame's own peak. */
  range: z.number().positive().nullable(),
  framesPerSecond: z.number().min(0.5).max(60).default(30),
});
export const CreditEvent = z.strictObject({ runId: z.uuid(), sequence: z.int().min(0) });

export type JoinRunEvent = z.infer<typeof JoinRunEvent>;
export type ViewEvent = z.input<typeof ViewEvent>;
export type CreditEvent = z.infer<typeof CreditEvent>;

/** New samples of one probe; `from` is the index of the first. A gap is repaired by joining again. */
export interface TraceEvent {
  runId: string;
  traces: { probe: string; unit: string; startNs: number; stepNs: number; from: number; values: number[] }[];
}

export interface Refusal {
  ok: false;
  error: ErrorDto;
}
export type Done = { ok: true } | Refusal;
export type Joined = { ok: true; run: RunDto; traces: TraceEvent["traces"] } | Refusal;

export interface ClientToServerEvents {
  /** Enters the run's room; answers its state and every trace sample so far. */
  join: (event: JoinRunEvent, answer: (a: Joined) => void) => void;
  leave: (event: JoinRunEvent, answer: (a: Done) => void) => void;
  /** Asks for frames; replaces this viewer's earlier view of the run. */
  view: (event: ViewEvent, answer: (a: Done) => void) => void;
  /** Acknowledges a frame by its sequence: the viewer has drawn it and can take another. */
  credit: (event: CreditEvent) => void;
}

export interface ServerToClientEvents {
  /** A message of the kernels' frame codec. */
  frame: (runId: string, message: Uint8Array) => void;
  traces: (event: TraceEvent) => void;
  state: (run: RunDto) => void;
}
