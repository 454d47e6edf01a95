/** The mesh of a scene: cells, time step, wavelengths in cells, and what a run costs. */
import { lossTangent, SPEED_OF_LIGHT, skinDepthMm, wavelengthMm } from "./media-figures.js";
import { cutsCells } from "./metal-cuts.js";
import type { ResolvedScene } from "./schema.js";
import { AIR, hasPoles, isPerfect } from "./schema-media.js";
import type { FillMedium } from "./schema-media.js";

/** Δt over the two-dimensional stability limit of the plain grid. */
export const COURANT = 0.99;
/** The same where metal cuts cells of TEz off the mesh lines: cut cells borrow area from whole ones, which need room for it. */
export const CUT_COURANT = 0.82;
/** Cells of an absorbing layer, outside the section, at each absorbing edge. */
const ABSORBING_CELLS = 12;
/** The same across guides: see GUIDE_GRADING in `boundaries`. */
const GUIDE_CELLS = 28;
/** A medium lossier than this does not set the mesh. */
const COUNTED_LOSS_TANGENT = 1;
/** Where a dispersive medium's shortest wavelength is looked for: this many points over the band. */
const BAND_POINTS = 65;

export interface Grid {
  /** Cells of the section, without absorbing layers. */
  nx: number;
  ny: number;
  dxMm: number;
  dyMm: number;
  stepPs: number;
  courant: number;
  /** Steps at which the run ends at the latest. */
  maxSteps: number;
}

type Meshed = Pick<ResolvedScene, "band" | "mesh" | "background" | "mediaById" | "paint">;

/** Media that the section is made of: the background's and every patch's, perfect ones left out. */
export const fillMediaInUse = (scene: Omit<Meshed, "mesh" | "band">): FillMedium[] => {
  const ids = new Set([scene.background]);
  for (const patch of scene.paint) if ("medium" in patch) ids.add(patch.medium);
  return [...ids]
    .map((id) => scene.mediaById.get(id))
    .filter((medium): medium is FillMedium => medium !== undefined && !isPerfect(medium));
};

/** Shortest wavelength in the band, in mm; null where the medium is too lossy to count. */
const shortestInMedium = (medium: FillMedium, band: ResolvedScene["band"]): number | null => {
  const frequencies = hasPoles(medium)
    ? Array.from(
        { length: BAND_POINTS },
        (_, index) => band.fromGHz + ((band.toGHz - band.fromGHz) * index) / (BAND_POINTS - 1),
      )
    : [band.toGHz];
  const counted = frequencies
    .filter((frequency) => lossTangent(medium, frequency) <= COUNTED_LOSS_TANGENT)
    .map((frequency) => wavelengthMm(medium, frequency));
  return counted.length === 0 ? null : Math.min(...counted);
};

/** Shortest wavelength in mm of every medium that counts for the mesh, by id. */
export const countedWavelengthsMm = (scene: Omit<Meshed, "mesh">): ReadonlyMap<string, number> => {
  const wavelengths = new Map<string, number>();
  for (const medium of fillMediaInUse(scene)) {
    const wavelength = shortestInMedium(medium, scene.band);
    if (wavelength !== null) wavelengths.set(medium.id, wavelength);
  }
  return wavelengths;
};

/** Shortest wavelength of the mesh in mm; vacuum's where no medium counts. */
export const shortestWavelengthMm = (scene: Omit<Meshed, "mesh">): number => {
  const wavelengths = [...countedWavelengthsMm(scene).values()];
  return wavelengths.length > 0 ? Math.min(...wavelengths) : wavelengthMm(AIR, scene.band.toGHz);
};

/** The cell size asked for, in mm; the section's own cells are at most this. */
export const meshCellMm = (scene: Meshed): number =>
  "cellMm" in scene.mesh ? scene.mesh.cellMm : shortestWavelengthMm(scene) / scene.mesh.cellsPerWavelength;

/** Cells along a length of `mm`: the section is exactly filled, and rounding noise adds no cell. */
const cellsAlong = (mm: number, cellMm: number): number => Math.max(1, Math.ceil(mm / cellMm - 1e-6));

/** nx, ny, Δx, Δy and the time step of a resolved scene. Absorbing layers lie outside these cells. */
export const gridOf = (scene: Meshed & Pick<ResolvedScene, "section" | "stop" | "polarization">): Grid => {
  const cellMm = meshCellMm(scene);
  const nx = cellsAlong(scene.section.widthMm, cellMm);
  const ny = cellsAlong(scene.section.heightMm, cellMm);
  const dxMm = scene.section.widthMm / nx;
  const dyMm = scene.section.heightMm / ny;
  const courant = scene.polarization === "TEz" && cutsCells(scene, nx, ny) ? CUT_COURANT : COURANT;
  // c in mm/ps; Δt = courant / (c √(1/Δx² + 1/Δy²)).
  const stepPs = courant / (SPEED_OF_LIGHT * 1e-9 * Math.sqrt(1 / dxMm ** 2 + 1 / dyMm ** 2));
  const maxSteps = Math.max(1, Math.ceil((scene.stop.maxTimeNs * 1e3) / stepPs - 1e-6));
  return { nx, ny, dxMm, dyMm, stepPs, courant, maxSteps };
};

