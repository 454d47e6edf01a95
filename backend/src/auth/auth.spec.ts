import { createHash } from "node:crypto";
import { afterAll, beforeAll, describe, expect, it } from "vitest";
import { startTestApp, type TestApp } from "../common/testing/test-app.js";
import { DATABASE, type Database } from "../database/database.js";
import { sessions } from "../database/schema/index.js";
import { SIGN_IN_LIMIT } from "./better-auth.js";

const OWNER = {
  name: "Ada Weaver",
  email: "Ada@Example.org",
  password: "a long enough password",
  workspace: "Bench",
};
const CREDENTIALS = { email: "ada@example.org", password: OWNER.password };

describe("an empty installation", () => {
  let server: TestApp;
  beforeAll(async () => {
    server = await startTestApp({ demo: false });
  });
  afterAll(() => server.close());

  it("asks for its first owner, makes one, and never another", async () => {
    const ada = server.stranger();
    expect((await ada.get("/api/welcome")).body).toMatchObject({ needsFirstOwner: true, demo: [] });
    await ada.post("/api/first-owner").send(OWNER).expect(204);
    const session = await ada.get("/api/session").expect(200);
    expect(session.body).toMatchObject({
      person: { name: "Ada Weaver", email: "ada@example.org" },
      workspace: { name: "Bench" },
      role: "owner",
    });
    expect(session.body.permissions).toContain("workspace.administer");
    const second = await server
      .stranger()
      .post("/api/first-owner")
      .send({ ...OWNER, email: "b@example.org" });
    expect(second.status).toBe(409);
    expect(second.body.code).toBe("wrong-state");
    expect((await ada.get("/api/welcome")).body.needsFirstOwner).toBe(false);
  });

  it("signs in by password and keeps only the hash of the session's token", async () => {
    const ada = server.stranger();
    const answer = await ada.post("/api/auth/sign-in/email").send(CREDENTIALS).expect(200);
    const cookie = [answer.headers["set-cookie"]].flat().join();
    expect(cookie).toMatch(/HttpOnly/i);
    expect(cookie).toMatch(/SameSite=Lax/i);
    await ada.get("/api/session").expect(200);
    const token = decodeURIComponent(/session_token=([^;]+)/.exec(cookie)?.[1] ?? "").split(".")[0] ?? "";
    const kept = (await server.app.get<Database>(DATABASE).select().from(sessions)).map((row) => row.token);
    expect(token.length).toBeGreaterThan(20);
    expect(kept).not.toContain(token);
    expect(kept).toContain(createHash("sha256").update(token).digest("hex"));
    await ada.post("/api/auth/sign-out").send({}).expect(200);
    await ada.get("/api/session").expect(401);
  });

  it("changes a password and ends the other sessions", async () => {
    const here = server.stranger();
    const there = server.stranger();
    await here.post("/api/auth/sign-in/email").send(CREDENTIALS).expect(200);
    await there.post("/api/auth/sign-in/email").send(CREDENTIALS).expect(200);
    const changed = { currentPassword: OWNER.password, newPassword: "another long password" };
    await here
      .post("/api/auth/change-password")
      .send({ ...changed, revokeOtherSessions: true })
      .expect(200);
    await here.get("/api/session").expect(200);
    await there.get("/api/session").expect(401);
    await here
      .post("/api/auth/change-password")
      .send({ currentPassword: changed.newPassword, newPassword: OWNER.password })
      .expect(200);
  });

  it("answers a session that has run out with 401 and a sentence", async () => {
    const ada = server.stranger();
    await ada.post("/api/auth/sign-in/email").send(CREDENTIALS).expect(200);
    await server.app
      .get<Database>(DATABASE)
      .update(sessions)
      .set({ expiresAt: new Date(Date.now() - 1000) });
    const answer = await ada.get("/api/session");
    expect(answer.status).toBe(401);
    expect(answer.body).toEqual({
      code: "not-signed-in",
      message: "You are not signed in, or your session has ended: sign in again.",
    });
  });

  it("serves no other route of the sign-in library, sign-up least of all", async () => {
    const body = { name: "Eve", email: "eve@example.org", password: "a long enough password" };
    const answer = await server.stranger().post("/api/auth/sign-up/email").send(body);
    expect(answer.status).toBe(404);
    expect(answer.body.code).toBe("not-found");
    for (const path of ["open-session", "list-sessions", "delete-user", "update-user"]) {
      expect((await server.stranger().post(`/api/auth/${path}`).send({ personId: "x" })).status).toBe(404);
    }
  });

  it("refuses a wrong password with a sentence, and too many tries from one address", async () => {
    const wrong = { ...CREDENTIALS, password: "not the password" };
    const statuses: number[] = [];
    let last: unknown;
    for (let at = 0; at <= SIGN_IN_LIMIT.attempts; at++) {
      // A claimed address of one's own changes nothing.
      const answer = await server
        .stranger()
        .post("/api/auth/sign-in/email")
        .set({ "x-forwarded-for": `203.0.113.${at}`, "x-heddle-address": `203.0.113.${at}` })
        .send(wrong);
      statuses.push(answer.status);
      last = answer.body;
    }
    expect(statuses).toContain(401);
    expect(statuses.at(-1)).toBe(429);
    expect(last).toMatchObject({ code: "too-many", message: expect.stringContaining("wait") as string });
    expect((await server.stranger().post("/api/auth/sign-in/email").send(CREDENTIALS)).status).toBe(429);
  });
});
