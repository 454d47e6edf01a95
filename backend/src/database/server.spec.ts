/** The whole server on PostgreSQL: sign-in, a save, a stale save, and everything found again by the next server. */
import { describe, expect, it } from "vitest";
import { column, startTestApp } from "../common/testing/test-app.js";
import { postgresSource, startPostgres } from "./testing/postgres.js";

describe.skipIf(postgresSource() === null)("the server on PostgreSQL", () => {
  it("does what it does on the embedded database, and finds it again", async () => {
    const postgres = await startPostgres();
    const database = { kind: "postgres", url: postgres.url } as const;
    try {
      const first = await startTestApp({ database });
      const engineer = await first.as("engineer");
      const project = await engineer.post("/api/projects").send({ name: "Kept" }).expect(201);
      const scenes = `/api/projects/${String(project.body.id)}/scenes`;
      const scene = await engineer.post(scenes).send({ name: "Sheet" }).expect(201);
      const save = (notes: string) =>
        engineer
          .put(`/api/scenes/${String(scene.body.id)}`)
          .send({ baseRevision: 1, document: { ...(scene.body.document as object), notes } });
      expect((await save("mine")).status).toBe(200);
      expect((await save("late")).status).toBe(409);
      await first
        .stranger()
        .post("/api/auth/sign-in/email")
        .send({ email: "engineer@demo.invalid", password: "not the password" })
        .expect(401);
      await first.close();

      const second = await startTestApp({ database });
      const manager = await second.as("manager");
      expect(column(await manager.get("/api/projects"), "name")).toContain("Kept");
      expect((await manager.get(`/api/scenes/${String(scene.body.id)}`)).body).toMatchObject({
        revision: 2,
        document: { notes: "mine" },
      });
      await second.close();
    } finally {
      await postgres.stop();
    }
  });
});
