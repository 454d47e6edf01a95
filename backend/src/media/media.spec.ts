import { afterAll, beforeAll, describe, expect, it } from "vitest";
import { column, startTestApp, type TestApp } from "../common/testing/test-app.js";

describe("the library of media", () => {
  let server: TestApp;
  let engineer: Awaited<ReturnType<TestApp["as"]>>;
  beforeAll(async () => {
    server = await startTestApp();
    engineer = await server.as("engineer");
  });
  afterAll(() => server.close());

  it("adds, changes and removes a medium, its defaults filled in", async () => {
    const medium = { id: "resin", name: "Resin", relativePermittivity: 3.2 };
    const made = await engineer
      .post("/api/media")
      .send({ medium, source: "data sheet, issue 4" })
      .expect(201);
    expect(made.body).toMatchObject({ medium: { ...medium, conductivity: 0, magneticLoss: 0 } });
    const changed = { medium: { ...medium, conductivity: 0.01 }, source: "measured" };
    const put = await engineer.put(`/api/media/${made.body.id}`).send(changed).expect(200);
    expect(put.body).toMatchObject({ medium: { conductivity: 0.01 }, source: "measured" });
    const ids = async () => column(await engineer.get("/api/media").expect(200), "id");
    expect(await ids()).toContain(made.body.id);
    await engineer.delete(`/api/media/${made.body.id}`).expect(204);
    expect(await ids()).not.toContain(made.body.id);
    await engineer.delete(`/api/media/${made.body.id}`).expect(404);
    await engineer.put(`/api/media/${made.body.id}`).send(changed).expect(404);
  });

  it("refuses what is no medium, by place", async () => {
    const bad = { id: "bad", name: "Bad", relativePermittivity: 0.5, conductivity: -1 };
    const answer = await engineer.post("/api/media").send({ medium: bad, source: "nowhere" });
    expect(answer.status).toBe(400);
    expect(column({ body: answer.body.problems }, "path").sort()).toEqual([
      "conductivity",
      "relativePermittivity",
    ]);
    await engineer.post("/api/media").send({ medium: {}, source: "x" }).expect(400);
    await engineer
      .post("/api/media")
      .send({ medium: { id: "x", name: "X" }, source: " " })
      .expect(400);
  });

  it("refuses a built-in id and one that is taken", async () => {
    const air = await engineer.post("/api/media").send({ medium: { id: "air", name: "Air" }, source: "x" });
    expect(air.status).toBe(400);
    expect(air.body.message).toContain("built in");
    const twice = { medium: { id: "twice", name: "Twice" }, source: "x" };
    await engineer.post("/api/media").send(twice).expect(201);
    const again = await engineer.post("/api/media").send(twice);
    expect(again.status).toBe(400);
    expect(again.body.problems).toEqual([
      { path: "id", sentence: expect.stringContaining("twice") as string },
    ]);
  });

  it("is read by every member and changed by those who edit scenes", async () => {
    const reviewer = await server.as("reviewer");
    await reviewer.get("/api/media").expect(200);
    await reviewer
      .post("/api/media")
      .send({ medium: { id: "no", name: "No" }, source: "x" })
      .expect(403);
  });
});
