/** The runs table. It is the queue's only truth: what is taken, by whom and in which order is decided here, in SQL. */
import { Inject, Injectable } from "@nestjs/common";
import { and, desc, eq, inArray, isNotNull, isNull, lt, or, sql, type SQL } from "drizzle-orm";
import { isOver, type RunState } from "../contract/runs.js";
import { DATABASE, type Database } from "../database/database.js";
import {
  people,
  projects,
  runResults,
  runs,
  sceneRevisions,
  scenes,
  type KeptEdit,
} from "../database/schema/index.js";

/** Any fixed number of ours: runs enter the queue one after the other, so that its bound holds. */
const ENTER_LOCK = 4_680_002;

const COLUMNS = {
  id: runs.id,
  sceneId: runs.sceneId,
  revision: runs.revision,
  sha256: sceneRevisions.sha256,
  by: { id: people.id, name: people.name },
  state: runs.state,
  startPaused: runs.startPaused,
  twoMesh: runs.twoMesh,
  shielding: runs.shielding,
  memoryBytes: runs.memoryBytes,
  queuedAt: runs.queuedAt,
  startedAt: runs.startedAt,
  endedAt: runs.endedAt,
  grid: runs.grid,
  step: runs.step,
  timeNs: runs.timeNs,
  decayDb: runs.decayDb,
  cellStepsPerSecond: runs.cellStepsPerSecond,
  pacePsPerSecond: runs.pacePsPerSecond,
  edits: runs.edits,
  message: runs.message,
  stopReason: runs.stopReason,
};

/** A run as it is kept, with its revision's hash and its starter's name. */
export interface RunRecord {
  id: string;
  sceneId: string;
  revision: number;
  sha256: string;
  by: { id: string; name: string };
  state: RunState;
  startPaused: boolean;
  twoMesh: boolean;
  shielding: boolean;
  memoryBytes: number;
  queuedAt: Date;
  startedAt: Date | null;
  endedAt: Date | null;
  grid: typeof runs.$inferSelect.grid;
  step: number;
  timeNs: number;
  decayDb: number | null;
  cellStepsPerSecond: number | null;
  pacePsPerSecond: number | null;
  edits: KeptEdit[];
  message: string | null;
  stopReason: typeof runs.$inferSelect.stopReason;
}

/** What changes while a run goes on and when it ends. */
export type RunChange = Partial<
  Pick<
    RunRecord,
    | "state"
    | "startedAt"
    | "endedAt"
    | "grid"
    | "step"
    | "timeNs"
    | "decayDb"
    | "cellStepsPerSecond"
    | "pacePsPerSecond"
    | "edits"
    | "message"
    | "stopReason"
  >
>;

export interface Entrance {
  sceneId: string;
  revision: number;
  personId: string;
  startPaused: boolean;
  /** Picoseconds of field time a second; left out or null: as fast as the server goes. */
  pacePsPerSecond?: number | null;
  /** Further runs for comparison; left out: none. */
  twoMesh?: boolean;
  shielding?: boolean;
  memoryBytes: number;
}

export type Entered =
  | { entered: string }
  | { full: "everyone"; queued: number }
  | { full: "person"; queued: number };

@Injectable()
export class RunsRepository {
  constructor(@Inject(DATABASE) private readonly db: Database) {}

  private select(where: SQL | undefined) {
    return this.db
      .select(COLUMNS)
      .from(runs)
      .innerJoin(
        sceneRevisions,
        and(eq(sceneRevisions.sceneId, runs.sceneId), eq(sceneRevisions.revision, runs.revision)),
      )
      .innerJoin(people, eq(people.id, runs.personId))
      .innerJoin(scenes, eq(scenes.id, runs.sceneId))
      .innerJoin(projects, eq(projects.id, scenes.projectId))
      .where(where);
  }

  /** Null for what is not in the workspace, exactly as for what does not exist. */
  async find(runId: string, workspaceId: string): Promise<RunRecord | null> {
    const found = await this.select(and(eq(runs.id, runId), eq(projects.workspaceId, workspaceId)));
    return found[0] ?? null;
  }

  async findAnywhere(runId: string): Promise<RunRecord | null> {
    const found = await this.select(eq(runs.id, runId));
    return found[0] ?? null;
  }

  /** Newest first. */
  listOfScene(sceneId: string, limit: number): Promise<RunRecord[]> {
    return this.select(eq(runs.sceneId, sceneId)).orderBy(desc(runs.queuedAt), desc(runs.id)).limit(limit);
  }

  async sceneExists(sceneId: string, workspaceId: string): Promise<boolean> {
    const found = await this.db
      .select({ id: scenes.id })
      .from(scenes)
      .innerJoin(projects, eq(projects.id, scenes.projectId))
      .where(and(eq(scenes.id, sceneId), eq(projects.workspaceId, workspaceId)));
    return found.length > 0;
  }

  async document(sceneId: string, revision: number): Promise<Record<string, unknown> | null> {
    const found = await this.db
      .select({ document: sceneRevisions.document })
      .from(sceneRevisions)
      .where(and(eq(sceneRevisions.sceneId, sceneId), eq(sceneRevisions.revision, revision)));
    return found[0]?.document ?? null;
  }

