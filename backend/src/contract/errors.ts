/** The one shape of a refusal, on every route and as the answer of every socket event. */
import { z } from "zod";

export const ERROR_CODES = [
  "bad-request",
  "scene-refused",
  "not-signed-in",
  "not-allowed",
  "not-found",
  "stale-revision",
  "too-large",
  "too-many",
  "queue-full",
  "wrong-state",
  "disk-full",
  "unavailable",
  "internal",
] as const;

export const ProblemDto = z.object({ path: z.string(), sentence: z.string() }).meta({ id: "Problem" });
export type ProblemDto = z.infer<typeof ProblemDto>;

export const ErrorDto = z
  .object({
    code: z.enum(ERROR_CODES),
    /** One sentence: what was wrong and what to do. */
    message: z.string(),
    problems: z.array(ProblemDto).optional(),
  })
  .meta({ id: "Error" });
export type ErrorDto = z.infer<typeof ErrorDto>;
export type ErrorCode = ErrorDto["code"];
