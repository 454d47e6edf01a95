/** A plain scene for the specs of reading, and what is said of it with some keys replaced. */
import { type Problem, readScene, type SceneInput } from "./index.js";

export type Draft = Record<string, unknown>;

export const plain = (): SceneInput => ({
  format: "heddle-scene",
  version: 1,
  name: "Plain",
  polarization: "TMz",
  section: { widthMm: 100, heightMm: 60 },
  band: { fromGHz: 1, toGHz: 10 },
  edges: { left: "absorbing", right: "absorbing", bottom: "electric", top: "electric" },
  media: [{ id: "foam", name: "Foam", relativePermittivity: 1.8, conductivity: 0.05 }],
  paint: [{ kind: "rectangle", id: "slab", medium: "foam", x: 40, y: 0, width: 10, height: 60 }],
  sources: [{ kind: "line", id: "wire", x: 20, y: 30 }],
  probes: [{ kind: "point", id: "far", x: 80, y: 30, field: "Ez" }],
});

export const problemsOf = (document: unknown): Problem[] => {
  const outcome = readScene(document);
  return outcome.ok ? [] : outcome.problems;
};
/** `path: sentence` of every problem of the plain scene with these keys replaced. */
export const refusals = (changes: Draft): string[] =>
  problemsOf({ ...plain(), ...changes }).map(({ path, sentence }) => `${path}: ${sentence}`);
export const warningsOf = (changes: Draft, purpose: "run" | "document" = "document"): string[] => {
  const outcome = readScene({ ...plain(), ...changes }, { purpose });
  if (!outcome.ok)
    throw new Error(outcome.problems.map(({ path, sentence }) => `${path}: ${sentence}`).join("\n"));
  return outcome.warnings.map(({ path, sentence }) => `${path}: ${sentence}`);
};
