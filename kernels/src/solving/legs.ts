/**
 * A run of several legs, one after the other behind the door of one session: the driven ports of a scene in turn, then those of the
 * scenes that it is compared with. Every leg has an engine of its own, made when its turn comes; of a leg that is over only its record
 * is kept. Steps and samples count on from leg to leg, and `maxSteps` is the sum of theirs.
 */
import type {
  EnvelopeRequest,
  FieldQuantity,
  FieldSample,
  MapRequest,
  ViewRequest,
} from "../frames/index.js";
import type { Scene, SolveResult } from "../scene/index.js";
import { packBlocks, unpackBlocks } from "./blocks.js";
import type { EngineSession } from "./engine-session.js";
import type { LegRecord } from "./leg-record.js";
import type {
  AdvanceOutcome,
  EditLogEntry,
  EditOutcome,
  GridSummary,
  SessionSnapshot,
  SolveSession,
  StopReason,
  TraceIncrement,
} from "./session.js";

export interface Leg {
  /** Steps at which the leg ends at the latest. */
  maxSteps: number;
  open: () => EngineSession;
}

interface FinishedLeg {
  record: LegRecord;
  /** Without fields. */
  saved: SessionSnapshot;
  traces: TraceIncrement[];
  samples: number;
}

const COMPARED =
  "The run is already solving the scene that its own is compared with, where nothing can be edited: stop it, or run the edited scene when it has ended.";

/** What a snapshot says in words; those of the legs follow in blocks. */
interface LegsHeader {
  legs: number;
  /** Finished ones come first, the one that was running last. */
  finished: number;
  steps: number[];
}

export class LegsSession implements SolveSession {
  readonly grid: GridSummary;
  readonly quantities: readonly FieldQuantity[];
  private finished: FinishedLeg[] = [];
  private current: EngineSession;
  /** The scene's own last leg, whose field stays to be looked at while others are solved for comparison. */
  private shown: EngineSession | null = null;
  /** An edited or cancelled run ends with the leg that it is in. */
  private last: number;

  private readonly legs: readonly Leg[];

  /**
   * @param own one or more; the first one's grid stands for the run's
   * @param compared come after them, of other scenes: they give no traces, which would not join on to the run's own, and take no edits
   * @param merge makes one result of the records of the legs that ran, in their order
   */
  constructor(
    private readonly own: readonly Leg[],
    compared: readonly Leg[],
    private readonly merge: (records: readonly LegRecord[]) => SolveResult,
  ) {
    const legs = [...own, ...compared];
    this.legs = legs;
    this.current = legs[0].open();
    this.last = legs.length - 1;
    this.quantities = this.current.quantities;
    const maxSteps = legs.reduce((sum, leg) => sum + leg.maxSteps, 0);
    this.grid = { ...this.current.grid, maxSteps };
  }

  /** The leg under way is one of the scene's own. */
  private get ownUnderWay(): boolean {
    return this.finished.length < this.own.length;
  }

  private get stepsBefore(): number {
    return this.finished.reduce((sum, { record }) => sum + record.steps, 0);
  }

  get step(): number {
    return this.stepsBefore + this.current.step;
  }

  get timeNs(): number {
    return (
      this.finished.reduce((sum, { record }) => sum + record.steps * record.lattice.dt * 1e9, 0) +
      this.current.timeNs
    );
  }

  get decayDb(): number {
    return this.current.decayDb;
  }

  get edits(): readonly EditLogEntry[] {
    return this.current.edits.map((entry) => ({ ...entry, step: entry.step + this.stepsBefore }));
  }

  advance(steps: number): AdvanceOutcome {
    const end = this.step + Math.max(0, Math.floor(steps));
    for (;;) {
      const outcome = this.current.advance(end - this.step);
      if (outcome.kind !== "ended") return outcome;
      if (outcome.reason === "cancelled") return outcome;
      if (this.finished.length === this.last) return { kind: "ended", reason: this.ownReason() };
      this.goOn();
      if (this.step >= end) return { kind: "running" };
    }
  }

  /** The scene's own legs tell why the run ended: the least finished of them. */
  private ownReason(): StopReason {
    const records = [...this.finished.map(({ record }) => record), this.current.record()];
    return records.slice(0, this.own.length).some(({ reason }) => reason === "time") ? "time" : "decay";
  }

