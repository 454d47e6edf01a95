/** A scene compiled for an engine: lattice, coefficients, drives. */
import { absorbingLayers, DEFAULT_GRADING, GUIDE_GRADING } from "../boundaries/index.js";
import type { AbsorbingLayers } from "../boundaries/index.js";
import type { CompiledWaveform, SignalGenerator } from "../drives/index.js";
import {
  compileWaveform,
  lineSourcePoints,
  planeWavePoints,
  PlaneWaveSignals,
  totalFieldBox,
  waveformSignals,
} from "../drives/index.js";
import type { PaintedArea } from "../geometry/index.js";
import type { Lattice, Side } from "../lattice/index.js";
import { buildLattice, C0, ETA0 } from "../lattice/index.js";
import type { FieldCorner, Film, LatticeBox, SectionMedia, SolverMedium } from "../media/index.js";
import { propertiesOf, SectionCoefficients } from "../media/index.js";
import type { Grid, Medium, ResolvedScene } from "../scene/index.js";
import {
  CORNER_CELLS,
  canonicalJson,
  gridOf,
  hasConformalMetal,
  hasPoles,
  isPerfect,
  layerCells,
  metalCorners,
  opensGuide,
  propagation,
} from "../scene/index.js";
import type { DrivePoint } from "../stepping/index.js";

export interface PlannedSource {
  id: string;
  /** What a spectrum is divided by. */
  waveform: CompiledWaveform;
  /** Sources with the same text share a waveform. */
  waveformText: string;
  /** Where in a step the waveform drives: w((n + offset)Δt). */
  offset: 0 | 0.5;
  /** Seconds after which it drives no more. */
  endSeconds: number;
  /** The source as it stands in the scene: an edit that leaves it alone leaves it its state. */
  text: string;
  generator: SignalGenerator;
}

export interface DrivePlan {
  sources: readonly PlannedSource[];
  /** Their signals are numbered in the order of the sources. */
  points: readonly DrivePoint[];
  /** Signals of a step, of all sources together. */
  signals: number;
  /** Seconds after which no source drives any more; infinite with a tone. */
  endSeconds: number;
  /** The engine's step 0 is this step counted from time 0: negative where a wave comes before its waveform's time 0. */
  firstStep: number;
}

const solverMedium = (medium: Medium): SolverMedium =>
  isPerfect(medium) ? { kind: medium.perfect } : { kind: "fill", properties: propertiesOf(medium) };

/** The lattice of a resolved scene and the figures of its mesh. */
export function latticeOf(scene: ResolvedScene): { grid: Grid; lattice: Lattice } {
  const grid = gridOf(scene);
  const lattice = buildLattice({
    polarization: scene.polarization,
    nx: grid.nx,
    ny: grid.ny,
    dx: grid.dxMm / 1000,
    dy: grid.dyMm / 1000,
    edges: scene.edges,
    layerCells: layerCells(scene),
    courant: grid.courant,
  });
  return { grid, lattice };
}

function cornersOf(scene: ResolvedScene, lattice: Lattice): FieldCorner[] {
  if (!hasConformalMetal(scene)) return [];
  const reachMm = CORNER_CELLS * Math.max(lattice.dx, lattice.dy) * 1000;
  return metalCorners(scene, reachMm).map(({ x, y, reachMm: reach, ...angles }) => ({
    x: x / 1000,
    y: y / 1000,
    reach: reach / 1000,
    ...angles,
  }));
}

/** The update coefficients of a resolved scene's paint and media. */
export function coefficientsOf(
  scene: ResolvedScene,
  lattice: Lattice,
  previous?: { coefficients: SectionCoefficients; box: LatticeBox },
): SectionCoefficients {
  const ids = [...scene.mediaById.keys()];
  const indexOf = (id: string): number => {
    const index = ids.indexOf(id);
    if (index < 0) throw new RangeError(`The medium "${id}" does not exist.`);
    return index;
  };
  const areas: PaintedArea[] = [];
  const walls: (readonly [number, number])[][] = [];
  const films: Film[] = [];
  for (const patch of scene.paint) {
    if (patch.kind === "wall") walls.push(patch.points.map(([x, y]) => [x, y] as const));
    else if (patch.kind === "film")
      films.push({
        points: patch.points.map(([x, y]) => [x, y] as const),
        ohmsPerSquare: patch.ohmsPerSquare,
      });
    else areas.push({ shape: patch, medium: indexOf(patch.medium) });
  }
  const section: SectionMedia = {
    media: [...scene.mediaById.values()].map(solverMedium),
    areas,
    background: indexOf(scene.background),
    walls,
    films,
    widthMm: scene.section.widthMm,
    heightMm: scene.section.heightMm,
    metal: hasConformalMetal(scene) ? "conformal" : "staircase",
    corners: cornersOf(scene, lattice),
    omega: Math.PI * (scene.band.fromGHz + scene.band.toGHz) * 1e9,
  };
  return new SectionCoefficients(lattice, section, previous);
}