  /** Enters the queue unless one of its bounds is reached. */
  enter(entrance: Entrance, bounds: { queued: number; queuedPerPerson: number }): Promise<Entered> {
    return this.db.transaction(async (tx): Promise<Entered> => {
      await tx.execute(sql`select pg_advisory_xact_lock(${ENTER_LOCK})`);
      const counted = (
        await tx
          .select({
            all: sql<number>`count(*)`.mapWith(Number),
            own: sql<number>`count(*) filter (where ${runs.personId} = ${entrance.personId})`.mapWith(Number),
          })
          .from(runs)
          .where(eq(runs.state, "queued"))
      ).at(0);
      const { all, own } = counted ?? { all: 0, own: 0 };
      if (own >= bounds.queuedPerPerson) return { full: "person", queued: own };
      if (all >= bounds.queued) return { full: "everyone", queued: all };
      const row = (await tx.insert(runs).values(entrance).returning({ id: runs.id })).at(0);
      if (row === undefined) throw new Error("The database gave no id for a run that it took.");
      return { entered: row.id };
    });
  }

  /**
   * Takes the next run for this server: first of those who have the fewest runs going, then the oldest. A resumed
   * run waits like any other, but only the server that holds its thread may take it.
   * @returns its id, or null where nothing waits that fits into `freeBytes`
   */
  async claim(serverId: string, freeBytes: number): Promise<string | null> {
    const next = sql`(
      select q.id from runs q
      where q.state = 'queued'
        and (q.server_id = ${serverId} or (q.server_id is null and q.memory_bytes <= ${freeBytes}))
      order by (select count(*) from runs r where r.person_id = q.person_id and r.state = 'running'),
        q.queued_at, q.id
      limit 1
      for update of q skip locked)`;
    const taken = (
      await this.db
        .update(runs)
        .set({
          state: "running",
          startedAt: sql`coalesce(${runs.startedAt}, now())`,
          heartbeatAt: sql`now()`,
          serverId,
        })
        .where(and(eq(runs.id, next), eq(runs.state, "queued")))
        .returning({ id: runs.id })
    ).at(0);
    return taken?.id ?? null;
  }

  /** Ids of the waiting runs in the order in which they will be taken if none that runs ends. */
  async waitingInOrder(): Promise<string[]> {
    const ranked = this.db
      .select({
        id: runs.id,
        queuedAt: runs.queuedAt,
        turn: sql<number>`(select count(*) from runs r where r.person_id = "runs".person_id and r.state = 'running')
          + row_number() over (partition by "runs".person_id order by "runs".queued_at, "runs".id)`.as(
          "turn",
        ),
      })
      .from(runs)
      .where(eq(runs.state, "queued"))
      .as("ranked");
    const rows = await this.db
      .select({ id: ranked.id })
      .from(ranked)
      .orderBy(ranked.turn, ranked.queuedAt, ranked.id);
    return rows.map(({ id }) => id);
  }

  /** Changes a run that is not over. False where it is over or gone. */
  async change(runId: string, change: RunChange): Promise<boolean> {
    const changed = await this.db
      .update(runs)
      .set({ ...change, heartbeatAt: sql`now()` })
      .where(and(eq(runs.id, runId), isNull(runs.endedAt)))
      .returning({ id: runs.id });
    return changed.length > 0;
  }

  /** From one state into another, unless someone was quicker. */
  async changeFrom(runId: string, from: RunState, change: RunChange): Promise<boolean> {
    const changed = await this.db
      .update(runs)
      .set(change)
      .where(and(eq(runs.id, runId), eq(runs.state, from)))
      .returning({ id: runs.id });
    return changed.length > 0;
  }

  /** Ends a run: its last figures and, where it has one, its result document (JSON text), or neither. */
  async end(
    runId: string,
    change: RunChange & { state: RunState },
    resultText: string | null,
  ): Promise<boolean> {
    if (!isOver(change.state)) throw new Error(`${change.state} ends no run.`);
    return await this.db.transaction(async (tx) => {
      const ended = await tx
        .update(runs)
        .set({ ...change, endedAt: sql`now()`, heartbeatAt: null })
        .where(and(eq(runs.id, runId), isNull(runs.endedAt)))
        .returning({ id: runs.id });
      if (ended.length === 0) return false;
      if (resultText !== null) {
        await tx.insert(runResults).values({ runId, document: sql`${resultText}::json` });
      }
      return true;
    });
  }

  /** The result as it is kept, as JSON text. */
  async resultText(runId: string): Promise<string | null> {
    const found = await this.db
      .select({ text: sql<string>`${runResults.document}::text` })
      .from(runResults)
      .where(eq(runResults.runId, runId));
    return found[0]?.text ?? null;
  }

  /**
   * Ends what a dead server left behind. `everyServer`: no other server can be alive (the embedded database
   * belongs to one); otherwise those count as dead whose last sign is older than `silentForMs`.
   */
  async interruptAbandoned(
    by: { everyServer: true } | { silentForMs: number },
    message: string,
  ): Promise<string[]> {
    const dead =
      "everyServer" in by
        ? undefined
        : or(
            isNull(runs.heartbeatAt),
            lt(runs.heartbeatAt, sql`now() - ${by.silentForMs} * interval '1 millisecond'`),
          );
    // A queued run that has started before waited for its resumption: its thread is gone, too.
    const had = or(
      inArray(runs.state, ["running", "paused"]),
      and(eq(runs.state, "queued"), isNotNull(runs.serverId)),
    );
    const ended = await this.db
      .update(runs)
      .set({ state: "interrupted", endedAt: sql`now()`, heartbeatAt: null, message })
      .where(and(isNull(runs.endedAt), had, dead))
      .returning({ id: runs.id });
    return ended.map(({ id }) => id);
  }
}
