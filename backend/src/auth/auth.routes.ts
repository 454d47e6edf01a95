/** The few better-auth routes that Heddle offers, with their refusals told in our words. */
import { toNodeHandler } from "better-auth/node";
import type { NextFunction, Request, Response as ExpressResponse } from "express";
import { Refusal } from "../common/refusal.js";
import { describeError } from "../common/error.filter.js";
import { ADDRESS_HEADER, PASSWORD_LENGTH, type BetterAuth } from "./better-auth.js";

/** Everything else that better-auth could serve stays shut. */
const ROUTES = new Set([
  "POST /sign-in/email",
  "POST /sign-out",
  "GET /get-session",
  "POST /change-password",
]);

const LENGTH_CODES = new Set(["PASSWORD_TOO_SHORT", "PASSWORD_TOO_LONG"]);

function refusalOf(status: number, code: string, retryAfterSeconds: string | null): Refusal {
  if (status === 429) {
    const wait = retryAfterSeconds === null ? "a minute" : `${retryAfterSeconds} seconds`;
    return new Refusal(
      "too-many",
      `Too many attempts to sign in from your address: wait ${wait} and try again.`,
    );
  }
  if (code === "INVALID_EMAIL_OR_PASSWORD") {
    return new Refusal("not-signed-in", "The e-mail address or the password is wrong.");
  }
  if (code === "INVALID_PASSWORD") return new Refusal("bad-request", "The current password is wrong.");
  if (LENGTH_CODES.has(code)) {
    return new Refusal(
      "bad-request",
      `A password has ${PASSWORD_LENGTH.min} to ${PASSWORD_LENGTH.max} characters.`,
    );
  }
  if (status === 401) {
    return new Refusal("not-signed-in", "You are not signed in, or your session has ended: sign in again.");
  }
  if (status === 404) return new Refusal("not-found", "There is no such route.");
  return new Refusal("bad-request", "Give an e-mail address and a password.");
}

async function inOurWords(answer: Response): Promise<Response> {
  if (answer.ok || (answer.status >= 300 && answer.status < 400)) return answer;
  const text = await answer.text();
  let code = "";
  try {
    const body: unknown = JSON.parse(text);
    if (typeof body === "object" && body !== null && "code" in body) code = String(body.code);
  } catch {
    // An answer without JSON has no code; its status says enough.
  }
  const told =
    answer.status >= 500
      ? describeError(new Error(`The sign-in library answered ${answer.status}: ${text.slice(0, 500)}`))
      : (() => {
          const refusal = refusalOf(answer.status, code, answer.headers.get("x-retry-after"));
          return { status: refusal.getStatus(), body: refusal.dto };
        })();
  const headers = new Headers(answer.headers);
  headers.delete("content-length");
  headers.set("content-type", "application/json");
  const wait = answer.headers.get("x-retry-after");
  if (wait !== null) headers.set("retry-after", wait);
  return new Response(JSON.stringify(told.body), { status: told.status, headers });
}

/** Express handler to mount at /api/auth before any body is parsed. */
export function authRoutes(betterAuth: BetterAuth) {
  const handle = toNodeHandler(async (request: globalThis.Request) =>
    inOurWords(await betterAuth.handler(request)),
  );
  return (request: Request, response: ExpressResponse, next: NextFunction): void => {
    if (!ROUTES.has(`${request.method} ${request.path}`)) {
      const refusal = refusalOf(404, "", null);
      response.status(404).json(refusal.dto);
      return;
    }
    request.headers[ADDRESS_HEADER] = request.socket.remoteAddress ?? "unknown";
    handle(request, response).catch(next);
  };
}