/** Cells per shortest wavelength of each counted medium, for the coarser of Δx and Δy. */
export const cellsPerWavelength = (
  scene: Omit<Meshed, "mesh">,
  grid: Pick<Grid, "dxMm" | "dyMm">,
): Record<string, number> =>
  Object.fromEntries(
    [...countedWavelengthsMm(scene)].map(([id, wavelength]) => [
      id,
      wavelength / Math.max(grid.dxMm, grid.dyMm),
    ]),
  );

/** Cells per skin depth, at the band's upper edge, of each medium too lossy to count. */
export const cellsPerSkinDepth = (
  scene: Omit<Meshed, "mesh">,
  grid: Pick<Grid, "dxMm" | "dyMm">,
): ReadonlyMap<string, number> =>
  new Map(
    fillMediaInUse(scene)
      .filter((medium) => lossTangent(medium, scene.band.toGHz) > COUNTED_LOSS_TANGENT)
      .map((medium) => [medium.id, skinDepthMm(medium, scene.band.toGHz) / Math.max(grid.dxMm, grid.dyMm)]),
  );

/** Whether an absorbing edge closes a guide: between two walls, or behind a port whose mode has a cut-off. */
export const opensGuide = ({ edges, ports }: Pick<ResolvedScene, "edges" | "ports">): boolean => {
  const absorbs = (edge: string): boolean => edge === "absorbing";
  const { left, right, bottom, top } = edges;
  const alongX = (absorbs(left) || absorbs(right)) && !absorbs(bottom) && !absorbs(top);
  const alongY = (absorbs(bottom) || absorbs(top)) && !absorbs(left) && !absorbs(right);
  return alongX || alongY || ports.some(({ mode }) => mode > 0);
};

/** Cells of each absorbing layer. */
export const layerCells = (scene: Pick<ResolvedScene, "edges" | "ports">): number =>
  opensGuide(scene) ? GUIDE_CELLS : ABSORBING_CELLS;

export interface CostEstimate {
  nx: number;
  ny: number;
  /** Cells stepped, absorbing layers included. */
  cells: number;
  /** Steps at which the run ends at the latest: those of every driven port together. */
  steps: number;
  stepPs: number;
  /** Memory of fields and coefficients in float64, an upper estimate. */
  memoryBytes: number;
  /** The traces' share of it, where the run goes on to its last step. */
  traceBytes: number;
  cellsPerWavelength: Record<string, number>;
}

/** Three fields, three pairs of coefficients and the layers' memory, in float64. */
const BYTES_PER_CELL = 8 * (3 + 6 + 4);

/**
 * Bytes a cell of the most dispersive medium takes besides, in float64: what waits to be added and bF, then for each pole a weight and two
 * numbers of memory at a cell's one point of F or two of G.
 */
function poleBytes(scene: Omit<Meshed, "mesh" | "band">): number {
  const poles = fillMediaInUse(scene).map(
    ({ electricPoles, magneticPoles }) => electricPoles.length + magneticPoles.length,
  );
  const most = Math.max(0, ...poles);
  return most > 0 ? 8 * (4 + 6 * most) : 0;
}

/** What a run of the scene costs at most, known before it starts. */
export const estimateCost = (
  scene: Meshed & Pick<ResolvedScene, "section" | "stop" | "edges" | "probes" | "polarization" | "ports">,
): CostEstimate => {
  const grid = gridOf(scene);
  const runs = Math.max(1, scene.ports.filter(({ drive }) => drive).length);
  const traces = scene.probes.length + 2 * scene.ports.length;
  const traceBytes = runs * traces * grid.maxSteps * 8;
  const layers = (first: string, second: string): number =>
    (Number(first === "absorbing") + Number(second === "absorbing")) * layerCells(scene);
  const { left, right, bottom, top } = scene.edges;
  const cells = (grid.nx + layers(left, right)) * (grid.ny + layers(bottom, top));
  return {
    nx: grid.nx,
    ny: grid.ny,
    cells,
    steps: runs * grid.maxSteps,
    stepPs: grid.stepPs,
    memoryBytes: cells * (BYTES_PER_CELL + poleBytes(scene)) + traceBytes,
    traceBytes,
    cellsPerWavelength: cellsPerWavelength(scene, grid),
  };
};
