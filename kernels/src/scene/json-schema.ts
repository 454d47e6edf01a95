/** The scene document's JSON Schema, derived from the one zod schema. */
import { z } from "zod";
import { sceneDocumentSchema } from "./schema.js";

/** Draft 2020-12, of what may be written: defaults may be left out. */
export const sceneJsonSchema = (): Record<string, unknown> => ({
  ...z.toJSONSchema(sceneDocumentSchema, { io: "input" }),
  title: "Heddle scene document, version 1",
});
