import { sql } from "drizzle-orm";
import {
  bigint,
  boolean,
  check,
  doublePrecision,
  foreignKey,
  index,
  integer,
  json,
  jsonb,
  pgTable,
  text,
  uuid,
} from "drizzle-orm/pg-core";
import type { RunDto, RunState } from "../../contract/runs.js";
import { moment } from "./columns.js";
import { people } from "./people.js";
import { sceneRevisions } from "./scene-revisions.js";

/** A live edit as it is kept: the step at which it took effect, who made it, and the scene's hash after it. */
export interface KeptEdit {
  step: number;
  at: string;
  by: { id: string; name: string };
  sceneSha256: string;
}

/** One row a run. The table is also the queue: nothing else knows what waits and what goes on. */
export const runs = pgTable(
  "runs",
  {
    id: uuid().primaryKey().defaultRandom(),
    sceneId: uuid().notNull(),
    revision: integer().notNull(),
    personId: uuid()
      .notNull()
      .references(() => people.id),
    state: text().$type<RunState>().notNull().default("queued"),
    startPaused: boolean().notNull().default(false),
    twoMesh: boolean().notNull().default(false),
    shielding: boolean().notNull().default(false),
    /** Bytes that the solver needs at most, by the kernels' estimate. */
    memoryBytes: bigint({ mode: "number" }).notNull(),
    queuedAt: moment().notNull().defaultNow(),
    startedAt: moment(),
    endedAt: moment(),
    grid: jsonb().$type<NonNullable<RunDto["grid"]>>(),
    step: integer().notNull().default(0),
    timeNs: doublePrecision().notNull().default(0),
    decayDb: doublePrecision(),
    cellStepsPerSecond: doublePrecision(),
    pacePsPerSecond: doublePrecision(),
    edits: jsonb().$type<KeptEdit[]>().notNull().default([]),
    message: text(),
    stopReason: text().$type<NonNullable<RunDto["stopReason"]>>(),
    /** The server that holds the run's thread, and when it last said so; null before the first start. */
    serverId: uuid(),
    heartbeatAt: moment(),
  },
  (table) => [
    foreignKey({
      columns: [table.sceneId, table.revision],
      foreignColumns: [sceneRevisions.sceneId, sceneRevisions.revision],
    }).onDelete("cascade"),
    index().on(table.sceneId, table.queuedAt),
    index("runs_open").on(table.state, table.queuedAt).where(sql`${table.endedAt} is null`),
    check(
      "runs_state_known",
      sql`${table.state} in ('queued', 'running', 'paused', 'done', 'stopped', 'failed', 'interrupted')`,
    ),
  ],
);

/** What a run found; written in the transaction that ends the run. */
export const runResults = pgTable("run_results", {
  runId: uuid()
    .primaryKey()
    .references(() => runs.id, { onDelete: "cascade" }),
  /**
   * The result document, kept letter by letter so that its hash can be taken anew; a long array stands as
   * {"array": sha256, "length": n} and lies in the array store.
   */
  document: json().$type<Record<string, unknown>>().notNull(),
});
