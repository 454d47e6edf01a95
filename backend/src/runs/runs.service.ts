import { Inject, Injectable } from "@nestjs/common";
import {
  estimateCost,
  readScene,
  resolveScene,
  SceneError,
  type Problem,
  type Scene,
} from "@heddle/kernels/scene";
import { comparedScenes, type ComparisonOptions } from "@heddle/kernels/solving";
import type { z } from "zod";
import type { Actor } from "../common/actor.js";
import { notFound, Refusal } from "../common/refusal.js";
import { isOver, type RunCommand, type RunDto, type RunState, type StartRunBody } from "../contract/runs.js";
import { Dispatcher } from "./live/dispatcher.js";
import { NoAnswer, type LiveRun } from "./live/live-run.js";
import { gigabytes, QUEUE_LIMITS, type QueueLimits } from "./queue/queue-limits.js";
import { toRunDto } from "./run-dto.js";
import { RunsRepository, type RunRecord } from "./runs.repository.js";

/** Runs that a scene's list shows, newest first. */
const LISTED = 200;
/** A command is answered with what it brought about, or after this time with how things stand. */
const ANSWER_AFTER_MS = 2_000;
const STOP_WITHIN_MS = 10_000;

const STATE_WORDS: Record<RunState, string> = {
  queued: "still waits",
  running: "is running",
  paused: "is paused",
  done: "is done",
  stopped: "was stopped",
  failed: "has failed",
  interrupted: "was interrupted",
};

@Injectable()
export class RunsService {
  constructor(
    private readonly repository: RunsRepository,
    private readonly dispatcher: Dispatcher,
    @Inject(QUEUE_LIMITS) private readonly limits: QueueLimits,
  ) {}

  /** @throws Refusal "not-found", "scene-refused", "too-large" or "queue-full" */
  async start(actor: Actor, sceneId: string, wanted: z.output<typeof StartRunBody>): Promise<RunDto> {
    const { revision, paused: startPaused, pacePsPerSecond, twoMesh, shielding } = wanted;
    if (!(await this.repository.sceneExists(sceneId, actor.workspace.id))) throw notFound("scene");
    const document = await this.repository.document(sceneId, revision);
    if (document === null)
      throw new Refusal("not-found", `This scene has no revision ${revision}: save it first.`);

    const entered = await this.repository.enter(
      {
        sceneId,
        revision,
        personId: actor.person.id,
        startPaused,
        pacePsPerSecond,
        twoMesh,
        shielding,
        memoryBytes: this.memoryFor(document, { twoMesh, shielding }),
      },
      this.limits,
    );
    if ("full" in entered) throw queueFull(entered.full, entered.queued);
    await this.dispatcher.kick();
    return await this.get(actor, entered.entered);
  }

  /** @throws Refusal "not-found" for another workspace's run, too */
  async get(actor: Actor, runId: string): Promise<RunDto> {
    return await this.toDto(await this.record(actor, runId));
  }

  async listOfScene(actor: Actor, sceneId: string): Promise<RunDto[]> {
    if (!(await this.repository.sceneExists(sceneId, actor.workspace.id))) throw notFound("scene");
    const records = (await this.repository.listOfScene(sceneId, LISTED)).map((record) =>
      this.current(record),
    );
    const places = await this.places(records);
    return records.map((record) => toRunDto(record, places.get(record.id) ?? null));
  }

  /** @throws Refusal "wrong-state" where the run's state does not allow the command */
  async command(actor: Actor, runId: string, command: RunCommand): Promise<RunDto> {
    const record = await this.record(actor, runId);
    const live = this.dispatcher.live(runId);
    if (isOver(record.state)) throw wrongState(record.state, command.kind);
    switch (command.kind) {
      case "pause":
        await this.pause(record, live);
        break;
      case "resume":
        await this.resume(record, live);
        break;
      case "step":
        await this.step(record, live, command.steps);
        break;
      case "stop":
        await this.stop(record, live);
        break;
      case "pace":
        await this.pace(record, live, command.picosecondsPerSecond);
        break;
    }
    return await this.get(actor, runId);
  }

