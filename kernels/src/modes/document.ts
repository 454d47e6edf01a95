/** The document that `modes` writes. */
import { z } from "zod";
import { limitResultSchema } from "../scene/index.js";

const q = z.number().nullable();

export const modesDocumentSchema = z.strictObject({
  format: z.literal("heddle-modes"),
  version: z.literal(1),
  polarization: z.enum(["TMz", "TEz"]),
  grid: z.strictObject({
    /** Cells of the scene's mesh. */
    nx: z.number().int(),
    ny: z.number().int(),
    dxMm: z.number(),
    dyMm: z.number(),
    /** Legs of the elements and unknowns of the coarser and of the finer mesh. */
    legsMm: z.tuple([z.number(), z.number()]),
    unknowns: z.tuple([z.number().int(), z.number().int()]),
  }),
  /** In rising order; a degenerate mode stands as often as it occurs. */
  modes: z.array(
    z.strictObject({
      /** Extrapolated from the two meshes. */
      cutoffGHz: z.number(),
      /** The full difference of the two meshes. */
      uncertaintyGHz: z.number(),
      /** null where the scene gives no `wallConductivity` or the integral over the walls diverges. */
      wallQ: q,
      /** null where nothing in the section is lossy. */
      mediaQ: q,
    }),
  ),
  /** Of the scene's limits, those on cut-off frequencies; margins in GHz. */
  limits: z.array(limitResultSchema).optional(),
});

export type ModesDocument = z.output<typeof modesDocumentSchema>;
