/** Published and independently computed facts, kept beside the tests with their sources. */
import { readFileSync } from "node:fs";
import { z } from "zod";

const entrySchema = z.object({
  id: z.string(),
  geometry: z.record(z.string(), z.unknown()),
  expected: z.record(z.string(), z.unknown()),
  tolerance: z.record(z.string(), z.unknown()),
  source: z.string(),
});
const fileSchema = z.object({ entries: z.array(entrySchema) });
export type ReferenceEntry = z.output<typeof entrySchema>;

export const complexSchema = z.object({ re: z.number(), im: z.number() });

/** Entries of `reference/<name>.json`. */
export function referenceEntries(name: string): ReferenceEntry[] {
  const text = readFileSync(new URL(`../reference/${name}.json`, import.meta.url), "utf8");
  return fileSchema.parse(JSON.parse(text)).entries;
}

export function referenceEntry(name: string, id: string): ReferenceEntry {
  const entry = referenceEntries(name).find((candidate) => candidate.id === id);
  if (!entry) throw new Error(`reference/${name}.json has no entry "${id}".`);
  return entry;
}

/** A number at a key of an entry's geometry or expectation. */
export const numberAt = (values: Record<string, unknown>, key: string): number =>
  z.number().parse(values[key]);
