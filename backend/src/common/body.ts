import { json, type NextFunction, type Request, type RequestHandler, type Response } from "express";
import { describeError } from "./error.filter.js";

/** Largest body of a request: the maximum of a scene document, and room for what wraps it. */
export const BODY_LIMIT_BYTES = 2 * 1024 * 1024 + 16 * 1024;

const parse: RequestHandler = json({ limit: BODY_LIMIT_BYTES, strict: true });

/** Parses JSON bodies; one that is too large or no JSON is refused here, in our words. */
export function jsonBody(request: Request, response: Response, next: NextFunction): void {
  void parse(request, response, (error?: unknown) => {
    if (error === undefined) {
      next();
      return;
    }
    const { status, body } = describeError(error);
    response.status(status).json(body);
  });
}
