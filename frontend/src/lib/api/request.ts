import { unreachable } from "./errors";
import { bodyOf, refusalOf } from "./refusals";

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

/**
 * One request whose answer is judged by a schema, for what the API's description leaves open.
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
  if (!response.ok) throw await refusalOf(response);
  const content = await bodyOf(response);
  return answer?.parse(content);
}
