/** The queue's rules in SQL, on the embedded database and on PostgreSQL. */
import { randomUUID } from "node:crypto";
import { eq, sql } from "drizzle-orm";
import { afterAll, afterEach, beforeAll, describe, expect, it } from "vitest";
import { addPerson } from "../auth/people.js";
import { openDatabase, type Database, type OpenDatabase } from "../database/database.js";
import { people, runResults, runs, workspaces } from "../database/schema/index.js";
import { postgresSource, startPostgres, type PostgresForTests } from "../database/testing/postgres.js";
import { ProjectsRepository } from "../projects/projects.repository.js";
import { ScenesRepository } from "../scenes/scenes.repository.js";
import { RunsRepository } from "./runs.repository.js";

const ROOM = 1e12;
const BOUNDS = { queued: 1_000, queuedPerPerson: 1_000 };
const drivers = [
  { driver: "embedded", there: true },
  { driver: "PostgreSQL", there: postgresSource() !== null },
] as const;

for (const { driver, there } of drivers) {
  describe.skipIf(!there)(`the queue on ${driver}`, () => {
    let postgres: PostgresForTests | undefined;
    let opened: OpenDatabase;
    let db: Database;
    let repository: RunsRepository;
    let workspaceId: string;
    let sceneId: string;
    const persons = new Map<string, string>();
    const idOf = (name: string): string => persons.get(name) ?? "nobody";
    const server = randomUUID();

    beforeAll(async () => {
      if (driver === "PostgreSQL") postgres = await startPostgres();
      opened = await openDatabase(
        postgres === undefined ? { kind: "memory" } : { kind: "postgres", url: postgres.url },
      );
      db = opened.db;
      repository = new RunsRepository(db);
      const workspace = (await db.insert(workspaces).values({ name: "Ours" }).returning()).at(0);
      workspaceId = String(workspace?.id);
      for (const name of ["ada", "ben", "cleo"]) {
        persons.set(
          name,
          await addPerson(db, {
            name,
            email: `${name}@example.org`,
            password: "long enough pass",
          }),
        );
      }
      const ownerId = idOf("ada");
      const projectId = await new ProjectsRepository(db).create(db, {
        workspaceId,
        ownerId,
        name: "P",
        notes: "",
      });
      const judged = { document: { name: "S" }, name: "S", sha256: "ab" };
      sceneId = await new ScenesRepository(db).create(db, projectId, judged, ownerId);
    });
    afterEach(() => db.delete(runs));
    afterAll(async () => {
      await opened.close();
      await postgres?.stop();
    });

    let queued = 0;
    const enter = async (person: string, memoryBytes = 1, bounds = BOUNDS): Promise<string> => {
      const entered = await repository.enter(
        { sceneId, revision: 1, personId: idOf(person), startPaused: false, memoryBytes },
        bounds,
      );
      if ("full" in entered) throw new Error(`full for ${entered.full} at ${entered.queued}`);
      queued += 1;
      // Each a second later than the one before, however fast they were entered.
      await db
        .update(runs)
        .set({ queuedAt: new Date(1_800_000_000_000 + queued * 1_000) })
        .where(eq(runs.id, entered.entered));
      return entered.entered;
    };
    const claim = (by = server, room = ROOM) => repository.claim(by, room);

    it("takes turns between persons, oldest first, and tells that order beforehand", async () => {
      const ada = [await enter("ada"), await enter("ada"), await enter("ada")];
      const ben = [await enter("ben"), await enter("ben")];
      const cleo = [await enter("cleo")];
      const fair = [ada[0], ben[0], cleo[0], ada[1], ben[1], ada[2]];
      expect(await repository.waitingInOrder()).toEqual(fair);
      const taken = [];
      for (let turn = 0; turn < 6; turn++) taken.push(await claim());
      expect(taken).toEqual(fair);
      expect(await claim()).toBeNull();
    });

    it("gives what is claimed at the same time to one claimer each", async () => {
      const ids = [];
      for (let index = 0; index < 6; index++) ids.push(await enter("ada"));
      const servers = Array.from({ length: 10 }, () => randomUUID());
      const taken = (await Promise.all(servers.map((by) => claim(by)))).filter((id) => id !== null);
      expect(new Set(taken).size).toBe(taken.length);
      for (;;) {
        const more = await claim();
        if (more === null) break;
        taken.push(more);
      }
      expect(taken.sort()).toEqual(ids.sort());
    });

    it("leaves what does not fit into memory, and takes what does", async () => {
      await enter("ada", 5_000);
      const small = await enter("ada", 10);
      expect(await claim(server, 100)).toBe(small);
      expect(await claim(server, 100)).toBeNull();
    });

    it("lets only the server that holds its thread take a resumed run, whatever its memory", async () => {
      const id = await enter("ada", 5_000);
      await claim();
      await repository.change(id, { state: "queued" });
      expect(await claim(randomUUID())).toBeNull();
      expect(await claim(server, 0)).toBe(id);
    });

    it("keeps its bounds, even for entries at the same moment", async () => {
      const bounds = { queued: 5, queuedPerPerson: 3 };
      const entrance = (person: string) =>
        repository.enter(
          { sceneId, revision: 1, personId: idOf(person), startPaused: false, memoryBytes: 1 },
          bounds,
        );
      const own = await Promise.all(Array.from({ length: 6 }, () => entrance("ada")));
      expect(own.filter((one) => "entered" in one)).toHaveLength(3);
      expect(own).toContainEqual({ full: "person", queued: 3 });
      const others = [await entrance("ben"), await entrance("cleo"), await entrance("ben")];
      expect(others[2]).toEqual({ full: "everyone", queued: 5 });
    });

    it("ends a run once, with state and result in one transaction", async () => {
      const id = await enter("ada");
      await claim();
      const text = '{"b":1e-300,"a":[0.1,5e-324]}';
      await expect(repository.end(id, { state: "done" }, "{not json")).rejects.toThrow();
      expect((await repository.findAnywhere(id))?.state).toBe("running");
      expect(await repository.resultText(id)).toBeNull();

      expect(await repository.end(id, { state: "done", stopReason: "time" }, text)).toBe(true);
      expect(await repository.resultText(id)).toBe(text);
      expect(await repository.end(id, { state: "failed" }, null)).toBe(false);
      expect(await repository.change(id, { state: "running" })).toBe(false);
      expect(await repository.findAnywhere(id)).toMatchObject({ state: "done", stopReason: "time" });
      await db.delete(runs).where(eq(runs.id, id));
      expect(await db.select().from(runResults)).toEqual([]);
    });

    it("interrupts what a dead server held, and nothing that waits or lives", async () => {
      const [dead, alive, resuming, waiting] = [
        await enter("ada"),
        await enter("ben"),
        await enter("cleo"),
        await enter("ada"),
      ];
      for (let turn = 0; turn < 3; turn++) await claim();
      await repository.change(resuming, { state: "queued" });
      const longAgo = sql`now() - interval '10 minutes'`;
      await db.update(runs).set({ heartbeatAt: longAgo }).where(eq(runs.id, dead));
      await db.update(runs).set({ heartbeatAt: longAgo }).where(eq(runs.id, resuming));

      const ended = await repository.interruptAbandoned({ silentForMs: 30_000 }, "It stopped.");
      expect(ended.sort()).toEqual([dead, resuming].sort());
      expect(await repository.findAnywhere(dead)).toMatchObject({
        state: "interrupted",
        message: "It stopped.",
      });
      expect((await repository.findAnywhere(alive))?.state).toBe("running");
      expect((await repository.findAnywhere(waiting))?.state).toBe("queued");
      expect(await repository.interruptAbandoned({ everyServer: true }, "Gone.")).toEqual([alive]);
      expect(await claim()).toBe(waiting);
    });

    it("finds runs of the own workspace alone", async () => {
      const id = await enter("ada");
      expect((await repository.find(id, workspaceId))?.by).toEqual({ id: idOf("ada"), name: "ada" });
      expect(await repository.find(id, randomUUID())).toBeNull();
      expect(await repository.sceneExists(sceneId, randomUUID())).toBe(false);
      expect((await repository.listOfScene(sceneId, 10)).map((run) => run.id)).toEqual([id]);
      expect(await db.select().from(people)).toHaveLength(3);
    });
  });
}
