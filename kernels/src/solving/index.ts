/** The door to a run: a scene in, a session out. */
import type { Scene } from "../scene/index.js";
import { readScene, resolveScene, SceneError } from "../scene/index.js";
import { EngineSession } from "./engine-session.js";
import { chooseEngine } from "./engines.js";
import { frameLooks, framesEvery, highestOf } from "./frame-looks.js";
import { LegsSession } from "./legs.js";
import { coefficientsOf, drivesOf, latticeOf, layersOf } from "./plan.js";
import type { PortPlan } from "./port-plan.js";
import { portDrives, portModesOf } from "./port-plan.js";
import { probesOf } from "./probe-plan.js";
import type { SessionOptions, SolveSession } from "./session.js";
import { waveBoundaryProblems } from "./wave-boundary.js";

export * from "./session.js";
export { sceneWithoutShield, withShielding } from "./shielding.js";
export { refinedScene, withFinerMesh } from "./two-mesh.js";
export { SOLVER_VERSION } from "./version.js";

/** Spectra have this many frequencies, evenly over the band, unless others are asked for. */
export const DEFAULT_FREQUENCIES = 401;

const FROZEN_POLES =
  "A dispersive medium touches an absorbing edge: in the layers behind it, it keeps its ε and σ of the band's middle, so that waves in it are reflected at other frequencies.";

const SLANTED_FILMS =
  "A film does not run along the mesh: in TEz it acts on the field across it too, like a coating of a fraction of a cell; a finer mesh makes it less.";

const evenly = (from: number, to: number, count: number): number[] =>
  Array.from({ length: count }, (_, index) => from + ((to - from) * index) / (count - 1));

/**
 * Compiles a scene and opens a session before its first step.
 *
 * Rejects with a SceneError that lists every problem where the scene cannot be run, with a RangeError where an option
 * cannot be served.
 */
export async function openSession(scene: Scene, options: SessionOptions = {}): Promise<SolveSession> {
  const makeEngine = await chooseEngine(options);
  if (options.frequenciesGHz?.some((frequency) => !(frequency > 0 && Number.isFinite(frequency)))) {
    throw new RangeError("Every frequency of a spectrum must be a positive number of GHz.");
  }
  const read = readScene(scene, { purpose: "run" });
  if (!read.ok) throw new SceneError(read.problems);
  const resolved = resolveScene(read.scene);
  const { grid: scenesGrid, lattice } = latticeOf(resolved);
  const { fromGHz, toGHz } = resolved.band;
  const frequenciesGHz = options.frequenciesGHz ?? evenly(fromGHz, toGHz, DEFAULT_FREQUENCIES);
  const coefficients = coefficientsOf(resolved, lattice);
  const modes = portModesOf(resolved, lattice, coefficients.row);
  const open = (ports: PortPlan | null): EngineSession => {
    const drives = ports ? portDrives(resolved, lattice, ports) : drivesOf(resolved, lattice);
    // The scene's time ends where it says, wherever it starts.
    const grid = { ...scenesGrid, maxSteps: scenesGrid.maxSteps - drives.firstStep };
    const every = framesEvery(drives, lattice.dt, highestOf(frequenciesGHz, lattice));
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
      frames: frameLooks({ scene: resolved, engine, drives, frequenciesGHz, every }),
    });
  };
  const driven = resolved.ports.flatMap(({ drive }, index) => (drive ? [index] : []));
  if (driven.length === 0) return open(null);
  const legs = driven.map((port) => ({
    maxSteps: scenesGrid.maxSteps,
    open: () => open({ modes, driven: port }),
  }));
  return legs.length === 1 ? legs[0].open() : new LegsSession(legs);
}
