import {
  Catch,
  HttpException,
  Logger,
  NotFoundException,
  type ArgumentsHost,
  type ExceptionFilter,
} from "@nestjs/common";
import type { Request, Response } from "express";
import { ErrorDto, type ErrorCode } from "../contract/errors.js";
import { Refusal } from "./refusal.js";
import { isDiskFull, isOutOfReach } from "./failures.js";

const CODE_BY_STATUS: Record<number, ErrorCode> = {
  400: "bad-request",
  401: "not-signed-in",
  403: "not-allowed",
  404: "not-found",
  413: "too-large",
  429: "too-many",
  503: "unavailable",
};

const logger = new Logger("Errors");

/** What body-parser throws. */
const isHttpError = (error: unknown): error is Error & { status: number; type: string } =>
  error instanceof Error && "status" in error && typeof error.status === "number" && "type" in error;

interface Told {
  status: number;
  /** An ErrorDto, possibly with more beside it. */
  body: ErrorDto;
}

const told = (refusal: Refusal): Told => ({
  status: refusal.getStatus(),
  body: refusal.getResponse() as ErrorDto,
});

/**
 * Turns whatever was thrown into a status and an ErrorDto; what nobody foresaw is logged and told as "internal"
 * without its message.
 */
export function describeError(error: unknown): Told {
  if (error instanceof Refusal) return told(error);
  if (isHttpError(error)) {
    if (error.type === "entity.too.large") {
      return told(new Refusal("too-large", "The request is larger than the 2 MB that a scene may have."));
    }
    if (error.status < 500) {
      return told(new Refusal("bad-request", "The body of the request could not be read as JSON."));
    }
  }
  if (error instanceof HttpException && error.getStatus() < 500) {
    const status = error.getStatus();
    if (error instanceof NotFoundException) return told(new Refusal("not-found", "There is no such route."));
    const code = CODE_BY_STATUS[status] ?? "bad-request";
    return { status, body: { code, message: error.message } };
  }
  if (isDiskFull(error)) {
    logger.error("The disk that holds the data folder or the database is full.");
    return told(
      new Refusal(
        "disk-full",
        "The server's disk is full, so nothing was saved: free some space and try again.",
      ),
    );
  }
  if (isOutOfReach(error)) {
    logger.error(error);
    return told(
      new Refusal("unavailable", "The database cannot be reached at the moment: try again shortly."),
    );
  }
  logger.error(error instanceof Error ? (error.stack ?? error.message) : error);
  if (error instanceof Error && error.cause !== undefined) logger.error(error.cause);
  return told(new Refusal("internal", "Something went wrong on the server; it was logged. Try again."));
}

/** Answers every HTTP error as an ErrorDto. */
@Catch()
export class ErrorFilter implements ExceptionFilter {
  catch(error: unknown, host: ArgumentsHost): void {
    const http = host.switchToHttp();
    const response = http.getResponse<Response>();
    const { status, body } = describeError(error);
    if (response.headersSent) {
      http.getRequest<Request>().destroy();
      return;
    }
    response.status(status).json(body);
  }
}
