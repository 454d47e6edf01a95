import { afterAll, beforeAll, describe, expect, it } from "vitest";
import { z } from "zod";
import { column, startTestApp, type TestApp } from "../common/testing/test-app.js";
import { ProjectDto } from "../contract/projects.js";
import { ExampleDto, SceneSummaryDto } from "../contract/scenes.js";

describe("projects", () => {
  let server: TestApp;
  let engineer: Awaited<ReturnType<TestApp["as"]>>;
  let owner: Awaited<ReturnType<TestApp["as"]>>;
  beforeAll(async () => {
    server = await startTestApp();
    engineer = await server.as("engineer");
    owner = await server.as("owner");
  });
  afterAll(() => server.close());

  it("start empty or with an example's scene, and answer as the contract says", async () => {
    const empty = await engineer.post("/api/projects").send({ name: "  Empty " }).expect(201);
    expect(ProjectDto.parse(empty.body)).toMatchObject({ name: "Empty", sceneCount: 0, lastRunState: null });
    const [example] = z
      .tuple([ExampleDto], ExampleDto)
      .parse((await engineer.get("/api/examples").expect(200)).body);
    const made = await engineer
      .post("/api/projects")
      .send({ name: "With", example: example.name })
      .expect(201);
    expect(made.body.sceneCount).toBe(1);
    const scenes = await owner.get(`/api/projects/${made.body.id}/scenes`).expect(200);
    const [scene] = z.tuple([SceneSummaryDto]).parse(scenes.body);
    expect(scene.document).toEqual(example.document);
    expect(scene.widthMm).toBeGreaterThan(0);
    const unknown = await engineer.post("/api/projects").send({ name: "No", example: "../../etc" });
    expect(unknown.status).toBe(404);
  });

  it("give an example's picture as one", async () => {
    const [example] = z.tuple([ExampleDto], ExampleDto).parse((await engineer.get("/api/examples")).body);
    const picture = await engineer.get(`/api/examples/${example.name}/thumbnail.png`).expect(200);
    expect(picture.headers["content-type"]).toBe("image/png");
    await engineer.get("/api/examples/..%2f..%2fbackend/thumbnail.png").expect(404);
    await server.stranger().get(`/api/examples/${example.name}/thumbnail.png`).expect(401);
  });

  it("are renamed by engineers, deleted by the owner alone, and tell what was done", async () => {
    const made = await engineer.post("/api/projects").send({ name: "Old" }).expect(201);
    const path = `/api/projects/${made.body.id}`;
    const renamed = await engineer.patch(path).send({ name: "New" }).expect(200);
    expect(renamed.body).toMatchObject({ name: "New", notes: "" });
    await engineer.patch(path).send({ notes: "why" }).expect(200);
    await engineer.post(`${path}/scenes`).send({ name: "Sheet" }).expect(201);
    const activity = await owner.get(`${path}/activity`).expect(200);
    expect(column(activity, "sentence")).toEqual([
      'added the scene "Sheet"',
      'renamed the project from "Old" to "New"',
      'made the project "Old"',
    ]);
    expect(activity.body[0].who.name).toBe("Demo engineer");
    await engineer.delete(path).expect(403);
    await owner.delete(path).expect(204);
    await owner.get(path).expect(404);
  });

  it("tell the workspace's members", async () => {
    const members = await engineer.get("/api/workspace/members").expect(200);
    expect(column(members, "role").sort()).toEqual(["engineer", "manager", "owner", "reviewer"]);
  });
});
