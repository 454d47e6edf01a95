/**
 * Takes waiting runs from the table as slots come free, gives each a thread, and writes down what the threads
 * say. It holds no queue of its own: a server that dies leaves the table as it was, and the next one reads it.
 */
import { randomUUID } from "node:crypto";
import {
  Inject,
  Injectable,
  Logger,
  type BeforeApplicationShutdown,
  type OnApplicationBootstrap,
} from "@nestjs/common";
import { CONFIG, type Config } from "../../config/config.js";
import type { RunState } from "../../contract/runs.js";
import { QUEUE_LIMITS, type QueueLimits } from "../queue/queue-limits.js";
import { toRunDto } from "../run-dto.js";
import { RunsRepository } from "../runs.repository.js";
import { StreamHub } from "../stream/stream-hub.js";
import type { FromThread } from "../worker/protocol.js";
import { LiveRun } from "./live-run.js";
import { RunEndings } from "./run-endings.js";
import { SolverThreads } from "./solver-thread.js";

const HEARTBEAT_MS = 5_000;
/** A server that gave no sign for so long is taken for dead. */
const SILENT_FOR_MS = 6 * HEARTBEAT_MS;
const ABANDONED = "The server stopped while this run was going on: run the scene again.";

const logger = new Logger("Runs");

@Injectable()
export class Dispatcher implements OnApplicationBootstrap, BeforeApplicationShutdown {
  private readonly serverId = randomUUID();
  private readonly lives = new Map<string, LiveRun>();
  private pumping: Promise<void> | null = null;
  private pumpAgain = false;
  private closing = false;
  private beat: NodeJS.Timeout | undefined;

  constructor(
    private readonly repository: RunsRepository,
    private readonly threads: SolverThreads,
    private readonly hub: StreamHub,
    private readonly endings: RunEndings,
    @Inject(QUEUE_LIMITS) private readonly limits: QueueLimits,
    @Inject(CONFIG) private readonly config: Config,
  ) {}

  async onApplicationBootstrap(): Promise<void> {
    await this.interruptAbandoned();
    this.beat = setInterval(() => void this.heartbeat(), HEARTBEAT_MS);
    void this.kick();
  }

  async beforeApplicationShutdown(): Promise<void> {
    this.closing = true;
    clearInterval(this.beat);
    await this.pumping;
    await Promise.all(
      [...this.lives.values()].map(async (live) => {
        const wasOver = live.activity === "over";
        live.activity = "over";
        await live.kill();
        if (!wasOver) {
          const message = `The server was stopped at step ${live.record.step} of this run: run the scene again.`;
          void this.endings.end(live, { state: "interrupted", message }, null);
        }
        await live.inOrder(() => Promise.resolve());
      }),
    );
    this.lives.clear();
  }

  /** The run's thread on this server, if it has one. */
  live(runId: string): LiveRun | undefined {
    return this.lives.get(runId);
  }

  get pausedCount(): number {
    return [...this.lives.values()].filter(({ activity }) => activity === "paused").length;
  }

  /** Starts what may start. Returns once nothing more can. */
  kick(): Promise<void> {
    if (this.closing) return Promise.resolve();
    this.pumpAgain = true;
    this.pumping ??= this.pump()
      .catch((error: unknown) =>
        logger.error("The queue could not be read; it is tried again shortly.", error),
      )
      .finally(() => {
        this.pumping = null;
      });
    return this.pumping;
  }

  private async pump(): Promise<void> {
    while (this.pumpAgain && !this.closing) {
      this.pumpAgain = false;
      while (this.slotsFree() > 0) {
        const id = await this.repository.claim(this.serverId, this.memoryFree());
        if (id === null) break;
        await this.begin(id);
      }
    }
    await this.tellWaiting();
  }

  private slotsFree(): number {
    const taken = [...this.lives.values()].filter(
      ({ activity }) => activity === "running" || activity === "starting",
    ).length;
    return this.limits.running - taken;
  }

