/** One suite for both drivers: what the repositories promise holds on the embedded database and on PostgreSQL. */
import { afterAll, beforeAll, describe, expect, it } from "vitest";
import { addPerson } from "../auth/people.js";
import { FirstOwnerService } from "../auth/first-owner.service.js";
import { MediaRepository } from "../media/media.repository.js";
import { ActivityRepository } from "../projects/activity.repository.js";
import { ProjectsRepository } from "../projects/projects.repository.js";
import { ScenesRepository } from "../scenes/scenes.repository.js";
import { MembersRepository } from "../workspaces/members.repository.js";
import { isDuplicate } from "../common/failures.js";
import { openDatabase, type Database, type OpenDatabase } from "./database.js";
import { writtenRow } from "./rows.js";
import { members, runs, workspaces } from "./schema/index.js";
import { postgresSource, startPostgres, type PostgresForTests } from "./testing/postgres.js";

const drivers = [
  { driver: "embedded", there: true },
  { driver: "PostgreSQL", there: postgresSource() !== null },
] as const;

for (const { driver, there } of drivers) {
  describe.skipIf(!there)(`the repositories on ${driver}`, () => {
    let postgres: PostgresForTests | undefined;
    let opened: OpenDatabase;
    let db: Database;
    let workspaceId: string;
    let personId: string;

    beforeAll(async () => {
      if (driver === "PostgreSQL") postgres = await startPostgres();
      opened = await openDatabase(
        postgres === undefined ? { kind: "memory" } : { kind: "postgres", url: postgres.url },
      );
      db = opened.db;
      workspaceId = await workspace("Ours");
      personId = await addPerson(db, { name: "Ada", email: "Ada@Example.org", password: "long enough pass" });
      await db.insert(members).values({ workspaceId, personId, role: "engineer" });
    });
    afterAll(async () => {
      await opened.close();
      await postgres?.stop();
    });

    const workspace = async (name: string): Promise<string> => {
      return writtenRow(await db.insert(workspaces).values({ name }).returning(), "workspace").id;
    };
    const project = (name: string): Promise<string> =>
      new ProjectsRepository(db).create(db, { workspaceId, ownerId: personId, name, notes: "" });
    const judged = (name: string, sha256: string, values: Record<string, unknown> = {}) => ({
      document: { name, ...values },
      name,
      sha256,
    });

    it("finds a person's workspace and role", async () => {
      expect(await new MembersRepository(db).firstOf(personId)).toEqual({
        workspace: { id: workspaceId, name: "Ours" },
        role: "engineer",
      });
      expect(await new MembersRepository(db).list(workspaceId)).toEqual([
        { id: personId, name: "Ada", role: "engineer" },
      ]);
    });

    it("keeps documents to the last bit and in every letter", async () => {
      const scenes = new ScenesRepository(db);
      const values = {
        tiny: 5e-324,
        third: 1 / 3,
        large: 1.7976931348623157e308,
        text: "σ* → Ω/m 🧵",
        deep: [[[]]],
      };
      const sceneId = await scenes.create(db, await project("Exact"), judged("Exact", "a", values), personId);
      const found = await scenes.find(workspaceId, sceneId);
      expect(found?.document).toEqual({ name: "Exact", ...values });
      expect(found?.savedBy).toEqual({ id: personId, name: "Ada" });
    });

    it("appends to the latest revision alone, and lets one of many win", async () => {
      const scenes = new ScenesRepository(db);
      const sceneId = await scenes.create(db, await project("Race"), judged("One", "1"), personId);
      const won = await Promise.all(
        ["a", "b", "c", "d", "e"].map((sha256) =>
          db.transaction((tx) => scenes.append(tx, sceneId, 1, judged("Two", sha256), personId)),
        ),
      );
      expect(won.filter((revision) => revision !== null)).toEqual([2]);
      expect((await scenes.find(workspaceId, sceneId))?.revision).toBe(2);
      expect((await scenes.listRevisions(sceneId)).map(({ revision }) => revision)).toEqual([2, 1]);
    });

    it("undoes a transaction as a whole", async () => {
      const scenes = new ScenesRepository(db);
      const projectId = await project("Undone");
      const failing = db.transaction(async (tx) => {
        await scenes.create(tx, projectId, judged("Gone", "x"), personId);
        throw new Error("after all");
      });
      await expect(failing).rejects.toThrow("after all");
      expect(await scenes.listOfProject(projectId)).toEqual([]);
    });

    it("counts scenes and names the last run by project and by scene", async () => {
      const scenes = new ScenesRepository(db);
      const projectId = await project("Counted");
      const first = await scenes.create(db, projectId, judged("First", "1"), personId);
      await scenes.create(db, projectId, judged("Second", "2"), personId);
      const run = { sceneId: first, revision: 1, personId, memoryBytes: 1 };
      await db.insert(runs).values([
        { ...run, state: "done", queuedAt: new Date(1_000), endedAt: new Date(2_000) },
        { ...run, state: "running", queuedAt: new Date(3_000) },
      ]);
      const found = await new ProjectsRepository(db).find(workspaceId, projectId);
      expect(found).toMatchObject({ sceneCount: 2, lastRun: { state: "running", at: new Date(3_000) } });
      expect(await scenes.lastRuns([first])).toMatchObject([
        { sceneId: first, state: "running", revision: 1 },
      ]);
    });

    it("deletes nothing while a run goes on, and everything below it afterwards", async () => {
      const scenes = new ScenesRepository(db);
      const projects = new ProjectsRepository(db);
      const projectId = await project("Deleted");
      const sceneId = await scenes.create(db, projectId, judged("S", "1"), personId);
      await db.insert(runs).values({ sceneId, revision: 1, personId, memoryBytes: 1, state: "paused" });
      expect(await projects.remove(projectId)).toBe(false);
      expect(await scenes.remove(sceneId)).toBe(false);
      await db.update(runs).set({ state: "stopped", endedAt: new Date() });
      expect(await projects.remove(projectId)).toBe(true);
      expect(await scenes.find(workspaceId, sceneId)).toBeNull();
    });

    it("finds nothing through another workspace", async () => {
      const other = await workspace("Theirs");
      const projectId = await project("Mine");
      const sceneId = await new ScenesRepository(db).create(db, projectId, judged("S", "1"), personId);
      expect(await new ProjectsRepository(db).find(other, projectId)).toBeNull();
      expect(await new ScenesRepository(db).find(other, sceneId)).toBeNull();
      expect(await new ScenesRepository(db).findRevision(other, sceneId, 1)).toBeNull();
      expect(await new ProjectsRepository(db).list(other)).toEqual([]);
      const media = new MediaRepository(db);
      const medium = await media.create(db, { workspaceId, medium: { id: "m", name: "M" }, source: "here" });
      expect(await media.update(other, medium.id, { medium: { id: "m" }, source: "x" })).toBeNull();
      expect(await media.remove(other, medium.id)).toBe(false);
    });

    it("keeps one medium per id in a workspace", async () => {
      const media = new MediaRepository(db);
      const values = { workspaceId, medium: { id: "twice", name: "Once" }, source: "here" };
      await media.create(db, values);
      const again = await media.create(db, values).then(
        () => null,
        (error: unknown) => error,
      );
      expect(isDuplicate(again)).toBe(true);
      await media.create(db, { ...values, workspaceId: await workspace("Elsewhere") });
    });

    it("joins a person's saves of one scene within the hour", async () => {
      const activity = new ActivityRepository(db);
      const projectId = await project("Active");
      const sceneId = await new ScenesRepository(db).create(db, projectId, judged("S", "1"), personId);
      const deed = { projectId, sceneId, personId };
      await activity.add(db, { ...deed, sentence: "added it" });
      await activity.add(db, { ...deed, sentence: "saved revision 2", kind: "save" });
      await activity.add(db, { ...deed, sentence: "saved revision 3", kind: "save" });
      expect((await activity.list(projectId)).map(({ sentence }) => sentence)).toEqual([
        "saved revision 3",
        "added it",
      ]);
    });

    it("makes one first owner, however many ask at once", async () => {
      const service = new FirstOwnerService(db);
      expect(await service.isNeeded()).toBe(true);
      const answers = await Promise.allSettled(
        ["a", "b", "c"].map((letter) =>
          service.make({
            name: letter,
            email: `${letter}@example.org`,
            password: "a long enough password",
            workspace: letter,
          }),
        ),
      );
      expect(answers.filter(({ status }) => status === "fulfilled")).toHaveLength(1);
      expect(await service.isNeeded()).toBe(false);
    });
  });
}
