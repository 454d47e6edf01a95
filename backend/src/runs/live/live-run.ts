/** One run with a thread: what is known of it at this moment, and the questions that are open to its thread. */
import { Logger } from "@nestjs/common";
import type { RunRecord } from "../runs.repository.js";
import type { FromThread, Problem, Progress, ToThread, TraceChunk } from "../worker/protocol.js";
import type { SolverThread } from "./solver-thread.js";

export type Activity = "starting" | "running" | "paused" | "over";

export type EditAnswer = { step: number; sceneSha256: string } | { problems: Problem[] };
type Answer = Extract<FromThread, { requestId: number }>;

/** The thread did not answer in time, or is gone. */
export class NoAnswer extends Error {
  constructor() {
    super("The run's solver did not answer in time: try again in a moment.");
    this.name = "NoAnswer";
  }
}

/** A solver in the middle of a large step or of opening a large section answers late. */
const ANSWER_WITHIN_MS = 15_000;
const logger = new Logger("Runs");

export class LiveRun {
  activity: Activity = "starting";
  /** When the ended run's thread may go at the latest. */
  lingersUntilMs = Number.POSITIVE_INFINITY;
  private thread: SolverThread | null = null;
  private readonly open = new Map<number, (answer: Answer | null) => void>();
  private waiters: (() => void)[] = [];
  private nextRequest = 1;
  private tail: Promise<void> = Promise.resolve();

  /** @param record changes as the run goes on; the database is told by the dispatcher */
  constructor(readonly record: RunRecord) {}

  get id(): string {
    return this.record.id;
  }

  get hasThread(): boolean {
    return this.thread !== null;
  }

  holds(thread: SolverThread): void {
    this.thread = thread;
  }

  post(message: ToThread): void {
    this.thread?.post(message);
  }

  apply(progress: Progress): void {
    Object.assign(this.record, progress);
  }

  async edit(document: unknown): Promise<EditAnswer> {
    const answer = await this.ask((requestId) => ({ kind: "edit", requestId, document }));
    if (answer.kind === "edit-refused") return { problems: answer.problems };
    if (answer.kind === "edit-answer") return { step: answer.step, sceneSha256: answer.sceneSha256 };
    throw new NoAnswer();
  }

  /** Every sample so far; the room has had an increment up to the same sample just before. */
  async traces(): Promise<TraceChunk[]> {
    const answer = await this.ask((requestId) => ({ kind: "traces", requestId }));
    return answer.kind === "trace-answer" ? answer.traces : [];
  }

  answered(answer: Answer): void {
    this.open.get(answer.requestId)?.(answer);
  }

  /** Once the run's activity has changed, or after `withinMs` without a change. */
  nextChange(withinMs: number): Promise<void> {
    return new Promise((resolve) => {
      const timer = setTimeout(resolve, withinMs);
      this.waiters.push(() => {
        clearTimeout(timer);
        resolve();
      });
    });
  }

  changed(): void {
    const waiters = this.waiters;
    this.waiters = [];
    for (const wake of waiters) wake();
  }

  /** Writes about one run go to the database one after the other, in the order in which they came up. */
  inOrder(work: () => Promise<unknown>): Promise<void> {
    this.tail = this.tail.then(work).then(
      () => undefined,
      (error: unknown) => logger.error(`Run ${this.id} could not be written down.`, error),
    );
    return this.tail;
  }

  threadGone(): void {
    this.thread = null;
    for (const close of this.open.values()) close(null);
    this.changed();
  }

  async kill(): Promise<void> {
    const thread = this.thread;
    this.threadGone();
    await thread?.kill();
  }

  private ask(message: (requestId: number) => ToThread): Promise<Answer> {
    const requestId = this.nextRequest++;
    const { thread } = this;
    if (thread === null) return Promise.reject(new NoAnswer());
    return new Promise((resolve, reject) => {
      const settle = (answer: Answer | null): void => {
        clearTimeout(timer);
        this.open.delete(requestId);
        if (answer === null) reject(new NoAnswer());
        else resolve(answer);
      };
      const timer = setTimeout(() => settle(null), ANSWER_WITHIN_MS);
      this.open.set(requestId, settle);
      thread.post(message(requestId));
    });
  }
}