  /** Ended runs that linger are no obstacle: they go when their memory is needed. */
  private memoryFree(): number {
    const needed = [...this.lives.values()]
      .filter(({ activity }) => activity !== "over")
      .reduce((sum, { record }) => sum + record.memoryBytes, 0);
    return this.limits.memoryBytes - needed;
  }

  private async begin(runId: string): Promise<void> {
    const resumed = this.lives.get(runId);
    if (resumed !== undefined) {
      resumed.activity = "running";
      resumed.record.state = "running";
      resumed.post({ kind: "resume" });
      this.tell(resumed);
      return;
    }
    const record = await this.repository.findAnywhere(runId);
    const document = record && (await this.repository.document(record.sceneId, record.revision));
    // Deleted with its project between two statements.
    if (record === null || document === null) return;

    const live = new LiveRun(record);
    this.lives.set(runId, live);
    await this.evictLingering();
    try {
      const { startPaused, pacePsPerSecond, twoMesh, shielding } = record;
      live.holds(
        this.threads.start(
          { runId, document, startPaused, pacePsPerSecond, twoMesh, shielding },
          {
            message: (message) => this.hear(live, message),
            gone: (error) => this.lost(live, error),
          },
        ),
      );
    } catch (error) {
      logger.error(error);
      this.end(live, {
        state: "failed",
        message: "The server could not start a solver for this run: try again.",
      });
    }
    this.tell(live);
  }

  private hear(live: LiveRun, message: FromThread): void {
    switch (message.kind) {
      case "started": {
        live.record.grid = message.grid;
        void live.inOrder(() => this.repository.change(live.id, { grid: message.grid }));
        const { quantities } = message;
        this.hub.attach(live.id, { ask: (question) => live.post(question), quantities });
        break;
      }
      case "activity":
        this.changeActivity(live, message);
        break;
      case "progress":
        live.apply(message.progress);
        this.tell(live);
        break;
      case "frame":
        this.hub.deliver(live.id, message.frame);
        break;
      case "traces":
        this.hub.traces(live.id, message.traces);
        break;
      case "trace-answer":
      case "edit-answer":
      case "edit-refused":
        live.answered(message);
        break;
      case "refused": {
        const first = message.problems.at(0);
        const where = first === undefined || first.path === "" ? "" : `${first.path}: `;
        this.end(live, {
          state: "failed",
          message: `The solver refuses this scene: ${where}${first?.sentence ?? "no reason was given."}`,
        });
        void live.kill();
        break;
      }
      case "ended": {
        live.apply(message.progress);
        const state = message.reason === "cancelled" ? "stopped" : "done";
        this.end(live, { state, stopReason: message.reason }, message.result);
        break;
      }
      case "failed":
        if (message.progress === null) {
          // The fault was not the field's: nothing that the thread still holds can be relied on.
          void live.kill();
          this.hub.detach(live.id);
        } else {
          live.apply(message.progress);
        }
        this.end(live, { state: "failed", message: message.sentence });
        break;
    }
  }

  private changeActivity(live: LiveRun, message: Extract<FromThread, { kind: "activity" }>): void {
    if (live.activity === "over") return;
    live.apply(message.progress);
    // A run that waits for a slot to resume in is paused in its thread and queued in the table.
    if (live.record.state !== "queued") {
      live.activity = message.activity;
      live.record.state = message.activity;
      const { activity: state, progress } = message;
      void live.inOrder(() => this.repository.change(live.id, { state, ...progress }));
    }
    this.tell(live);
    live.changed();
    if (message.activity === "paused") void this.kick();
  }

  private lost(live: LiveRun, error: Error | null): void {
    this.hub.detach(live.id);
    live.threadGone();
    if (live.activity === "over") {
      if (live.record.endedAt !== null) this.lives.delete(live.id);
      return;
    }
    if (error !== null) logger.error(`The thread of run ${live.id} ended on an error.`, error);
    const at = `at step ${live.record.step}`;
    const outOfMemory = error !== null && "code" in error && error.code === "ERR_WORKER_OUT_OF_MEMORY";
    this.end(
      live,
      outOfMemory
        ? {
            state: "failed",
            message: `The solver ran out of memory ${at}: use larger cells or a smaller section.`,
          }
        : {
            state: "interrupted",
            message: `The solver's thread was ended ${at} from outside: run the scene again.`,
          },
    );
  }