/** Refractive index of the background as the layers have it: with poles that of the band's middle. */
function layerIndex(scene: ResolvedScene): number {
  const background = scene.mediaById.get(scene.background);
  if (!background || isPerfect(background)) return 1;
  if (hasPoles(background))
    return Math.max(1, propagation(background, (scene.band.fromGHz + scene.band.toGHz) / 2).phase);
  return Math.sqrt(background.relativePermittivity * background.relativePermeability);
}

/** The layers behind absorbing edges, matched in grading to the background. */
export function layersOf(scene: ResolvedScene, lattice: Lattice): AbsorbingLayers {
  const index = layerIndex(scene);
  const sides: Record<Side, number> = { left: index, right: index, bottom: index, top: index };
  const grading = opensGuide(scene) ? GUIDE_GRADING : DEFAULT_GRADING;
  return absorbingLayers(lattice, scene.band.fromGHz * 1e9, sides, grading);
}

interface Driving {
  generator: SignalGenerator;
  points: DrivePoint[];
  offset: 0 | 0.5;
  endSeconds: number;
  firstStep: number;
}

/** A plane wave in the background. Throws a RangeError where that is a perfect conductor. */
function planeWaveOf(
  scene: ResolvedScene,
  source: Extract<ResolvedScene["sources"][number], { kind: "plane-wave" }>,
  lattice: Lattice,
  firstSignal: number,
  kept: SignalGenerator | undefined,
): Driving {
  const background = scene.mediaById.get(scene.background);
  if (!background || isPerfect(background))
    throw new RangeError(`The plane wave "${source.id}" needs a background that waves travel in.`);
  const { epsilon, mu } = propertiesOf(background);
  const { relativePermittivity, relativePermeability } = background;
  const { dx, dy, dt } = lattice;
  const onNodes = lattice.polarization === "TMz";
  const storage = onNodes ? mu : epsilon;
  const angle = (source.angle * Math.PI) / 180;
  const box = totalFieldBox(lattice, source.insetMm);
  const { points, places } = planeWavePoints(lattice, box, angle, firstSignal);
  const waveform = compileWaveform(source.waveform);
  const medium = {
    mesh: lattice,
    speed: C0 / Math.sqrt(relativePermittivity * relativePermeability),
    angle,
    bGx: ((dt / storage) * dx) / dy,
    bGy: ((dt / storage) * dy) / dx,
  };
  const impedance = ETA0 * Math.sqrt(relativePermeability / relativePermittivity);
  const amplitude = onNodes ? source.amplitude : source.amplitude / impedance;
  const generator =
    kept instanceof PlaneWaveSignals ? kept : new PlaneWaveSignals(medium, waveform, amplitude, places);
  return {
    generator,
    points,
    offset: 0,
    endSeconds: waveform.endSeconds + Math.max(0, generator.stepsAfter) * dt,
    firstStep: generator.firstStep,
  };
}

function lineSourceOf(
  source: Extract<ResolvedScene["sources"][number], { kind: "line" }>,
  lattice: Lattice,
  firstSignal: number,
): Driving {
  const waveform = compileWaveform(source.waveform);
  return {
    generator: waveformSignals(waveform, source.amplitude, lattice.dt),
    points: lineSourcePoints(lattice, source.x, source.y, firstSignal),
    offset: 0.5,
    endSeconds: waveform.endSeconds,
    firstStep: 0,
  };
}

/** @param previous the drives before an edit: a source that it left alone goes on, and so does the count of steps */
export function drivesOf(scene: ResolvedScene, lattice: Lattice, previous?: DrivePlan): DrivePlan {
  const sources: PlannedSource[] = [];
  const points: DrivePoint[] = [];
  let signals = 0;
  let firstStep = 0;
  for (const source of scene.sources) {
    const text = canonicalJson(source);
    const kept = previous?.sources.find((candidate) => candidate.text === text)?.generator;
    const driving =
      source.kind === "line"
        ? lineSourceOf(source, lattice, signals)
        : planeWaveOf(scene, source, lattice, signals, kept);
    points.push(...driving.points);
    signals += driving.generator.signals;
    firstStep = Math.min(firstStep, driving.firstStep);
    sources.push({
      id: source.id,
      waveform: compileWaveform(source.waveform),
      waveformText: canonicalJson(source.waveform),
      offset: driving.offset,
      endSeconds: driving.endSeconds,
      text,
      generator: kept ?? driving.generator,
    });
  }
  const endSeconds = sources.reduce((latest, source) => Math.max(latest, source.endSeconds), 0);
  return { sources, points, signals, endSeconds, firstStep: previous?.firstStep ?? firstStep };
}
