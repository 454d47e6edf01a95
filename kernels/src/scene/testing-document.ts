/** A scene of every kind of length for the specs of resolving, meshing and comparing. */
import { readScene, type ResolvedScene, resolveScene, type Scene, type SceneInput } from "./index.js";

export const plain = (changes: Partial<SceneInput> = {}): SceneInput => ({
  format: "heddle-scene",
  version: 1,
  name: "Plain",
  polarization: "TEz",
  section: { widthMm: "a", heightMm: "b" },
  band: { fromGHz: 1, toGHz: 5 },
  parameters: [
    { name: "a", value: 60, plus: 0.1, minus: 0.1 },
    { name: "b", value: "a/2" },
  ],
  mesh: { cellMm: 1 },
  edges: { left: "absorbing", right: "absorbing", bottom: "absorbing", top: "absorbing" },
  paint: [
    {
      kind: "polygon",
      id: "block",
      medium: "pec",
      points: [
        ["a/4", 0],
        ["a/2", 0],
        ["a/2", "b/2"],
      ],
      holes: [
        [
          [20, 1],
          [21, 1],
          [21, 2],
        ],
      ],
    },
    {
      kind: "wall",
      id: "fin",
      points: [
        [40, "b/3"],
        [50, 10],
      ],
    },
  ],
  sources: [{ kind: "line", id: "loop", x: "a - 50", y: 10 }],
  probes: [{ kind: "point", id: "p", x: 55, y: "max(1, b/10)", field: "Hz" }],
  ...changes,
});
export const read = (changes: Partial<SceneInput> = {}): Scene => {
  const outcome = readScene(plain(changes));
  if (!outcome.ok)
    throw new Error(outcome.problems.map(({ path, sentence }) => `${path}: ${sentence}`).join("\n"));
  return outcome.scene;
};
export const resolved = (changes: Partial<SceneInput> = {}): ResolvedScene => resolveScene(read(changes));
