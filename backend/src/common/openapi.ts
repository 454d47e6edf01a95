/** The API's description, made from the contract's schemas; the pages' typed client is generated from it. */
import type { INestApplication } from "@nestjs/common";
import { DocumentBuilder, SwaggerModule, type OpenAPIObject } from "@nestjs/swagger";
import type { NextFunction, Request, Response } from "express";
import { VERSION } from "../config/version.js";

/** The same text for the same routes and schemas, whatever order they were found in. */
function sorted(value: unknown): unknown {
  if (Array.isArray(value)) return value.map(sorted);
  if (typeof value !== "object" || value === null) return value;
  return Object.fromEntries(
    Object.entries(value)
      .sort(([a], [b]) => (a < b ? -1 : 1))
      .map(([key, inner]) => [key, sorted(inner)]),
  );
}

export function describeApi(app: INestApplication): OpenAPIObject {
  const settings = new DocumentBuilder()
    .setTitle("Heddle")
    .setDescription("Routes of a Heddle server. A session cookie from a sign-in route identifies the caller.")
    .setVersion(VERSION)
    .addCookieAuth("heddle.session_token")
    .build();
  const document = SwaggerModule.createDocument(app, settings, {
    operationIdFactory: (controller, method) => `${controller.replace(/Controller$/, "")}_${method}`,
  });
  return sorted(document) as OpenAPIObject;
}

/** Express handler of GET /api/openapi.json; the description is made when first asked for. */
export function serveDescription(app: INestApplication) {
  let document: OpenAPIObject | undefined;
  return (request: Request, response: Response, next: NextFunction): void => {
    if (request.method !== "GET" || request.path !== "/") {
      next();
      return;
    }
    document ??= describeApi(app);
    response.json(document);
  };
}
