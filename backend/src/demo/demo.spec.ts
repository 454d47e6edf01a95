import { mkdtemp, rm } from "node:fs/promises";
import { tmpdir } from "node:os";
import { join } from "node:path";
import { mediumSchema } from "@heddle/kernels/scene";
import { afterAll, beforeAll, describe, expect, it } from "vitest";
import { column, startTestApp, type TestApp } from "../common/testing/test-app.js";
import { WelcomeDto } from "../contract/people.js";
import { MEMBER_ROLES } from "../contract/permissions.js";
import { ExamplesService } from "../examples/examples.service.js";

describe("the demo", () => {
  let server: TestApp;
  beforeAll(async () => {
    server = await startTestApp();
  });
  afterAll(() => server.close());

  it("offers each role to a browser on this machine, and a first owner of one's own beside it", async () => {
    const { body } = await server.stranger().get("/api/welcome").expect(200);
    const { demo, needsFirstOwner } = WelcomeDto.parse(body);
    expect(demo.map(({ role }) => role).sort()).toEqual([...MEMBER_ROLES].sort());
    expect(needsFirstOwner).toBe(true);
  });

  it("holds every example in a project, and media whose source is told", async () => {
    const reviewer = await server.as("reviewer");
    const projects = await reviewer.get("/api/projects").expect(200);
    const counts = column(projects, "sceneCount").map(Number);
    const examples = await new ExamplesService().list();
    expect(examples.length).toBeGreaterThanOrEqual(8);
    expect(counts.reduce((sum, count) => sum + count, 0)).toBe(examples.length);
    const media = await reviewer.get("/api/media").expect(200);
    expect(media.body.length).toBeGreaterThan(4);
    for (const medium of column(media, "medium")) expect(mediumSchema.parse(medium)).toEqual(medium);
    for (const source of column(media, "source")) expect(source).not.toBe("");
  });

  it("is not opened by claiming to be local through a proxy, nor by a foreign name for this machine", async () => {
    const ask = (headers: Record<string, string>) =>
      server.stranger().post("/api/demo-sign-in").set(headers).send({ role: "owner" });
    const claims: Record<string, string>[] = [
      { "x-forwarded-for": "127.0.0.1" },
      { "x-forwarded-for": "203.0.113.9" },
      { forwarded: "for=127.0.0.1" },
      { host: "heddle.example.org" },
      { host: "127.0.0.1.example.org:4680" },
    ];
    for (const headers of claims) {
      expect((await ask(headers)).status).toBe(404);
      expect((await server.stranger().get("/api/welcome").set(headers)).body.demo).toEqual([]);
    }
    expect((await ask({})).status).toBe(204);
  });

  it("cannot be signed in to by guessing: its passwords are random", async () => {
    for (const password of ["demo", "demo-engineer", "password12", "engineer@demo.invalid"]) {
      await server
        .stranger()
        .post("/api/auth/sign-in/email")
        .send({ email: "engineer@demo.invalid", password })
        .expect(401);
    }
  });
});

describe("without the demo", () => {
  it("nothing is seeded where it is switched off, nor later when it is switched on again", async () => {
    const dataDir = await mkdtemp(join(tmpdir(), "heddle-demo-"));
    const database = { kind: "embedded", folder: join(dataDir, "database") } as const;
    try {
      for (const demo of [false, true]) {
        const server = await startTestApp({ demo, database, dataDir }, { keepData: true });
        expect((await server.stranger().get("/api/welcome")).body).toMatchObject({
          demo: [],
          needsFirstOwner: true,
        });
        const answer = await server.stranger().post("/api/demo-sign-in").send({ role: "owner" });
        expect(answer.status).toBe(404);
        expect(answer.body.message).toContain("demo was seeded");
        await server.close();
      }
    } finally {
      await rm(dataDir, { recursive: true, force: true });
    }
  });

  it("nothing is seeded where the server is open to a network", async () => {
    const server = await startTestApp({ host: "0.0.0.0" });
    expect((await server.stranger().get("/api/welcome")).body.demo).toEqual([]);
    await server.close();
  });
});

describe("a demo that was seeded at this machine and later opened to a network", () => {
  it("is no way in any more; everything else is found again", async () => {
    const dataDir = await mkdtemp(join(tmpdir(), "heddle-demo-"));
    const database = { kind: "embedded", folder: join(dataDir, "database") } as const;
    try {
      const first = await startTestApp({ database, dataDir }, { keepData: true });
      const engineer = await first.as("engineer");
      await engineer.post("/api/projects").send({ name: "Kept" }).expect(201);
      await first.close();
      const opened = await startTestApp({ database, dataDir, host: "0.0.0.0" }, { keepData: true });
      expect((await opened.stranger().get("/api/welcome")).body.demo).toEqual([]);
      await opened.stranger().post("/api/demo-sign-in").send({ role: "owner" }).expect(404);
      await opened.close();
      const again = await startTestApp({ database, dataDir }, { keepData: true });
      const names = column(await (await again.as("manager")).get("/api/projects"), "name");
      expect(names.filter((name) => name === "Kept")).toHaveLength(1);
      expect(new Set(names).size).toBe(names.length);
      await again.close();
    } finally {
      await rm(dataDir, { recursive: true, force: true });
    }
  });
});
