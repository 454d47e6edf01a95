import { readFileSync } from "node:fs";
import { z } from "zod";
import { PATHS } from "./paths.js";

/** The version of this Heddle. */
export const VERSION: string = z
  .object({ version: z.string() })
  .parse(JSON.parse(readFileSync(PATHS.manifest, "utf8"))).version;
