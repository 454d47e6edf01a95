import { z } from "zod";

/** GET /api/media -> MediumDto[]: the workspace's library. `medium` is a Medium of the scene contract. */
export const MediumDto = z
  .object({
    id: z.string(),
    /** The medium as scenes carry it; judged by the kernels' schema. */
    medium: z.record(z.string(), z.unknown()),
    /** Where the figures come from: a data sheet, a handbook, "invented for the demo". */
    source: z.string(),
    updatedAt: z.iso.datetime(),
  })
  .meta({ id: "LibraryMedium" });
export type MediumDto = z.infer<typeof MediumDto>;

/** POST /api/media -> 201; PUT /api/media/:mediumId -> 200; DELETE -> 204 */
export const SaveMediumBody = z
  .strictObject({
    medium: z.record(z.string(), z.unknown()),
    source: z.string().trim().min(1, "Say where the figures come from.").max(2_000),
  })
  .meta({ id: "SaveMediumBody" });
