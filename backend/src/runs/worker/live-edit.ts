/** What an edit of a running scene may touch: its paint, media and sources; the rest belongs to the mesh. */
import { canonicalJson, type Scene } from "@heddle/kernels/scene";
import type { Problem } from "./protocol.js";

/** Parts that an edit may change, and parts that say nothing of the field. */
const FREE: ReadonlySet<string> = new Set(["paint", "media", "sources", "name", "notes", "limits"]);

const WORDS: Partial<Record<keyof Scene, string>> = {
  polarization: "The polarization",
  section: "The section's size",
  band: "The band",
  mesh: "The mesh",
  background: "The background medium",
  parameters: "A parameter",
  edges: "The section's edges",
  probes: "The probes",
  ports: "The ports",
  stop: "The stop rule",
  outOfPlane: "What lies out of the plane",
  wallConductivity: "The walls' conductivity",
};

/** One problem per part of `after` that differs from `before` and may not while the run goes on. */
export function forbiddenChanges(before: Scene, after: Scene): Problem[] {
  const keys = new Set([...Object.keys(before), ...Object.keys(after)]);
  const problems: Problem[] = [];
  for (const key of keys) {
    if (FREE.has(key)) continue;
    if (stable(Reflect.get(before, key)) === stable(Reflect.get(after, key))) continue;
    const what = WORDS[key as keyof Scene] ?? `"${key}"`;
    problems.push({
      path: key,
      sentence: `${what} cannot change while the run goes on: only paint, media and sources can. Save the scene and run it anew.`,
    });
  }
  return problems;
}

/** Text that does not depend on the order of keys; a part that is absent has one of its own. */
const stable = (value: unknown): string => (value === undefined ? "absent" : canonicalJson(value));
