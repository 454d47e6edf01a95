/** What differs between two scenes, entry by entry, in sentences: shown where a save meets a newer revision. */
import { canonicalJson } from "./hash.js";
import type { Scene } from "./schema.js";

export interface SceneChange {
  /** The part that differs: `section`, `paint.slot-cover`, `media.foam`; lists are addressed by id, not by index. */
  path: string;
  kind: "added" | "removed" | "changed";
  sentence: string;
}

type ListName = "parameters" | "media" | "paint" | "sources" | "ports" | "probes" | "limits";

const LIST_NOUNS: Readonly<Record<ListName, string>> = {
  parameters: "parameter",
  media: "medium",
  paint: "patch",
  sources: "source",
  ports: "port",
  probes: "probe",
  limits: "limit",
};

const VALUE_NAMES = {
  name: "name",
  notes: "notes",
  polarization: "polarization",
  section: "section's size",
  band: "band",
  mesh: "mesh",
  background: "background",
  outOfPlane: "meaning of z",
  wallConductivity: "walls' conductivity",
  edges: "edges",
  stop: "stop condition",
} as const satisfies Partial<Record<keyof Scene, string>>;

type Entry = Scene[ListName][number];

const keyOf = (entry: Entry): string => ("id" in entry ? entry.id : entry.name);

const same = (a: unknown, b: unknown): boolean =>
  a === b || (a !== undefined && b !== undefined && canonicalJson(a) === canonicalJson(b));

const shortText = (value: unknown): string => {
  const text =
    value === undefined ? "nothing" : typeof value === "string" ? `"${value}"` : canonicalJson(value);
  return text.length > 60 ? `${text.slice(0, 57)}…` : text;
};

const changedKeys = (a: Entry, b: Entry): string[] => {
  const from = a as Readonly<Record<string, unknown>>;
  const to = b as Readonly<Record<string, unknown>>;
  return [...new Set([...Object.keys(from), ...Object.keys(to)])].filter((key) => !same(from[key], to[key]));
};

const describeEntry = (list: ListName, entry: Entry): string => {
  const noun = list === "paint" && "kind" in entry ? entry.kind : LIST_NOUNS[list];
  return `The ${noun} "${keyOf(entry)}"`;
};

const listChanges = (list: ListName, a: readonly Entry[], b: readonly Entry[]): SceneChange[] => {
  const before = new Map(a.map((entry) => [keyOf(entry), entry]));
  const after = new Map(b.map((entry) => [keyOf(entry), entry]));
  const changes: SceneChange[] = [];
  for (const [key, entry] of before) {
    const path = `${list}.${key}`;
    const now = after.get(key);
    if (now === undefined)
      changes.push({ path, kind: "removed", sentence: `${describeEntry(list, entry)} was removed.` });
    else if (!same(entry, now))
      changes.push({
        path,
        kind: "changed",
        sentence: `${describeEntry(list, now)} changed in ${changedKeys(entry, now).join(", ")}.`,
      });
  }
  for (const [key, entry] of after)
    if (!before.has(key))
      changes.push({
        path: `${list}.${key}`,
        kind: "added",
        sentence: `${describeEntry(list, entry)} was added.`,
      });
  const kept = (entries: readonly Entry[]): string =>
    entries
      .map(keyOf)
      .filter((key) => before.has(key) && after.has(key))
      .join(" ");
  // A later patch covers an earlier one and a parameter may use earlier ones; elsewhere order means nothing.
  if ((list === "paint" || list === "parameters") && kept(a) !== kept(b))
    changes.push({
      path: list,
      kind: "changed",
      sentence:
        list === "paint" ? "The order of the patches changed." : "The order of the parameters changed.",
    });
  return changes;
};

/** Every change that leads from scene `a` to scene `b`; empty where they mean the same. */
export const sceneDiff = (a: Scene, b: Scene): SceneChange[] => {
  const values = (Object.keys(VALUE_NAMES) as (keyof typeof VALUE_NAMES)[]).flatMap((key): SceneChange[] =>
    same(a[key], b[key])
      ? []
      : [
          {
            path: key,
            kind: a[key] === undefined ? "added" : b[key] === undefined ? "removed" : "changed",
            sentence: `The ${VALUE_NAMES[key]} changed from ${shortText(a[key])} to ${shortText(b[key])}.`,
          },
        ],
  );
  const lists = (Object.keys(LIST_NOUNS) as ListName[]).flatMap((list) =>
    listChanges(list, a[list], b[list]),
  );
  return [...values, ...lists];
};
