import { apiErrorFrom } from "./errors";
import type { ApiError } from "./errors";
import { reportSignedOut } from "./signed-out";

/** What a response that is not OK says; an ended session is reported to the app on the way. */
export async function refusalOf(response: Response): Promise<ApiError> {
  const error = apiErrorFrom(response.status, await bodyOf(response));
  if (error.status === 401 && !new URL(response.url).pathname.startsWith("/api/auth/")) reportSignedOut();
  return error;
}

/** The JSON of a response; null where it is empty or something else (a proxy's page). */
export async function bodyOf(response: Response): Promise<unknown> {
  const text = await response.text();
  try {
    return text === "" ? null : (JSON.parse(text) as unknown);
  } catch {
    return null;
  }
}