  /** @returns the step from which on the edit holds. @throws Refusal "scene-refused" with every reason */
  async edit(actor: Actor, runId: string, document: Record<string, unknown>): Promise<{ step: number }> {
    const record = await this.record(actor, runId);
    const live = this.dispatcher.live(runId);
    if (isOver(record.state)) throw wrongState(record.state, "edit");
    if (live === undefined) throw elsewhere(record.state, "edit");
    const answer = await unavailableUnlessAnswered(live.edit(document));
    if ("problems" in answer) {
      const first = answer.problems.at(0);
      throw new Refusal("scene-refused", first?.sentence ?? "The edit was refused.", {
        problems: answer.problems,
      });
    }
    const { id, name } = actor.person;
    const edit = { ...answer, at: new Date().toISOString(), by: { id, name } };
    live.record.edits = [...live.record.edits, edit];
    const { edits } = live.record;
    await live.inOrder(() => this.repository.change(runId, { edits }));
    this.dispatcher.tell(live);
    return { step: answer.step };
  }

  /** The run as it stands, for whoever may read it. */
  async record(actor: Actor, runId: string): Promise<RunRecord> {
    const record = await this.repository.find(runId, actor.workspace.id);
    if (record === null) throw notFound("run");
    return this.current(record);
  }

  async toDto(record: RunRecord): Promise<RunDto> {
    return toRunDto(record, (await this.places([record])).get(record.id) ?? null);
  }

  /** What the thread said is newer than what the table holds. */
  private current(record: RunRecord): RunRecord {
    return this.dispatcher.live(record.id)?.record ?? record;
  }

  private async places(records: readonly RunRecord[]): Promise<Map<string, number>> {
    if (!records.some(({ state }) => state === "queued")) return new Map();
    const order = await this.repository.waitingInOrder();
    return new Map(order.map((id, index) => [id, index + 1]));
  }

  /** Of the scene, whose field stays, and of the largest of those that it is compared with, one after the other. */
  private memoryFor(document: Record<string, unknown>, compared: ComparisonOptions): number {
    const own = runnable(document);
    const others = scenesBeside(own, compared).map(runnable);
    const bytesOf = (scene: Scene): number => estimateCost(resolveScene(scene)).memoryBytes;
    const memoryBytes = bytesOf(own) + Math.max(0, ...others.map(bytesOf));
    if (memoryBytes > this.limits.memoryBytes) {
      throw new Refusal(
        "too-large",
        `This run needs about ${gigabytes(memoryBytes)} of memory and the server gives its runs ` +
          `${gigabytes(this.limits.memoryBytes)}: use larger cells, a smaller section or a shorter run.`,
      );
    }
    return memoryBytes;
  }

  private async pause(record: RunRecord, live: LiveRun | undefined): Promise<void> {
    if (record.state === "paused") return;
    if (live === undefined) throw elsewhere(record.state, "pause");
    if (record.state === "queued") {
      // It waited to be resumed: it simply stays paused.
      if (await this.repository.changeFrom(record.id, "queued", { state: "paused" })) {
        live.record.state = "paused";
        this.dispatcher.tell(live);
      }
      return;
    }
    if (this.dispatcher.pausedCount >= this.limits.paused) {
      throw new Refusal(
        "too-many",
        `${this.limits.paused} runs are paused already, as many as the server keeps: resume or stop one of them.`,
      );
    }
    const change = live.nextChange(ANSWER_AFTER_MS);
    live.post({ kind: "pause" });
    await change;
  }

  private async resume(record: RunRecord, live: LiveRun | undefined): Promise<void> {
    if (record.state !== "paused") throw wrongState(record.state, "resume");
    if (live === undefined) throw elsewhere(record.state, "resume");
    // Back into the queue: whoever resumes takes a turn like everybody else.
    live.record.state = "queued";
    await live.inOrder(() => this.repository.change(record.id, { state: "queued" }));
    await this.dispatcher.kick();
  }

