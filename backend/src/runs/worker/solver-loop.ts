/**
 * One run's loop: advance a short chunk of steps, hear messages, send what is wanted. It knows a session and a
 * way to post, not how threads are made, so that it can be driven turn by turn.
 */
import type { FieldSample } from "@heddle/kernels/frames";
import type { Scene } from "@heddle/kernels/scene";
import type { AdvanceOutcome, SolveSession, StopReason } from "@heddle/kernels/solving";
import { forbiddenChanges } from "./live-edit.js";
import { ChunkSize, Pace } from "./pace.js";
import { packResult } from "./pack-result.js";
import type { FromThread, Problem, Progress, ThreadView, ToThread } from "./protocol.js";
import { endOf, toChunks } from "./trace-chunks.js";

export interface LoopDoors {
  session: SolveSession;
  scene: Scene;
  post: (message: FromThread, transfer?: ArrayBuffer[]) => void;
  read: (document: unknown) => { scene: Scene; sha256: string } | { problems: Problem[] };
  encode: (sample: FieldSample, range: number | null, sequence: number) => Uint8Array<ArrayBuffer>;
  /** Milliseconds of a steady clock. */
  now: () => number;
}

const PROGRESS_EVERY_MS = 250;
const TRACES_EVERY_MS = 100;
const SPEED_OVER_MS = 1000;

export class SolverLoop {
  private readonly chunk = new ChunkSize();
  private readonly pace: Pace;
  private readonly views = new Map<number, ThreadView>();
  /** Frames asked for and not yet sent, oldest wish first. */
  private readonly wanted = new Map<number, number>();
  private paused: boolean;
  private stepsAsked = 0;
  private over = false;
  private version = 0;
  private sequence = 0;
  private tracesSent = 0;
  private progressAt = Number.NEGATIVE_INFINITY;
  private tracesAt = Number.NEGATIVE_INFINITY;
  private speed: { sinceMs: number; sinceStep: number; cellStepsPerSecond: number | null };

  constructor(
    private readonly doors: LoopDoors,
    options: { startPaused: boolean; pacePsPerSecond: number | null },
  ) {
    const { session } = doors;
    this.paused = options.startPaused;
    this.pace = new Pace(session.grid.stepPs);
    this.pace.set(options.pacePsPerSecond, doors.now());
    this.speed = { sinceMs: doors.now(), sinceStep: session.step, cellStepsPerSecond: null };
    doors.post({ kind: "started", grid: session.grid, quantities: session.quantities });
    this.postActivity();
  }

  /** Does one short piece of work; the ms to wait before the next, or null to sleep until a message comes. */
  turn(): number | null {
    const waitMs = this.over ? null : this.step();
    const sent = this.sendOneFrame();
    return sent && this.somethingDue() ? 0 : waitMs;
  }

  receive(message: ToThread): void {
    switch (message.kind) {
      case "pause":
        this.stepsAsked = 0;
        this.setPaused(true);
        break;
      case "resume":
        this.setPaused(false);
        break;
      case "step":
        if (!this.over) this.stepsAsked += message.steps;
        break;
      case "stop":
        if (this.over) break;
        this.doors.session.cancel();
        this.end("cancelled");
        break;
      case "pace":
        this.pace.set(message.picosecondsPerSecond, this.doors.now());
        if (!this.over) this.postActivity();
        break;
      case "edit":
        this.edit(message.requestId, message.document);
        break;
      case "traces": {
        this.sendTraces();
        const traces = toChunks(this.doors.session.tracesSince(0));
        this.doors.post({ kind: "trace-answer", requestId: message.requestId, traces });
        break;
      }
      case "view":
        this.views.set(message.view.viewId, message.view);
        break;
      case "forget-view":
        this.views.delete(message.viewId);
        this.wanted.delete(message.viewId);
        break;
      case "want":
        if (this.views.has(message.viewId)) this.wanted.set(message.viewId, message.newerThan);
        break;
    }
  }

  private step(): number | null {
    if (this.paused && this.stepsAsked === 0) return null;
    const { session, now } = this.doors;
    const most = this.paused ? Math.min(this.stepsAsked, this.chunk.steps()) : this.chunk.steps();
    const due = this.paused ? { steps: most, waitMs: 0 } : this.pace.due(most, now());
    if (due.steps === 0) {
      this.tell();
      return due.waitMs;
    }
    const startMs = now();
    const before = session.step;
    const outcome = session.advance(due.steps);
    const taken = session.step - before;
    this.chunk.measured(taken, now() - startMs);
    this.pace.paid(taken);
    this.version += 1;
    if (outcome.kind !== "running") {
      this.finish(outcome);
      return null;
    }
    if (this.paused) {
      this.stepsAsked = Math.max(0, this.stepsAsked - Math.max(1, taken));
      if (this.stepsAsked === 0) {
        this.sendTraces();
        this.postActivity();
        return null;
      }
    }
    this.tell();
    return 0;
  }

