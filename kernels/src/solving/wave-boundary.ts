/** Where the total field of a plane wave meets the scattered one, the lattice must be that of the bare background. */
import { propertiesOf, updateOf } from "../media/index.js";
import type { Problem, ResolvedScene } from "../scene/index.js";
import { isPerfect } from "../scene/index.js";
import type { Engine } from "../stepping/index.js";
import { rowCoefficients } from "../stepping/index.js";
import type { DrivePlan } from "./plan.js";

/** Coefficients that agree to this share are the same in either precision. */
const SAME = 1e-5;

/**
 * A problem for each plane wave that drives a point where something is painted: the drawing is looked at in places before a run, the
 * lattice at every point.
 */
export function waveBoundaryProblems(scene: ResolvedScene, drives: DrivePlan, engine: Engine): Problem[] {
  const background = scene.mediaById.get(scene.background);
  if (!background || isPerfect(background)) return [];
  const { lattice } = engine;
  const { dx, dy, dt } = lattice;
  const { epsilon, mu } = propertiesOf(background);
  const [ofF, ofG] = lattice.polarization === "TMz" ? [epsilon, mu] : [mu, epsilon];
  const bare = {
    f: updateOf({ storage: ofF, loss: 0 }, dt, 1 / (dx * dy)).b,
    gx: updateOf({ storage: ofG, loss: 0 }, dt, dx / dy).b,
    gy: updateOf({ storage: ofG, loss: 0 }, dt, dy / dx).b,
  };
  const row = rowCoefficients(lattice.stride);
  const signalsOf = drives.sources.map(({ generator }) => generator.signals);
  const touched = new Set<number>();
  let read = -1;
  for (const point of [...drives.points].sort((p, q) => p.row - q.row)) {
    let source = 0;
    for (let end = signalsOf[0]; point.signal >= end; end += signalsOf[source]) source += 1;
    if (scene.sources[source].kind !== "plane-wave") continue;
    if (point.row !== read) engine.readCoefficients(point.row, row);
    read = point.row;
    const field = point.field ?? "f";
    const [a, b] = { f: [row.aF, row.bF], gx: [row.aGx, row.bGx], gy: [row.aGy, row.bGy] }[field];
    const same = Math.abs(b[point.column] / bare[field] - 1) < SAME && Math.abs(a[point.column] - 1) < SAME;
    if (!same) touched.add(source);
  }
  return [...touched].map((source) => ({
    path: `sources[${source}]`,
    sentence:
      "The box of the plane wave must run through lossless, non-dispersive background alone, but paint touches its line; move what crosses it or change insetMm.",
  }));
}