  private async step(record: RunRecord, live: LiveRun | undefined, steps: number): Promise<void> {
    if (record.state !== "paused") throw wrongState(record.state, "step");
    if (live === undefined) throw elsewhere(record.state, "step");
    const change = live.nextChange(ANSWER_AFTER_MS);
    live.post({ kind: "step", steps });
    await change;
  }

  private async stop(record: RunRecord, live: LiveRun | undefined): Promise<void> {
    if (live === undefined) {
      const stopped = await this.repository.changeFrom(record.id, "queued", {
        state: "stopped",
        stopReason: "cancelled",
        endedAt: new Date(),
      });
      if (!stopped) throw elsewhere(record.state, "stop");
      await this.dispatcher.kick();
      return;
    }
    live.post({ kind: "stop" });
    const until = Date.now() + STOP_WITHIN_MS;
    while (!isOver(live.record.state) && Date.now() < until) await live.nextChange(until - Date.now());
    if (!isOver(live.record.state)) await this.dispatcher.stopDeaf(live);
  }

  private async pace(record: RunRecord, live: LiveRun | undefined, pace: number | null): Promise<void> {
    if (live === undefined) {
      await this.repository.changeFrom(record.id, "queued", { pacePsPerSecond: pace });
      return;
    }
    live.record.pacePsPerSecond = pace;
    const change = live.nextChange(ANSWER_AFTER_MS);
    live.post({ kind: "pace", picosecondsPerSecond: pace });
    await change;
    await live.inOrder(() => this.repository.change(record.id, { pacePsPerSecond: pace }));
    this.dispatcher.tell(live);
  }
}

/** @throws Refusal "scene-refused" with every problem */
function runnable(document: unknown): Scene {
  const read = readScene(document, { purpose: "run" });
  if (!read.ok) throw sceneRefused(read.problems);
  return read.scene;
}

/** @throws Refusal "scene-refused" where there is nothing to compare with */
function scenesBeside(scene: Scene, compared: ComparisonOptions): Scene[] {
  try {
    return comparedScenes(scene, compared);
  } catch (error) {
    if (error instanceof SceneError) throw sceneRefused(error.problems);
    throw error;
  }
}

function sceneRefused(problems: readonly Problem[]): Refusal {
  return new Refusal("scene-refused", problems[0]?.sentence ?? "The scene is refused.", {
    problems: problems.map(({ path, sentence }) => ({ path, sentence })),
  });
}

function queueFull(who: "everyone" | "person", queued: number): Refusal {
  return new Refusal(
    "queue-full",
    who === "person"
      ? `${queued} of your runs wait already, as many as one person may have: stop one of them or let one start.`
      : `${queued} runs wait already, as many as the queue holds: try again when one has started.`,
  );
}

function wrongState(state: RunState, what: RunCommand["kind"] | "edit"): Refusal {
  const allowed: Record<typeof what, string> = {
    pause: "only a running run can be paused",
    resume: "only a paused run can be resumed",
    step: "pause it before stepping",
    stop: "there is nothing to stop",
    pace: "its pace can no longer change",
    edit: "only a run that goes on can be edited; save the scene and run it anew",
  };
  return new Refusal("wrong-state", `This run ${STATE_WORDS[state]}: ${allowed[what]}.`);
}

/** The run has no thread here: it has not started, or another server holds it. */
function elsewhere(state: RunState, what: RunCommand["kind"] | "edit"): Refusal {
  if (state === "queued") return wrongState(state, what);
  return new Refusal("unavailable", "This run goes on in another server of this installation: ask that one.");
}

async function unavailableUnlessAnswered<T>(answer: Promise<T>): Promise<T> {
  try {
    return await answer;
  } catch (error) {
    if (error instanceof NoAnswer) throw new Refusal("unavailable", error.message);
    throw error;
  }
}
