/** The built pages on the server's own port: files as they are, every other path the one page. */
import { existsSync } from "node:fs";
import type { ServerResponse } from "node:http";
import { join, sep } from "node:path";
import type { NestExpressApplication } from "@nestjs/platform-express";
import type { NextFunction, Request, Response } from "express";
import { PATHS } from "../config/paths.js";

const CONTENT_SECURITY_POLICY = [
  "default-src 'self'",
  // Scripts come from this origin alone. The field's drawing (regl) and array views (ndarray) compile small functions
  // of their own from text, which a browser counts as evaluation.
  "script-src 'self' 'unsafe-eval'",
  // The style engine of the pages writes its rules into style elements.
  "style-src 'self' 'unsafe-inline'",
  "img-src 'self' data: blob:",
  "font-src 'self' data:",
  // A socket of the page's own origin; older browsers do not read 'self' as that.
  "connect-src 'self' ws: wss:",
  "worker-src 'self' blob:",
  "object-src 'none'",
  "base-uri 'none'",
  "form-action 'self'",
  "frame-ancestors 'none'",
].join("; ");

export function securityHeaders(_request: Request, response: Response, next: NextFunction): void {
  response.setHeader("content-security-policy", CONTENT_SECURITY_POLICY);
  response.setHeader("x-content-type-options", "nosniff");
  response.setHeader("referrer-policy", "same-origin");
  response.setHeader("cross-origin-opener-policy", "same-origin");
  response.setHeader("cross-origin-resource-policy", "same-origin");
  next();
}

/** Paths that the server's other parts answer. */
const NOT_OURS = /^\/(api|socket\.io)(\/|$)/;

/** Serves `frontend/dist`; hashed assets for a year, the page itself never from a cache without asking. */
export function servePages(app: NestExpressApplication, folder: string = PATHS.pages): void {
  const page = join(folder, "index.html");
  const assets = join(folder, "assets") + sep;
  app.useStaticAssets(folder, {
    index: false,
    setHeaders: (response: ServerResponse, path: string) => {
      const hashed = path.startsWith(assets);
      response.setHeader("cache-control", hashed ? "public, max-age=31536000, immutable" : "no-cache");
    },
  });
  app.use((request: Request, response: Response, next: NextFunction) => {
    if (NOT_OURS.test(request.path)) {
      next();
      return;
    }
    if (request.method !== "GET" && request.method !== "HEAD") {
      response.status(405).type("text/plain").send("Only pages are here: the API is below /api.\n");
      return;
    }
    if (request.path.startsWith("/assets/")) {
      response
        .status(404)
        .type("text/plain")
        .send("There is no such file; reload the page for the current ones.\n");
      return;
    }
    if (!existsSync(page)) {
      response
        .status(503)
        .type("text/plain")
        .send("The pages are not built: run npm run build, then reload.\n");
      return;
    }
    response.setHeader("cache-control", "no-cache");
    response.sendFile(page, (error?: Error) => {
      if (error !== undefined && !response.headersSent) next(error);
    });
  });
}
