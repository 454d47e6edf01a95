import type { ErrorCode, ProblemDto } from "@heddle/backend/contract";

/** A refusal of the server, or the failure to reach it, with a sentence that can be shown as it is. */
export class ApiError extends Error {
  override readonly name = "ApiError";
  constructor(
    /** HTTP status; 0 where no answer came. */
    readonly status: number,
    readonly code: ErrorCode | "unreachable",
    message: string,
    readonly problems: readonly ProblemDto[] = [],
    /** The whole body, for refusals that carry more (a stale revision brings the one that stands). */
    readonly body: unknown = null,
  ) {
    super(message);
  }
}

/** The sentence to show for anything thrown. */
export const sentenceOf = (error: unknown): string =>
  error instanceof ApiError
    ? error.message
    : "This page failed in a way it did not expect. Reload it; if that does not help, tell the owner of the workspace.";

/** Every problem that a refusal lists. */
export const problemsOf = (error: unknown): readonly ProblemDto[] =>
  error instanceof ApiError ? error.problems : [];

/** HTTP status of a refusal; null for anything else. */
export const statusOf = (error: unknown): number | null => (error instanceof ApiError ? error.status : null);

const BY_STATUS: Record<number, [ErrorCode, string]> = {
  401: ["not-signed-in", "You are not signed in, or your session has ended. Sign in again."],
  403: ["not-allowed", "Your role does not allow this."],
  404: ["not-found", "This does not exist, or is not in your workspace."],
  413: ["too-large", "This is larger than the server takes."],
  429: ["too-many", "Too many tries in a short time. Wait a minute, then try again."],
  502: ["unavailable", "The server does not answer. Check that it runs, then try again."],
  503: ["unavailable", "The server is not ready. Try again in a moment."],
  504: ["unavailable", "The server does not answer. Check that it runs, then try again."],
};

const isRecord = (value: unknown): value is Record<string, unknown> =>
  typeof value === "object" && value !== null;

/** Reads a refusal from an answer's status and body, whoever wrote that body. */
export function apiErrorFrom(status: number, body: unknown): ApiError {
  const [code, sentence]: [ErrorCode, string] = BY_STATUS[status] ?? [
    status >= 500 ? "internal" : "bad-request",
    status >= 500
      ? "The server failed at this. What you did before is kept; try again."
      : "The server refused this request.",
  ];
  if (!isRecord(body)) return new ApiError(status, code, sentence);
  const problems = Array.isArray(body["problems"]) ? (body["problems"] as ProblemDto[]) : [];
  return new ApiError(
    status,
    typeof body["code"] === "string" ? (body["code"] as ErrorCode) : code,
    typeof body["message"] === "string" && body["message"] !== "" ? body["message"] : sentence,
    problems,
    body,
  );
}

export const unreachable = (): ApiError =>
  new ApiError(
    0,
    "unreachable",
    "The server cannot be reached. Check the connection; nothing you drew is lost.",
  );
