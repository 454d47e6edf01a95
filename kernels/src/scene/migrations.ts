/** Numbered migrations: a document of an older version is brought forward one version at a time. */
import type { Problem } from "./schema.js";
import { CURRENT_VERSION, FORMAT } from "./schema-values.js";

/** Brings a document of version `from` to version `from + 1`. It gets a copy and may change it. */
export interface Migration {
  from: number;
  migrate: (document: Record<string, unknown>) => Record<string, unknown>;
}

/** In order. Version 1 is the first, so there is nothing to bring forward yet. */
export const MIGRATIONS: readonly Migration[] = [];

export type Migrated = { ok: true; document: unknown } | { ok: false; problems: Problem[] };

const isObject = (value: unknown): value is Record<string, unknown> =>
  typeof value === "object" && value !== null && !Array.isArray(value);

const refused = (path: string, sentence: string): Migrated => ({ ok: false, problems: [{ path, sentence }] });

/**
 * Checks format and version and migrates up to `current`. `migrations` and `current` can be injected, so that the
 * mechanism is proved before it is needed.
 */
export const migrateDocument = (
  document: unknown,
  migrations: readonly Migration[] = MIGRATIONS,
  current: number = CURRENT_VERSION,
): Migrated => {
  if (!isObject(document))
    return refused("", "The document is not an object; a scene starts with { and ends with }.");
  // A document that is plainly something else gets one sentence, not a list of all it lacks.
  if (document.format !== FORMAT && !("section" in document))
    return refused("format", `This is no scene document; "format" must be "${FORMAT}".`);
  const version = document.version;
  // The schema says what is wrong with a version that is no number, along with everything else.
  if (typeof version !== "number" || !Number.isInteger(version) || version < 0) return { ok: true, document };
  if (version > current)
    return refused(
      "version",
      `The document has version ${String(version)}, but this program reads versions up to ${String(current)}; update the program.`,
    );
  let migrated = document;
  for (let at = version; at < current; at++) {
    const step = migrations.find((migration) => migration.from === at);
    if (step === undefined)
      return refused(
        "version",
        `Documents of version ${String(at)} cannot be brought forward to ${String(current)}.`,
      );
    migrated = { ...step.migrate(structuredClone(migrated)), version: at + 1 };
  }
  return { ok: true, document: migrated };
};