  private finish(outcome: Exclude<AdvanceOutcome, { kind: "running" }>): void {
    if (outcome.kind === "ended") {
      this.end(outcome.reason);
      return;
    }
    this.over = true;
    this.sendTraces();
    this.doors.post({ kind: "failed", sentence: outcome.failure.sentence, progress: this.progress() });
  }

  private end(reason: StopReason): void {
    this.over = true;
    this.sendTraces();
    const result = packResult(this.doors.session.result());
    this.doors.post(
      { kind: "ended", reason, progress: this.progress(), result },
      result.arrays.map(({ bytes }) => bytes.buffer),
    );
  }

  private setPaused(paused: boolean): void {
    if (this.over) return;
    this.paused = paused;
    const nowMs = this.doors.now();
    this.pace.restart(nowMs);
    this.speed = { sinceMs: nowMs, sinceStep: this.doors.session.step, cellStepsPerSecond: null };
    if (paused) this.sendTraces();
    this.postActivity();
  }

  private edit(requestId: number, document: unknown): void {
    const refuse = (problems: Problem[]): void =>
      this.doors.post({ kind: "edit-refused", requestId, problems });
    if (this.over) {
      refuse([{ path: "", sentence: "The run is over and takes no edits. Run the edited scene." }]);
      return;
    }
    const read = this.doors.read(document);
    if ("problems" in read) {
      refuse(read.problems);
      return;
    }
    const forbidden = forbiddenChanges(this.doors.scene, read.scene);
    if (forbidden.length > 0) {
      refuse(forbidden);
      return;
    }
    const outcome = this.doors.session.edit(read.scene);
    if (outcome.kind === "refused") {
      refuse(outcome.problems.map(({ path, sentence }) => ({ path, sentence })));
      return;
    }
    this.version += 1;
    this.doors.post({ kind: "edit-answer", requestId, step: outcome.step, sceneSha256: read.sha256 });
  }

  /** Progress and traces, each no oftener than its interval. */
  private tell(): void {
    const nowMs = this.doors.now();
    if (nowMs - this.tracesAt >= TRACES_EVERY_MS) this.sendTraces();
    if (nowMs - this.progressAt < PROGRESS_EVERY_MS) return;
    this.progressAt = nowMs;
    this.doors.post({ kind: "progress", progress: this.progress() });
  }

  private postActivity(): void {
    this.progressAt = this.doors.now();
    const activity = this.paused ? "paused" : "running";
    this.doors.post({ kind: "activity", activity, progress: this.progress() });
  }

  private progress(): Progress {
    const { session } = this.doors;
    const { step, timeNs, decayDb } = session;
    return {
      step,
      timeNs,
      decayDb: Number.isFinite(decayDb) ? decayDb : null,
      cellStepsPerSecond: this.paused ? null : this.measureSpeed(),
    };
  }

  private measureSpeed(): number | null {
    const { session, now } = this.doors;
    const nowMs = now();
    const elapsedMs = nowMs - this.speed.sinceMs;
    if (elapsedMs < PROGRESS_EVERY_MS / 2) return this.speed.cellStepsPerSecond;
    const cellSteps = (session.step - this.speed.sinceStep) * session.grid.nx * session.grid.ny;
    this.speed.cellStepsPerSecond = (cellSteps / elapsedMs) * 1000;
    if (elapsedMs >= SPEED_OVER_MS) {
      this.speed.sinceMs = nowMs;
      this.speed.sinceStep = session.step;
    }
    return this.speed.cellStepsPerSecond;
  }

  private sendTraces(): void {
    this.tracesAt = this.doors.now();
    const increments = this.doors.session.tracesSince(this.tracesSent);
    const end = endOf(increments, this.tracesSent);
    if (end === this.tracesSent) return;
    this.tracesSent = end;
    this.doors.post({ kind: "traces", traces: toChunks(increments) });
  }

  private isDue(newerThan: number): boolean {
    return this.version > newerThan;
  }

  private somethingDue(): boolean {
    for (const newerThan of this.wanted.values()) if (this.isDue(newerThan)) return true;
    return false;
  }

  /** At most one frame a turn, so that many views slow the solver and never stop it. */
  private sendOneFrame(): boolean {
    for (const [viewId, newerThan] of this.wanted) {
      const view = this.views.get(viewId);
      if (!view || !this.isDue(newerThan)) continue;
      this.wanted.delete(viewId);
      this.sequence += 1;
      const { session, encode, post } = this.doors;
      const bytes = encode(session.sampleField(view.request), view.range, this.sequence);
      post({ kind: "frame", frame: { viewId, sequence: this.sequence, version: this.version, bytes } }, [
        bytes.buffer,
      ]);
      return true;
    }
    return false;
  }
}
