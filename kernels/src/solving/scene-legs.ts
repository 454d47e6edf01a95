/** From a scene to the legs that solve it: one, or one for each of its driven ports. */
import type { Scene } from "../scene/index.js";
import { fillMediaInUse, hasPoles, readScene, resolveScene, SceneError } from "../scene/index.js";
import { EngineSession } from "./engine-session.js";
import type { chooseEngine } from "./engines.js";
import type { MapSpec } from "./field-maps.js";
import { frameLooks, framesEvery, highestOf } from "./frame-looks.js";
import type { Leg } from "./legs.js";
import { coefficientsOf, drivesOf, latticeOf, layersOf } from "./plan.js";
import type { PortPlan } from "./port-plan.js";
import { portDrives, portModesOf } from "./port-plan.js";
import { probesOf } from "./probe-plan.js";
import { waveBoundaryProblems } from "./wave-boundary.js";

/** Spectra have this many frequencies, evenly over the band, unless others are asked for. */
export const DEFAULT_FREQUENCIES = 401;

const FROZEN_POLES =
  "A dispersive medium touches an absorbing edge: in the layers behind it, it keeps its ε and σ of the band's middle, so that waves in it are reflected at other frequencies.";

const SLANTED_FILMS =
  "A film does not run along the mesh: in TEz it acts on the field across it too, like a coating of a fraction of a cell; a finer mesh makes it less.";

const evenly = (from: number, to: number, count: number): number[] =>
  Array.from({ length: count }, (_, index) => from + ((to - from) * index) / (count - 1));

/**
 * Compiles a scene; every leg makes its engine when it is opened.
 *
 * Throws a SceneError that lists every problem where the scene cannot be run.
 *
 * @param wantedGHz the spectra's frequencies; left out: DEFAULT_FREQUENCIES of them
 */
export function legsOf(
  scene: Scene,
  makeEngine: Awaited<ReturnType<typeof chooseEngine>>,
  wantedGHz?: readonly number[],
  maps?: MapSpec,
): Leg[] {
  const read = readScene(scene, { purpose: "run" });
  if (!read.ok) throw new SceneError(read.problems);
  const resolved = resolveScene(read.scene);
  const { grid: scenesGrid, lattice } = latticeOf(resolved);
  const { fromGHz, toGHz } = resolved.band;
  const frequenciesGHz = wantedGHz ?? evenly(fromGHz, toGHz, DEFAULT_FREQUENCIES);
  const coefficients = coefficientsOf(resolved, lattice);
  const media = {
    terms: fillMediaInUse(resolved).some(hasPoles) ? coefficients.row : null,
    branches: coefficients.branches,
  };
  const modes = portModesOf(resolved, lattice, coefficients.row);
  const open = (ports: PortPlan | null): EngineSession => {
    const drives = ports ? portDrives(resolved, lattice, ports) : drivesOf(resolved, lattice);
    // The scene's time ends where it says, wherever it starts.
    const grid = { ...scenesGrid, maxSteps: scenesGrid.maxSteps - drives.firstStep };
    const highest = highestOf([...frequenciesGHz, ...(maps?.mapsGHz ?? [])], lattice);
    const every = framesEvery(drives, lattice.dt, highest, maps?.envelope);
    const probes = probesOf(resolved, lattice, frequenciesGHz, modes, every);
    const engine = makeEngine({
      lattice,
      coefficients: coefficients.row,
      branches: coefficients.branches,
      layers: layersOf(resolved, lattice),
      drives: drives.points,
      signals: drives.signals,
      taps: probes.taps,
      records: probes.records,
    });
    const problems = ports ? [] : waveBoundaryProblems(resolved, drives, engine);
    if (problems.length > 0) {
      engine.dispose();
      throw new SceneError(problems);
    }
    return new EngineSession({
      scene: read.scene,
      resolved,
      warnings: [
        ...read.warnings.map(({ sentence }) => sentence),
        ...(coefficients.freezesPoles ? [FROZEN_POLES] : []),
        ...(coefficients.slantsFilms ? [SLANTED_FILMS] : []),
      ],
      grid,
      engine,
      coefficients,
      drives,
      ports,
      probes,
      frequenciesGHz,
      frames: frameLooks({ scene: resolved, engine, media, drives, frequenciesGHz, every, maps }),
    });
  };
  const driven = resolved.ports.flatMap(({ drive }, index) => (drive ? [index] : []));
  const { maxSteps } = scenesGrid;
  if (driven.length === 0) return [{ maxSteps, open: () => open(null) }];
  return driven.map((port) => ({ maxSteps, open: () => open({ modes, driven: port }) }));
}