  /** Ends a run once; what comes later about it is too late. */
  private end(
    live: LiveRun,
    change: { state: RunState; message?: string; stopReason?: LiveRun["record"]["stopReason"] },
    result: Extract<FromThread, { kind: "ended" }>["result"] | null = null,
  ): void {
    if (live.activity === "over") return;
    live.activity = "over";
    void this.endings.end(live, change, result).then(async () => {
      live.lingersUntilMs = Date.now() + this.limits.lingerMs;
      if (!live.hasThread) this.lives.delete(live.id);
      this.tell(live);
      live.changed();
      await this.evictLingering();
      await this.kick();
    });
  }

  /** Stops a run whose thread does not hear; it has no result. */
  async stopDeaf(live: LiveRun): Promise<void> {
    this.end(live, {
      state: "stopped",
      stopReason: "cancelled",
      message: "The run was stopped before its solver could give a result.",
    });
    this.hub.detach(live.id);
    await live.kill();
    await live.inOrder(() => Promise.resolve());
  }

  /** Sends the run's state to whoever looks at it. */
  tell(live: LiveRun): void {
    this.hub.state(toRunDto(live.record, live.record.state === "queued" ? 1 : null));
  }

  /** Tells the viewers of waiting runs their place, which any change of the queue may have moved. */
  private async tellWaiting(): Promise<void> {
    const watched = this.hub.joinedRuns;
    if (watched.size === 0) return;
    const order = await this.repository.waitingInOrder();
    for (const [index, id] of order.entries()) {
      if (!watched.has(id)) continue;
      const record = this.lives.get(id)?.record ?? (await this.repository.findAnywhere(id));
      if (record?.state === "queued") this.hub.state(toRunDto(record, index + 1));
    }
  }

  private async heartbeat(): Promise<void> {
    try {
      for (const live of this.lives.values()) {
        if (live.activity === "over") continue;
        const { step, timeNs, decayDb, cellStepsPerSecond } = live.record;
        await live.inOrder(async () => {
          const there = await this.repository.change(live.id, { step, timeNs, decayDb, cellStepsPerSecond });
          if (!there && live.activity !== "over") await this.forget(live);
        });
      }
      await this.evictLingering();
      await this.interruptAbandoned();
      await this.kick();
    } catch (error) {
      logger.error("The runs' heartbeat failed; it is tried again shortly.", error);
    }
  }

  /** The run was deleted while it went on. */
  private async forget(live: LiveRun): Promise<void> {
    live.activity = "over";
    this.hub.detach(live.id);
    this.lives.delete(live.id);
    await live.kill();
  }

  private async evictLingering(): Promise<void> {
    const lingering = [...this.lives.values()]
      .filter(({ activity, record }) => activity === "over" && record.endedAt !== null)
      .sort((a, b) => a.lingersUntilMs - b.lingersUntilMs);
    let bytes = lingering.reduce((sum, { record }) => sum + record.memoryBytes, 0);
    let count = lingering.length;
    for (const live of lingering) {
      const due = live.lingersUntilMs <= Date.now();
      if (!due && count <= this.limits.lingering && bytes <= this.memoryFree()) break;
      count -= 1;
      bytes -= live.record.memoryBytes;
      this.hub.detach(live.id);
      this.lives.delete(live.id);
      await live.kill();
    }
  }

  private async interruptAbandoned(): Promise<void> {
    // The embedded database belongs to one server at a time: whatever it shows as going on, and is not ours, is dead.
    if (this.config.database.kind === "postgres") {
      await this.repository.interruptAbandoned({ silentForMs: SILENT_FOR_MS }, ABANDONED);
    } else if (this.beat === undefined) {
      await this.repository.interruptAbandoned({ everyServer: true }, ABANDONED);
    }
  }
}
