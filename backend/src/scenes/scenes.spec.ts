import { afterAll, beforeAll, describe, expect, it } from "vitest";
import { column, startTestApp, type TestApp } from "../common/testing/test-app.js";
import { emptyScene } from "./empty-scene.js";

type Agent = Awaited<ReturnType<TestApp["as"]>>;

describe("scenes and their revisions", () => {
  let server: TestApp;
  let engineer: Agent;
  let manager: Agent;
  let projectId: string;
  beforeAll(async () => {
    server = await startTestApp();
    engineer = await server.as("engineer");
    manager = await server.as("manager");
    const project = await engineer.post("/api/projects").send({ name: "Scenes" }).expect(201);
    projectId = project.body.id as string;
  });
  afterAll(() => server.close());

  const make = async (
    name: string,
  ): Promise<{ id: string; document: Record<string, unknown>; sha256: string }> => {
    const made = await engineer.post(`/api/projects/${projectId}/scenes`).send({ name }).expect(201);
    return made.body as { id: string; document: Record<string, unknown>; sha256: string };
  };

  it("keeps every save as a revision and gives each back", async () => {
    const scene = await make("First");
    const notes = { ...scene.document, notes: "wider slot" };
    const saved = await engineer
      .put(`/api/scenes/${scene.id}`)
      .send({ baseRevision: 1, document: notes })
      .expect(200);
    expect(saved.body).toMatchObject({ revision: 2, document: { notes: "wider slot" }, name: "First" });
    expect(saved.body.sha256).not.toBe(scene.sha256);
    const revisions = await manager.get(`/api/scenes/${scene.id}/revisions`).expect(200);
    expect(column(revisions, "revision")).toEqual([2, 1]);
    const first = await manager.get(`/api/scenes/${scene.id}/revisions/1`).expect(200);
    expect(first.body.document).toEqual(scene.document);
    expect(first.body.sha256).toBe(scene.sha256);
    await manager.get(`/api/scenes/${scene.id}/revisions/3`).expect(404);
    await manager.get(`/api/scenes/${scene.id}/revisions/x`).expect(400);
  });

  it("makes no revision of a save that changes nothing", async () => {
    const scene = await make("Same");
    const again = await engineer
      .put(`/api/scenes/${scene.id}`)
      .send({ baseRevision: 1, document: scene.document })
      .expect(200);
    expect(again.body.revision).toBe(1);
  });

  it("refuses a save over a newer revision, says what changed, and keeps both", async () => {
    const scene = await make("Contended");
    const theirs = { ...scene.document, polarization: "TEz" };
    const mine = { ...scene.document, notes: "mine" };
    await engineer.put(`/api/scenes/${scene.id}`).send({ baseRevision: 1, document: theirs }).expect(200);
    const stale = await engineer.put(`/api/scenes/${scene.id}`).send({ baseRevision: 1, document: mine });
    expect(stale.status).toBe(409);
    expect(stale.body).toMatchObject({
      code: "stale-revision",
      current: { revision: 2, document: { polarization: "TEz" } },
      changes: [{ path: "polarization" }],
    });
    expect(stale.body.message).toContain("Demo engineer saved revision 2");
    const copy = await engineer
      .post(`/api/scenes/${scene.id}/copies`)
      .send({ name: "Contended, mine", document: mine })
      .expect(201);
    expect(copy.body).toMatchObject({ name: "Contended, mine", revision: 1, document: { notes: "mine" } });
    const names = column(await engineer.get(`/api/projects/${projectId}/scenes`).expect(200), "name");
    expect(names).toEqual(expect.arrayContaining(["Contended", "Contended, mine"]));
  });

  it("lets exactly one of two saves at the same time win", async () => {
    const scene = await make("Race");
    const answers = await Promise.all(
      ["a", "b", "c", "d"].map((notes) =>
        engineer
          .put(`/api/scenes/${scene.id}`)
          .send({ baseRevision: 1, document: { ...scene.document, notes } }),
      ),
    );
    expect(answers.map(({ status }) => status).sort()).toEqual([200, 409, 409, 409]);
    expect((await engineer.get(`/api/scenes/${scene.id}`)).body.revision).toBe(2);
  });

  it("keeps a drawing that cannot run yet, but refuses it as an import with every problem", async () => {
    const scene = await make("In progress");
    const unfinished = {
      ...scene.document,
      background: "nowhere",
      sources: [{ kind: "line", id: "wire", x: 900, y: 10 }],
    };
    const saved = await engineer
      .put(`/api/scenes/${scene.id}`)
      .send({ baseRevision: 1, document: unfinished });
    expect(saved.status).toBe(200);
    expect(saved.body.document.sources).toHaveLength(1);
    const imported = await engineer.post(`/api/projects/${projectId}/scenes`).send({ document: unfinished });
    expect(imported.status).toBe(422);
    expect(imported.body.code).toBe("scene-refused");
    expect(column({ body: imported.body.problems }, "path")).toEqual(expect.arrayContaining(["background"]));
    expect(imported.body.problems.length).toBeGreaterThan(1);
  });

  it("refuses what is no scene document at every door", async () => {
    const scene = await make("Shape");
    const broken = { ...scene.document, sektion: 1, polarization: "TMx" };
    const saved = await engineer.put(`/api/scenes/${scene.id}`).send({ baseRevision: 1, document: broken });
    expect(saved.status).toBe(422);
    expect(column({ body: saved.body.problems }, "path").join()).toContain("polarization");
    expect((await engineer.get(`/api/scenes/${scene.id}`)).body.revision).toBe(1);
  });

  it("exports what it imports", async () => {
    const document = { ...emptyScene('Vented "pod" – σ'), notes: "kept" };
    const made = await engineer.post(`/api/projects/${projectId}/scenes`).send({ document }).expect(201);
    const file = await manager.get(`/api/scenes/${made.body.id}/document`).expect(200);
    expect(file.headers["content-disposition"]).toContain("attachment");
    expect(file.headers["content-disposition"]).toContain("%CF%83");
    expect(file.body).toEqual(made.body.document);
    const again = await engineer
      .post(`/api/projects/${projectId}/scenes`)
      .send({ document: file.body })
      .expect(201);
    expect(again.body.sha256).toBe(made.body.sha256);
  });

  it("refuses edits to those who only watch, and finds nothing for those of another workspace", async () => {
    const scene = await make("Guarded");
    const refused = await manager
      .put(`/api/scenes/${scene.id}`)
      .send({ baseRevision: 1, document: scene.document });
    expect(refused.status).toBe(403);
    expect(refused.body.code).toBe("not-allowed");
    expect(refused.body.message).toContain("engineer");
    await (await server.as("reviewer")).post(`/api/projects/${projectId}/scenes`).send({}).expect(403);
    await engineer.delete(`/api/scenes/${scene.id}`).expect(403);

    const outsider = server.stranger();
    await outsider.get(`/api/scenes/${scene.id}`).expect(401);
    await outsider
      .post("/api/first-owner")
      .send({ name: "O", email: "o@example.org", password: "a long enough password", workspace: "Other" })
      .expect(204);
    for (const path of ["", "/revisions", "/revisions/1", "/document"]) {
      await outsider.get(`/api/scenes/${scene.id}${path}`).expect(404);
    }
    const body = { baseRevision: 1, document: scene.document };
    await outsider.put(`/api/scenes/${scene.id}`).send(body).expect(404);
    await outsider
      .post(`/api/scenes/${scene.id}/copies`)
      .send({ name: "x", document: scene.document })
      .expect(404);
    await outsider.delete(`/api/scenes/${scene.id}`).expect(404);
    await outsider.get(`/api/projects/${projectId}`).expect(404);
    await outsider.get(`/api/projects/${projectId}/scenes`).expect(404);
    await outsider.get(`/api/projects/${projectId}/activity`).expect(404);
    await outsider.get("/api/scenes/not-an-id").expect(404);
    expect((await outsider.get("/api/projects")).body).toEqual([]);

    await (await server.as("owner")).delete(`/api/scenes/${scene.id}`).expect(204);
    await engineer.get(`/api/scenes/${scene.id}`).expect(404);
  });
});
