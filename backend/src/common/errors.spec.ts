import { afterAll, beforeAll, describe, expect, it, vi } from "vitest";
import { ErrorDto } from "../contract/errors.js";
import { DATABASE, type Database } from "../database/database.js";
import { BODY_LIMIT_BYTES } from "./body.js";
import { describeError } from "./error.filter.js";
import { startTestApp, type TestApp } from "./testing/test-app.js";

describe("refusals", () => {
  let server: TestApp;
  let engineer: Awaited<ReturnType<TestApp["as"]>>;
  beforeAll(async () => {
    server = await startTestApp();
    engineer = await server.as("engineer");
  });
  afterAll(() => server.close());

  it("tell an oversized body, and the server lives on", async () => {
    const answer = await engineer.post("/api/projects").send({ name: "x".repeat(BODY_LIMIT_BYTES) });
    expect(answer.status).toBe(413);
    expect(ErrorDto.parse(answer.body).code).toBe("too-large");
    await engineer.get("/api/projects").expect(200);
  });

  it("tell a body that is no JSON", async () => {
    const answer = await engineer
      .post("/api/projects")
      .set("content-type", "application/json")
      .send('{"name": ');
    expect(answer.status).toBe(400);
    expect(answer.body).toEqual({
      code: "bad-request",
      message: "The body of the request could not be read as JSON.",
    });
  });

  it("name the place of what does not fit, and of an unknown key", async () => {
    const answer = await engineer.post("/api/projects").send({ name: "", colour: "red" });
    expect(answer.status).toBe(400);
    const { problems = [] } = ErrorDto.parse(answer.body);
    expect(problems.map(({ path }) => path)).toContain("name");
    expect(problems.map(({ sentence }) => sentence).join()).toContain("colour");
  });

  it("tell an unknown route", async () => {
    const answer = await engineer.get("/api/nothing/here");
    expect(answer.status).toBe(404);
    expect(answer.body).toEqual({ code: "not-found", message: "There is no such route." });
  });

  it("refuse what another web page asks for, and what a browser sends without saying from where", async () => {
    const foreign = await engineer
      .post("/api/projects")
      .set("origin", "http://evil.example")
      .send({ name: "No" });
    expect(foreign.status).toBe(403);
    expect(ErrorDto.parse(foreign.body).code).toBe("not-allowed");
    await engineer.post("/api/projects").set("sec-fetch-site", "cross-site").send({ name: "No" }).expect(403);
    await engineer.post("/api/projects").set("origin", "null").send({ name: "No" }).expect(403);
    const { port } = new URL(await server.app.getUrl());
    await engineer
      .post("/api/projects")
      .set("origin", `http://127.0.0.1:${port}`)
      .send({ name: "Yes" })
      .expect(201);
    await engineer
      .post("/api/projects")
      .set("origin", `http://127.0.0.1:1${port}`)
      .send({ name: "No" })
      .expect(403);
  });

  it("tell a full disk with 507, anything unforeseen with 500 and nothing of its cause", async () => {
    const db = server.app.get<Database>(DATABASE);
    const select = vi.spyOn(db, "transaction");
    select.mockRejectedValueOnce(
      new Error("write", { cause: Object.assign(new Error("x"), { code: "53100" }) }),
    );
    const full = await engineer.post("/api/projects").send({ name: "Full" });
    expect(full.status).toBe(507);
    expect(ErrorDto.parse(full.body).code).toBe("disk-full");
    select.mockRejectedValueOnce(new Error("password=hunter2"));
    const broken = await engineer.post("/api/projects").send({ name: "Broken" });
    expect(broken.status).toBe(500);
    expect(ErrorDto.parse(broken.body).code).toBe("internal");
    expect(JSON.stringify(broken.body)).not.toContain("hunter2");
    select.mockRestore();
    await engineer.post("/api/projects").send({ name: "Afterwards" }).expect(201);
  });

  it("tell a database out of reach with 503", () => {
    const refused = Object.assign(new Error("connect"), { code: "ECONNREFUSED" });
    expect(describeError(new Error("query", { cause: refused }))).toMatchObject({
      status: 503,
      body: { code: "unavailable" },
    });
  });
});
