import { METHOD_METADATA, PATH_METADATA } from "@nestjs/common/constants.js";
import { ModulesContainer } from "@nestjs/core";
import { afterAll, beforeAll, describe, expect, it } from "vitest";
import { MEMBER_ROLES, may, PERMISSIONS } from "../contract/permissions.js";
import { ACCESS, type Access } from "./access.js";
import { describeApi } from "./openapi.js";
import { startTestApp, type TestApp } from "./testing/test-app.js";

interface Route {
  name: string;
  access: Access | undefined;
}

/** Every handler of every controller in the application, whatever module brought it. */
function routesOf(server: TestApp): Route[] {
  const routes: Route[] = [];
  for (const module of server.app.get(ModulesContainer).values()) {
    for (const { metatype } of module.controllers.values()) {
      if (typeof metatype !== "function") continue;
      const prototype = metatype.prototype as Record<string, unknown>;
      for (const key of Object.getOwnPropertyNames(prototype)) {
        const handler = prototype[key];
        if (typeof handler !== "function" || !Reflect.hasMetadata(METHOD_METADATA, handler)) continue;
        const access = (Reflect.getMetadata(ACCESS, handler) ?? Reflect.getMetadata(ACCESS, metatype)) as
          | Access
          | undefined;
        const path = String(Reflect.getMetadata(PATH_METADATA, handler));
        routes.push({ name: `${metatype.name}.${key} (${path})`, access });
      }
    }
  }
  return routes;
}

const OPEN_ROUTES = [
  "GET /api/health",
  "GET /api/welcome",
  "POST /api/demo-sign-in",
  "POST /api/first-owner",
];

describe("access", () => {
  let server: TestApp;
  beforeAll(async () => {
    server = await startTestApp();
  });
  afterAll(() => server.close());

  it("is declared by every route, by a word that the table knows", () => {
    const routes = routesOf(server);
    expect(routes.length).toBeGreaterThan(20);
    const known = new Set<string>(["open", "member", ...PERMISSIONS]);
    expect(routes.filter(({ access }) => access === undefined || !known.has(access))).toEqual([]);
  });

  it("is refused without a session on every route but the few that are open", async () => {
    const id = "00000000-0000-4000-8000-000000000000";
    const open: string[] = [];
    const { paths } = describeApi(server.app);
    for (const [path, methods] of Object.entries(paths)) {
      for (const method of ["get", "post", "put", "patch", "delete"] as const) {
        if (methods[method] === undefined) continue;
        const ask = server.stranger()[method](path.replace(/\{[^}]+\}/g, id));
        const answer = await ask.send({});
        if (answer.status !== 401) open.push(`${method.toUpperCase()} ${path}`);
        else expect(answer.body).toMatchObject({ code: "not-signed-in" });
      }
    }
    expect(open.sort()).toEqual(OPEN_ROUTES);
  });

  it("follows the table of roles: who may not edit is refused by name of who may", async () => {
    for (const role of MEMBER_ROLES) {
      const agent = await server.as(role);
      const answer = await agent.post("/api/projects").send({ name: `Made by ${role}` });
      expect(answer.status).toBe(may(role, "scene.edit") ? 201 : 403);
      const session = await agent.get("/api/session").expect(200);
      expect(session.body.role).toBe(role);
      if (answer.status === 403) expect(answer.body.message).toMatch(/owner, engineer/);
    }
  });
});
