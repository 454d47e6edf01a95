/** Cut-off frequencies of a closed section from two meshes. */
import { C0 } from "../lattice/index.js";
import type { LimitResult, Problem, ResolvedScene, Scene } from "../scene/index.js";
import { gridOf, isPerfect, resolveScene, SceneError } from "../scene/index.js";
import type { Eigenpair } from "./algebra/lanczos.js";
import type { ModesDocument } from "./document.js";
import { lowestModes } from "./eigenmodes.js";
import { dampedQ } from "./damped.js";
import type { ModeLosses } from "./losses.js";
import { modeLosses } from "./losses.js";
import type { SectionMesh } from "./mesh/section-mesh.js";
import { meshSection, openLengths } from "./mesh/section-mesh.js";
import type { ElementSpace } from "./space.js";
import { buildSpace } from "./space.js";

export const DEFAULT_MODES = 10;
export const MOST_MODES = 100;

export interface ModesProgress {
  /** Of the whole, 0…1, roughly. */
  share: number;
  stage: "mesh" | "modes";
}

/** Unknowns of the finer mesh at most, about: what one core solves in a few seconds. */
const MOST_UNKNOWNS = 140_000;
/** Legs of the finer mesh in cells, the first that is not too large is taken; nodes lie half a leg apart. */
const FINER_LEGS = [0.5, 1, 2, 4, 8, 16, 32, 64];
/** Lengths of an uncovered edge below this share of a leg are rounding. */
const UNCOVERED = 1e-3;
/** Shares of the time: the coarser mesh, then the finer. */
const COARSE_SHARE = 0.25;
/** Above this Q, what perturbation leaves out is some 1e-4 of it. */
const LOW_LOSS_Q = 1000;
/** Steps that a search takes, about. */
const USUAL_STEPS = 30;

/** Legs of the coarser and the finer mesh, in mm. */
function legsFor(scene: ResolvedScene): [number, number] {
  const grid = gridOf(scene);
  const cells = grid.nx * grid.ny;
  const finer = FINER_LEGS.find((leg) => cells * (2 / leg) ** 2 <= MOST_UNKNOWNS) ?? 128;
  const cellMm = Math.max(grid.dxMm, grid.dyMm);
  return [2 * finer * cellMm, finer * cellMm];
}

/** What of the scene this calculation refuses, once it is meshed. */
function refusals(scene: ResolvedScene, mesh: SectionMesh): Problem[] {
  const problems: Problem[] = [];
  if (mesh.count === 0)
    return [
      { path: "paint", sentence: "The section is all conductor; leave or paint a space for the field." },
    ];
  for (const [side, length] of openLengths(mesh)) {
    if (length <= UNCOVERED * mesh.legMm) continue;
    problems.push({
      path: `edges.${side}`,
      sentence: `The ${side} edge absorbs and ${String(Number(length.toPrecision(3)))} mm of it are not covered by metal; modes need a closed section: make the edge electric or magnetic, or paint metal all along it.`,
    });
  }
  const present = new Set(mesh.medium);
  [...scene.mediaById.values()].forEach((medium, index) => {
    if (isPerfect(medium) || !present.has(index)) return;
    const at = scene.media.findIndex(({ id }) => id === medium.id);
    for (const key of ["electricPoles", "magneticPoles"] as const) {
      if (medium[key].length > 0)
        problems.push({
          path: `media[${String(at)}].${key}`,
          sentence: `"${medium.id}" changes with frequency, so that its modes are no linear problem; give a medium with constant values for the frequency that matters.`,
        });
    }
  });
  return problems;
}

interface Level {
  space: ElementSpace;
  pairs: Eigenpair[];
}

function* solveLevel(
  scene: ResolvedScene,
  legMm: number,
  count: number,
  known: readonly number[],
  from: number,
  to: number,
): Generator<ModesProgress, Level> {
  yield { share: from, stage: "mesh" };
  const mesh = meshSection(scene, legMm);
  const problems = refusals(scene, mesh);
  if (problems.length > 0) throw new SceneError(problems);
  const space = buildSpace(mesh, scene.polarization);
  const search = lowestModes(space, count, known);
  for (let step = 1; ; step += 1) {
    const { done, value } = search.next();
    if (done === true) return { space, pairs: value };
    yield { share: from + (to - from) * (step / (step + USUAL_STEPS / 3)), stage: "modes" };
  }
}

/** √λ in 1/mm to GHz. */
const frequencyGHz = (value: number): number => (Math.sqrt(Math.max(0, value)) * C0 * 1e-6) / (2 * Math.PI);