  /** Puts the leg that is over aside and opens the next one. */
  private goOn(): void {
    const { current, ownUnderWay } = this;
    const stays = this.finished.length === this.own.length - 1;
    this.finished.push({
      record: current.record(),
      saved: current.snapshot(stays ? "run" : "record"),
      traces: ownUnderWay ? current.tracesSince(0) : [],
      samples: ownUnderWay ? current.step : 0,
    });
    if (stays) this.shown = current;
    else current.dispose();
    this.current = this.legs[this.finished.length].open();
  }

  cancel(): void {
    this.last = this.finished.length;
    this.current.cancel();
  }

  /** The samples of the scene's own legs one after the other. */
  tracesSince(from: number): TraceIncrement[] {
    const finished = this.finished.slice(0, this.own.length);
    const before = finished.reduce((sum, { samples }) => sum + samples, 0);
    const now = this.ownUnderWay
      ? this.current.tracesSince(Math.max(0, from - before))
      : finished[0].traces.map((trace) => ({ ...trace, from: 0, values: new Float64Array(0) }));
    return now.map((trace, probe): TraceIncrement => {
      const parts: Float64Array[] = [];
      let start = 0;
      for (const { traces, samples } of finished) {
        const { every = 1, values } = traces[probe];
        if (from < start + samples)
          parts.push(values.subarray(Math.floor(Math.max(0, from - start) / every)));
        start += samples;
      }
      parts.push(trace.values);
      const values = new Float64Array(parts.reduce((sum, { length }) => sum + length, 0));
      let at = 0;
      for (const part of parts) {
        values.set(part, at);
        at += part.length;
      }
      const all = finished.reduce((sum, leg) => sum + leg.traces[probe].values.length, 0);
      return { ...trace, from: all + trace.from + trace.values.length - values.length, values };
    });
  }

  /** Always of the scene itself: the field of one without its shield would not fit the drawing. */
  sampleField(request: ViewRequest): FieldSample {
    return (this.shown ?? this.current).sampleField(request);
  }

  sampleMap(request: MapRequest): FieldSample {
    return this.current.sampleMap(request);
  }

  sampleEnvelope(request: EnvelopeRequest): FieldSample {
    return this.current.sampleEnvelope(request);
  }

  /** Edits the leg that is running; it is then the last. */
  edit(scene: Scene): EditOutcome {
    if (!this.ownUnderWay) return { kind: "refused", problems: [{ path: "", sentence: COMPARED }] };
    const outcome = this.current.edit(scene);
    if (outcome.kind === "refused") return outcome;
    this.last = this.finished.length;
    return { kind: "applied", step: this.stepsBefore + outcome.step };
  }

  snapshot(): SessionSnapshot {
    const saved = [...this.finished.map((leg) => leg.saved), this.current.snapshot()];
    const header: LegsHeader = {
      legs: this.last + 1,
      finished: this.finished.length,
      steps: saved.map(({ step }) => step),
    };
    const bytes = packBlocks(
      header,
      saved.map((leg) => leg.bytes),
    );
    return { version: 1, step: this.step, bytes };
  }

  restore(snapshot: SessionSnapshot): void {
    const { header, blocks } = unpackBlocks(snapshot.bytes);
    const words = header as LegsHeader;
    const fits = Number.isInteger(words.finished) && blocks.length === words.finished + 1;
    if (!fits || words.finished >= this.legs.length || words.legs > this.legs.length)
      throw new RangeError("The snapshot belongs to a run with other legs.");
    const savedOf = (leg: number): SessionSnapshot => ({
      version: 1,
      step: words.steps[leg],
      bytes: blocks[leg],
    });
    this.dispose();
    this.shown = null;
    this.finished = [];
    this.current = this.legs[0].open();
    this.last = this.legs.length - 1;
    for (let leg = 0; leg < words.finished; leg += 1) {
      this.current.restore(savedOf(leg));
      this.goOn();
    }
    this.current.restore(savedOf(words.finished));
    this.last = words.legs - 1;
  }

  result(): SolveResult {
    return this.merge([...this.finished.map(({ record }) => record), this.current.record()]);
  }

  dispose(): void {
    this.shown?.dispose();
    this.current.dispose();
  }
}
