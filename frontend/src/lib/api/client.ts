import { apiErrorFrom, unreachable } from "./errors";
import { reportSignedOut } from "./signed-out";

type Method = "GET" | "POST" | "PUT" | "PATCH" | "DELETE";

interface Schema<T> {
  parse(value: unknown): T;
}

interface RequestOptions<T> {
  body?: unknown;
  /** Judges the answer; left out, the answer's body is dropped. */
  answer?: Schema<T>;
  signal?: AbortSignal;
}

async function bodyOf(response: Response): Promise<unknown> {
  const text = await response.text();
  try {
    return text === "" ? null : (JSON.parse(text) as unknown);
  } catch {
    return null;
  }
}

/**
 * One request to the server's API.
 * @throws {ApiError} with a sentence to show, for a refusal or an unreachable server
 */
export async function request<T>(
  method: Method,
  path: string,
  options: RequestOptions<T> & { answer: Schema<T> },
): Promise<T>;
export async function request(
  method: Method,
  path: string,
  options?: RequestOptions<never>,
): Promise<undefined>;
export async function request<T>(
  method: Method,
  path: string,
  { body, answer, signal }: RequestOptions<T> = {},
): Promise<T | undefined> {
  let response: Response;
  try {
    response = await fetch(path, {
      method,
      credentials: "same-origin",
      headers: {
        accept: "application/json",
        ...(body === undefined ? {} : { "content-type": "application/json" }),
      },
      ...(body === undefined ? {} : { body: JSON.stringify(body) }),
      ...(signal === undefined ? {} : { signal }),
    });
  } catch (error) {
    if (signal?.aborted === true) throw error;
    throw unreachable();
  }
  const content = await bodyOf(response);
  if (!response.ok) {
    const error = apiErrorFrom(response.status, content);
    if (error.status === 401 && !path.startsWith("/api/auth/")) reportSignedOut();
    throw error;
  }
  return answer?.parse(content);
}
