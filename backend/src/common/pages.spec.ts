import { mkdir, mkdtemp, rm, writeFile } from "node:fs/promises";
import { tmpdir } from "node:os";
import { join } from "node:path";
import { Controller, Get, Module } from "@nestjs/common";
import { NestFactory } from "@nestjs/core";
import type { NestExpressApplication } from "@nestjs/platform-express";
import request from "supertest";
import { afterAll, beforeAll, describe, expect, it } from "vitest";
import { securityHeaders, servePages } from "./pages.js";

@Controller("thing")
class ThingController {
  @Get()
  thing() {
    return { thing: true };
  }
}

@Module({ controllers: [ThingController] })
class ThingModule {}

describe("the pages", () => {
  let folder: string;
  let app: NestExpressApplication;
  beforeAll(async () => {
    folder = await mkdtemp(join(tmpdir(), "heddle-pages-"));
    // eslint-disable-next-line @typescript-eslint/no-unsafe-class-instance-assignment -- Nest declares its options as a class and asks for any object of that shape
    app = await NestFactory.create<NestExpressApplication>(ThingModule, { logger: false });
    app.setGlobalPrefix("api");
    app.use(securityHeaders);
    servePages(app, folder);
    await app.init();
  });
  afterAll(async () => {
    await app.close();
    await rm(folder, { recursive: true, force: true });
  });
  const get = (path: string) => request(app.getHttpServer()).get(path);

  it("are said to be missing until they are built, then served at every address of theirs", async () => {
    const missing = await get("/projects");
    expect(missing.status).toBe(503);
    expect(missing.text).toContain("npm run build");
    await mkdir(join(folder, "assets"));
    await writeFile(join(folder, "index.html"), "<!doctype html><title>page</title>");
    await writeFile(join(folder, "assets", "index-abc123.js"), "export {};");
    for (const path of ["/", "/projects", "/scenes/some-id"]) {
      const page = await get(path).expect(200);
      expect(page.text).toContain("<title>page</title>");
      expect(page.headers["cache-control"]).toBe("no-cache");
    }
  });

  it("let a browser keep hashed files for good, and never take a page for a missing one", async () => {
    const file = await get("/assets/index-abc123.js").expect(200);
    expect(file.headers["cache-control"]).toContain("immutable");
    expect(file.headers["content-type"]).toContain("javascript");
    await get("/assets/index-old.js").expect(404);
    await get("/assets/../../secret").expect(404);
    await request(app.getHttpServer()).post("/projects").expect(405);
  });

  it("leave the API alone", async () => {
    expect((await get("/api/thing").expect(200)).body).toEqual({ thing: true });
    await get("/api/other").expect(404);
  });

  it("may not be framed, sniffed, or load anything from elsewhere", async () => {
    for (const path of ["/", "/api/thing", "/api/other"]) {
      const { headers } = await get(path);
      expect(headers["content-security-policy"]).toContain("frame-ancestors 'none'");
      expect(headers["content-security-policy"]).toContain("default-src 'self'");
      expect(headers["x-content-type-options"]).toBe("nosniff");
    }
  });
});
