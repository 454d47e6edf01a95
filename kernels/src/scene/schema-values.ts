/** The building blocks of the scene schema: numbers with a range, ids, lengths, points. */
import { z } from "zod";
import { MAXIMA } from "./limits.js";

export const FORMAT = "heddle-scene";
export const CURRENT_VERSION = 1;

/** What TypeScript derives from `lengthSchema`: millimetres, or an expression over the parameters that gives them. */
export type Length = number | string;

/** A coordinate or length in mm, or an expression over the scene's parameters; kept as written. */
export const lengthSchema = z.union([
  z.number().min(-MAXIMA.lengthMm).max(MAXIMA.lengthMm),
  z.string().min(1).max(MAXIMA.expressionLength),
]);

export const pointSchema = z.tuple([lengthSchema, lengthSchema]);

export const idSchema = z
  .string()
  .regex(/^[a-z0-9-]{1,40}$/, "An id is 1 to 40 characters of a–z, 0–9 and the hyphen.");

export const nameSchema = z.string().max(MAXIMA.nameLength);

/** Degrees, counter-clockwise from +x. */
export const angleSchema = z.number().min(-3600).max(3600);

export const frequencyGHzSchema = z.number().positive().max(MAXIMA.frequencyGHz);