/**
 * What the damped mode's own Q is to that by perturbation, found on the coarser mesh; 1 where the loss is so low that it does not matter,
 * and where films stand in the section, whose currents the elements' F does not carry.
 */
function dampingOf({ space }: Level, pair: Eigenpair, { mediaQ }: ModeLosses): number {
  if (mediaQ === null || mediaQ > LOW_LOSS_Q || space.mesh.films.some((film) => film > 0)) return 1;
  const perturbed = modeLosses(space, pair.vector, Math.sqrt(pair.value) * C0 * 1e3, undefined).mediaQ;
  const damped = perturbed === null ? null : dampedQ(space, pair.vector, pair.value, perturbed);
  return damped === null || perturbed === null ? 1 : damped / perturbed;
}

/** Limits on the nth cut-off; not judged where fewer modes were found. */
function judgeCutoffs({ limits }: ResolvedScene, modes: ModesDocument["modes"]): LimitResult[] {
  return limits.flatMap((limit): LimitResult[] => {
    if (!("value" in limit) || !("cutoff" in limit.of)) return [];
    const mode = modes.at(limit.of.cutoff - 1);
    if (!mode) return [{ id: limit.id, holds: null, margin: null, atGHz: null, uncertainty: null }];
    const { cutoffGHz: atGHz, uncertaintyGHz: uncertainty } = mode;
    const margin = limit.sense === "below" ? limit.value - atGHz : atGHz - limit.value;
    return [{ id: limit.id, holds: margin >= 0, margin, atGHz, uncertainty }];
  });
}

/**
 * The lowest cut-off frequencies of a closed section, TM or TE by the scene's polarization, without static solutions. Each is
 * extrapolated from two meshes as second order, and its uncertainty is their full difference; Q is the finer mesh's.
 *
 * A generator, so that the caller may show progress, stop, or let others run between two steps of about a tenth of a second. Throws
 * a SceneError where the scene is refused, an Error with a sentence where the calculation fails.
 *
 * @param count modes wanted; fewer are given where the finer mesh has fewer
 */
export function* solveModes(
  scene: Scene,
  count: number = DEFAULT_MODES,
): Generator<ModesProgress, ModesDocument> {
  const resolved = resolveScene(scene);
  const grid = gridOf(resolved);
  const legs = legsFor(resolved);
  const coarse = yield* solveLevel(resolved, legs[0], count, [], 0, COARSE_SHARE);
  const known = coarse.pairs.map(({ value }) => value);
  const fine = yield* solveLevel(resolved, legs[1], count, known, COARSE_SHARE, 1);
  const found = Math.min(count, fine.pairs.length);
  const modes: ModesDocument["modes"] = [];
  for (let n = 0; n < found; n += 1) {
    const pair = fine.pairs[n];
    const finer = frequencyGHz(pair.value);
    // A mode that the coarser mesh is too coarse to have is as uncertain as it is high.
    const coarser = n < coarse.pairs.length ? frequencyGHz(coarse.pairs[n].value) : 2 * finer;
    const cutoffGHz = n < coarse.pairs.length ? finer + (finer - coarser) / 3 : finer;
    const omega = 2 * Math.PI * finer * 1e9;
    const losses = modeLosses(fine.space, pair.vector, omega, resolved.wallConductivity);
    const correction = n < coarse.pairs.length ? dampingOf(coarse, coarse.pairs[n], losses) : 1;
    modes.push({
      cutoffGHz,
      uncertaintyGHz: Math.abs(finer - coarser),
      wallQ: losses.wallQ,
      mediaQ: losses.mediaQ === null ? null : losses.mediaQ * correction,
    });
  }
  modes.sort((p, q) => p.cutoffGHz - q.cutoffGHz);
  const limits = judgeCutoffs(resolved, modes);
  return {
    format: "heddle-modes",
    version: 1,
    polarization: resolved.polarization,
    grid: {
      nx: grid.nx,
      ny: grid.ny,
      dxMm: grid.dxMm,
      dyMm: grid.dyMm,
      legsMm: legs,
      unknowns: [coarse.space.unknowns, fine.space.unknowns],
    },
    modes,
    ...(limits.length > 0 && { limits }),
  };
}

/** `solveModes` to its end. */
export function findModes(scene: Scene, count: number = DEFAULT_MODES): ModesDocument {
  const steps = solveModes(scene, count);
  for (;;) {
    const { done, value } = steps.next();
    if (done === true) return value;
  }
}
