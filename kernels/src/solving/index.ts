/** The door to a run: a scene in, a session out. */
import type { Scene } from "../scene/index.js";
import { comparisonsOf, mergeOf } from "./comparisons.js";
import { chooseEngine } from "./engines.js";
import { LegsSession } from "./legs.js";
import { legsOf } from "./scene-legs.js";
import type { SessionOptions, SolveSession } from "./session.js";

export { comparedScenes } from "./comparisons.js";
export { DEFAULT_FREQUENCIES } from "./scene-legs.js";
export * from "./session.js";
export { SOLVER_VERSION } from "./version.js";

/**
 * Compiles a scene and opens a session before its first step.
 *
 * Rejects with a SceneError that lists every problem where the scene, or one that it is to be compared with, cannot be run; with a
 * RangeError where an option cannot be served.
 */
export async function openSession(scene: Scene, options: SessionOptions = {}): Promise<SolveSession> {
  const makeEngine = await chooseEngine(options);
  const { frequenciesGHz } = options;
  if (frequenciesGHz?.some((frequency) => !(frequency > 0 && Number.isFinite(frequency)))) {
    throw new RangeError("Every frequency of a spectrum must be a positive number of GHz.");
  }
  const maps = { mapsGHz: options.mapsGHz ?? [], envelope: options.envelope ?? false };
  const legs = legsOf(scene, makeEngine, frequenciesGHz, maps);
  const comparisons = comparisonsOf(scene, options).map(({ scene: other, ...comparison }) => ({
    ...comparison,
    legs: legsOf(other, makeEngine, frequenciesGHz),
  }));
  if (legs.length === 1 && comparisons.length === 0) return legs[0].open();
  return new LegsSession(
    legs,
    comparisons.flatMap((comparison) => comparison.legs),
    mergeOf(legs.length, comparisons),
  );
}
