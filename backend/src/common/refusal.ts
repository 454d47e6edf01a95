/** Refusals: the only exceptions that a service throws on purpose. Each is an ErrorDto with its status. */
import { HttpException } from "@nestjs/common";
import type { ErrorCode, ErrorDto, ProblemDto } from "../contract/errors.js";
import { PERMISSION_WORDS, rolesThat, type Permission } from "../contract/permissions.js";

const STATUS: Record<ErrorCode, number> = {
  "bad-request": 400,
  "not-signed-in": 401,
  "not-allowed": 403,
  "not-found": 404,
  "stale-revision": 409,
  "wrong-state": 409,
  "too-large": 413,
  "scene-refused": 422,
  "too-many": 429,
  "queue-full": 429,
  internal: 500,
  unavailable: 503,
  "disk-full": 507,
};

/** A refusal with a sentence for the person; `extra` joins the body, as a stale save's current revision does. */
export class Refusal extends HttpException {
  readonly dto: ErrorDto;

  constructor(
    code: ErrorCode,
    message: string,
    extra: { problems?: ProblemDto[]; [key: string]: unknown } = {},
  ) {
    super({ code, message, ...extra }, STATUS[code]);
    const { problems } = extra;
    this.dto = problems === undefined ? { code, message } : { code, message, problems };
  }
}

export const notSignedIn = (): Refusal =>
  new Refusal("not-signed-in", "You are not signed in, or your session has ended: sign in again.");

/** @param what the noun, as in "scene" */
export const notFound = (what: string): Refusal =>
  new Refusal("not-found", `There is no such ${what} in your workspace; it may have been deleted.`);

export function notAllowed(permission: Permission): Refusal {
  const roles = rolesThat(permission).join(", ");
  return new Refusal(
    "not-allowed",
    `Your role may not ${PERMISSION_WORDS[permission]}; these may: ${roles}.`,
  );
}
