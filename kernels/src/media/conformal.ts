/** Conformal metal of a section: the formulation that its polarization asks for, with thin walls as the thinnest of sheets. */
import type { PaintedArea } from "../geometry/index.js";
import type { Lattice } from "../lattice/index.js";
import type { ConductorMap } from "./conductors.js";
import type { SectionMedia } from "./coefficients.js";
import type { CutCells } from "./cut-cells.js";
import { cutLines } from "./cut-lines.js";
import type { CutsBefore } from "./open-faces.js";
import { openFaces } from "./open-faces.js";

/** Thickness in cells at which a wall is cut: below what counts as a loss of area, above rounding. */
const WALL_CELLS = 8e-5;

/**
 * Raises the flags of fixed points in `conductors` and returns what is partly open.
 *
 * @param previous the cuts before an edit that changed nothing outside its rows
 */
export function conformalCuts(
  lattice: Lattice,
  section: SectionMedia,
  conductors: ConductorMap,
  previous?: CutsBefore,
): CutCells | null {
  const { media, background, widthMm, heightMm } = section;
  const wall = media.length;
  const widthOfWall = WALL_CELLS * Math.min(lattice.dx, lattice.dy) * 1000;
  const walls = section.walls.map(
    (points): PaintedArea => ({ medium: wall, shape: { kind: "stroke", points, widthMm: widthOfWall } }),
  );
  const areas = [...section.areas, ...walls];
  const closed = (medium: number): boolean => medium === wall || media[medium].kind === "electric";
  if (!closed(background) && !areas.some(({ medium }) => closed(medium))) return null;
  const input = { areas, background, closed, widthMm, heightMm, corners: section.corners ?? [] };
  const { flags } = conductors;
  const cuts =
    lattice.polarization === "TMz"
      ? cutLines(lattice, input, flags)
      : openFaces(lattice, input, flags, previous);
  const rows = [cuts.storage, cuts.lengthGx, cuts.lengthGy].flatMap((map) =>
    Array.from(map.keys(), (k) => Math.floor(k / lattice.stride)),
  );
  conductors.markTouched(rows);
  return cuts;
}
