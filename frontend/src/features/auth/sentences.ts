import { ApiError, sentenceOf } from "../../lib/api";

/** What to tell someone whose sign-in was refused. */
export function signInSentence(error: unknown): string {
  if (!(error instanceof ApiError)) return sentenceOf(error);
  if (error.status === 401 || error.status === 403) {
    return "This e-mail address and password do not belong together. Check both; passwords are case-sensitive.";
  }
  if (error.status === 404) return "This way in is not offered here.";
  return error.message;
}
