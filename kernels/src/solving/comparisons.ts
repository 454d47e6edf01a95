/** Further runs that a run may ask for, of scenes that differ from its own in one thing, and what they add to its result. */
import type { Scene, SolveResult } from "../scene/index.js";
import { SceneError } from "../scene/index.js";
import type { LegRecord } from "./leg-record.js";
import { buildResult } from "./result.js";
import type { ComparisonOptions } from "./session.js";
import { sceneWithoutShield, withShielding } from "./shielding.js";
import { refinedScene, withFinerMesh } from "./two-mesh.js";

interface Comparison {
  /** Said where the run was stopped before this was done. */
  undone: string;
  merge: (result: SolveResult, other: SolveResult) => SolveResult;
}

/** Throws a SceneError where there is nothing to compare with. */
export function comparisonsOf(
  scene: Scene,
  { shielding, twoMesh }: ComparisonOptions,
): (Comparison & { scene: Scene })[] {
  const found: (Comparison & { scene: Scene })[] = [];
  if (shielding === true) {
    const bare = sceneWithoutShield(scene);
    if (bare === null)
      throw new SceneError([
        {
          path: "paint",
          sentence:
            'No patch of the scene is marked "shield": true, so there is nothing to take away; mark the enclosure.',
        },
      ]);
    found.push({
      scene: bare,
      merge: (result, other) => withShielding(scene, result, other),
      undone: "The run was stopped before it was done without the marked patches, so no shielding is told.",
    });
  }
  if (twoMesh === true)
    found.push({
      scene: refinedScene(scene),
      merge: (result, other) => withFinerMesh(scene, result, other),
      undone: "The run was stopped before its finer mesh was done, so nothing is extrapolated.",
    });
  return found;
}

/** The scenes that a run with these options solves after its own, one after the other. Throws as `openSession` does. */
export const comparedScenes = (scene: Scene, options: ComparisonOptions): Scene[] =>
  comparisonsOf(scene, options).map((comparison) => comparison.scene);

/**
 * One result of the records of a run's own legs, which come first, and of those of its comparisons, as far as they were done.
 *
 * @param own how many legs the run has of its own
 */
export const mergeOf =
  (own: number, comparisons: readonly (Comparison & { legs: readonly unknown[] })[]) =>
  (records: readonly LegRecord[]): SolveResult => {
    const first = buildResult(records.slice(0, own));
    if (first.edits) return first;
    let from = own;
    return comparisons.reduce((result, { legs, merge, undone }) => {
      const others = records.slice(from, from + legs.length);
      from += legs.length;
      const done = others.length === legs.length && others.every(({ reason }) => reason !== "cancelled");
      if (done) return merge(result, buildResult(others));
      return {
        ...result,
        quality: { ...result.quality, warnings: [...result.quality.warnings, undone] },
      };
    }, first);
  };
