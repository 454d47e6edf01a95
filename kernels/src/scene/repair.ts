/**
 * Leaves the refused parts out of a document, so that what remains can be checked further and every problem is
 * reported at once. Nothing repaired is ever run or kept.
 */
import type { z } from "zod";
import type { KnownElsewhere } from "./check-names.js";
import type { Problem } from "./schema.js";

type Issue = z.core.$ZodIssue;

const LISTS = ["parameters", "media", "paint", "sources", "ports", "probes", "limits"] as const;
type ListName = (typeof LISTS)[number];

/** Stand-ins for refused values; problems at these keys are then not looked for. */
const STAND_INS: Readonly<Record<string, unknown>> = {
  format: "heddle-scene",
  version: 1,
  name: "",
  notes: "",
  polarization: "TMz",
  section: { widthMm: 1, heightMm: 1 },
  band: { fromGHz: 1, toGHz: 2 },
  background: "air",
  edges: { left: "absorbing", right: "absorbing", bottom: "absorbing", top: "absorbing" },
};

export interface Repaired {
  document: Record<string, unknown>;
  /** Top-level keys whose value was replaced or dropped. */
  replaced: ReadonlySet<string>;
  known: KnownElsewhere;
  /** Names of parameters that were left out. */
  parameterNames: ReadonlySet<string>;
  /** Writes a problem's path with the indices of the document as it was given. */
  restorePath: (problem: Problem) => Problem;
}

const namesOf = (entries: readonly unknown[], key: "id" | "name"): Set<string> =>
  new Set(
    entries
      .map((entry) =>
        typeof entry === "object" && entry !== null ? (entry as Record<string, unknown>)[key] : null,
      )
      .filter((value) => typeof value === "string"),
  );

const isList = (key: string): key is ListName => (LISTS as readonly string[]).includes(key);

/** A copy of `document` without what `issues` refuse, or null where that cannot be told apart. */
export const repair = (document: unknown, issues: readonly Issue[]): Repaired | null => {
  if (typeof document !== "object" || document === null) return null;
  const copy: Record<string, unknown> = { ...(document as Record<string, unknown>) };
  const replaced = new Set<string>();
  const refused = new Map<ListName, Set<number>>(LISTS.map((list) => [list, new Set()]));
  for (const issue of issues) {
    const key = issue.path.at(0);
    const index = issue.path.at(1);
    if (key === undefined) {
      if (issue.code !== "unrecognized_keys") return null;
      for (const unknown of issue.keys) Reflect.deleteProperty(copy, unknown);
    } else if (typeof key === "string" && isList(key) && typeof index === "number") {
      refused.get(key)?.add(index);
    } else if (typeof key === "string") {
      replaced.add(key);
      if (key in STAND_INS) copy[key] = STAND_INS[key];
      else Reflect.deleteProperty(copy, key);
    }
  }
  const left = new Map<ListName, unknown[]>();
  const kept = new Map<string, number[]>();
  for (const [list, indices] of refused) {
    const entries: unknown = copy[list];
    if (!Array.isArray(entries)) continue;
    const given: readonly unknown[] = entries;
    const keep = given.map((_, index) => index).filter((index) => !indices.has(index));
    left.set(
      list,
      given.filter((_, index) => indices.has(index)),
    );
    kept.set(list, keep);
    copy[list] = keep.map((index) => given[index]);
  }
  const dropped = (list: ListName, key: "id" | "name"): Set<string> => namesOf(left.get(list) ?? [], key);
  return {
    document: copy,
    replaced,
    known: { media: dropped("media", "id"), probes: dropped("probes", "id"), ports: dropped("ports", "id") },
    parameterNames: dropped("parameters", "name"),
    restorePath: (problem) => ({
      ...problem,
      path: problem.path.replace(/^(\w+)\[(\d+)\]/, (text, list: string, index: string) => {
        const original = kept.get(list)?.[Number(index)];
        return original === undefined ? text : `${list}[${String(original)}]`;
      }),
    }),
  };
};
