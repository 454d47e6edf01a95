/**
 * Conformal electric conductors for TEz: F = Hz on the open area of its cell, G = E on the open lengths of its edges.
 *
 * gx is the voltage along the open part of its edge, so that Faraday's law needs only the open area and Ampère's law the length:
 * bF ∝ 1/area, bG ∝ length.
 *
 * Stability. With unit weights for the four sides of a square cell (`stepShares` in general), every eigenvalue λ of the lattice obeys
 * λΔt² ≤ 4·max over the cells of C²·Σ(share·length)/area, C = Δt over the limit (Gershgorin's circles). A cut cell with less area
 * than C²·Σ(share·length) borrows the rest from the cells it opens to, which are the cells along its surface's normal, where
 * Hz is stationary; the sum of areas stays, and so does the second order. A whole cell has 1 − C² to lend, so scenes with cut cells run
 * at C = 0.82. What still lacks area has its lengths scaled down: no Δt is needed below that one.
 */
import type { OpenCell, PaintedArea } from "../geometry/index.js";
import { areaOf, commonLength, continued, OpenCellSweep, SLIVER, spansOf } from "../geometry/index.js";
import type { Lattice } from "../lattice/index.js";
import { FIXED_F, FIXED_GX, FIXED_GY } from "./conductors.js";
import type { FieldCorner } from "./corner-links.js";
import { correctCorners } from "./corner-links.js";
import type { CutCells } from "./cut-cells.js";
import { noCutCells, stepShares } from "./cut-cells.js";

/** C² may be this much of what Gershgorin's circles allow. */
const CIRCLES = 0.9802;

export interface OpenFacesInput {
  areas: readonly PaintedArea[];
  background: number;
  closed: (medium: number) => boolean;
  widthMm: number;
  heightMm: number;
  /** Corners of the metal that reach into the field. */
  corners: readonly FieldCorner[];
}

/** What stood before an edit that changed nothing outside rows first … last. */
export interface CutsBefore {
  cuts: CutCells;
  flags: Uint8Array;
  firstRow: number;
  lastRow: number;
}

/** Flags and drawn factors of the rows that an edit left alone. */
function keepRows(lattice: Lattice, before: CutsBefore, cut: CutCells, flags: Uint8Array): void {
  const { stride } = lattice;
  const [from, to] = [before.firstRow * stride, (before.lastRow + 1) * stride];
  flags.set(before.flags.subarray(0, from), 0);
  flags.set(before.flags.subarray(to), to);
  const { drawn } = before.cuts;
  for (const name of ["storage", "lengthGx", "lengthGy"] as const) {
    for (const [k, factor] of drawn?.[name] ?? []) if (k < from || k >= to) cut[name].set(k, factor);
  }
}

/**
 * Raises `flags` where nothing is open and returns the factors of what is partly open.
 *
 * @param before only the rows between are cut anew where it is given
 */
export function openFaces(
  lattice: Lattice,
  input: OpenFacesInput,
  flags: Uint8Array,
  before?: CutsBefore,
): CutCells {
  const { nx, ny, rows, columns, stride, layers } = lattice;
  const cut = noCutCells(true);
  // The rows behind the upper edge continue the section's last one, so the sweep begins within the section.
  const firstRow = Math.min(before?.firstRow ?? 0, layers.bottom + ny);
  const lastRow = Math.min(before?.lastRow ?? rows, rows);
  if (before) keepRows(lattice, { ...before, firstRow, lastRow }, cut, flags);
  const { areas, background, closed, widthMm, heightMm } = input;
  const sweep = new OpenCellSweep(areas, background, { widthMm, heightMm, columns: nx, rows: ny }, closed);
  /** Cells of lattice row j with those behind the left and right edge; index is the column of F. */
  const widened = (cells: readonly OpenCell[]): OpenCell[] => {
    const left = continued(cells[0], "left");
    const right = continued(cells[nx - 1], "right");
    return Array.from({ length: columns + 2 }, (_, i) => {
      const c = i - 1 - layers.left;
      return c < 0 ? left : c >= nx ? right : cells[c];
    });
  };
  const bottomRow = sweep.row(0);
  const bottom = widened(bottomRow.map((cell) => continued(cell, "bottom")));
  let lastCells = bottomRow;
  const cellsOf = (j: number): OpenCell[] => {
    const r = j - 1 - layers.bottom;
    if (r < 0) return bottom;
    if (r >= ny) return widened(lastCells.map((cell) => continued(cell, "top")));
    lastCells = r === 0 ? bottomRow : sweep.row(r);
    return widened(lastCells);
  };
  const setLength = (map: Map<number, number>, k: number, length: number, flag: number): void => {
    if (length < SLIVER) flags[k] |= flag;
    else if (length < 1 - SLIVER) map.set(k, length);
  };
  let below = cellsOf(firstRow);
  for (let j = firstRow; j <= lastRow; j += 1) {
    const above = cellsOf(j + 1);
    const base = j * stride;
    for (let i = 0; i <= columns; i += 1) {
      const here = below[i];
      // Across the rows (gx), and for rows of F along them (gy) and the cell itself.
      if (here !== "open" || above[i] !== "open")
        setLength(
          cut.lengthGx,
          base + i,
          commonLength(spansOf(here, "top"), spansOf(above[i], "bottom")),
          FIXED_GX,
        );
      if (j === 0) continue;
      const next = below[i + 1];
      if (here !== "open" || next !== "open")
        setLength(
          cut.lengthGy,
          base + i,
          commonLength(spansOf(here, "right"), spansOf(next, "left")),
          FIXED_GY,
        );
      if (here === "metal") flags[base + i] |= FIXED_F;
      else if (here !== "open" && i >= 1) cut.storage.set(base + i, areaOf(here));
    }
    below = above;
  }
  cut.drawn = {
    storage: new Map(cut.storage),
    lengthGx: new Map(cut.lengthGx),
    lengthGy: new Map(cut.lengthGy),
  };
  borrowAreas(lattice, cut, flags, correctCorners(lattice, input.corners, cut, flags));
  return cut;
}

interface Opening {
  /** Array index of the cell on the other side. */
  other: number;
  map: Map<number, number>;
  /** Array index of the G between. */
  g: number;
  length: number;
  share: number;
}

/** @param corners cells about corners, whose lengths stay as they are: what they lack of area is added */
function borrowAreas(lattice: Lattice, cut: CutCells, flags: Uint8Array, corners: ReadonlySet<number>): void {
  const { stride, courant } = lattice;
  const shares = stepShares(lattice);
  const perLength = (courant * courant) / CIRCLES;
  const opening = (
    other: number,
    map: Map<number, number>,
    g: number,
    flag: number,
    share: number,
  ): Opening => ({
    other,
    map,
    g,
    length: flags[g] & flag ? 0 : (map.get(g) ?? 1),
    share,
  });
  const openingsOf = (k: number): Opening[] => [
    opening(k - 1, cut.lengthGy, k - 1, FIXED_GY, shares.x),
    opening(k + 1, cut.lengthGy, k, FIXED_GY, shares.x),
    opening(k - stride, cut.lengthGx, k - stride, FIXED_GX, shares.y),
    opening(k + stride, cut.lengthGx, k, FIXED_GX, shares.y),
  ];
  const area = (k: number): number => (flags[k] & FIXED_F ? 0 : (cut.storage.get(k) ?? 1));
  const need = (k: number): number =>
    perLength * openingsOf(k).reduce((sum, { length, share }) => sum + share * length, 0);
  const inSection = (k: number): boolean => {
    const i = k % stride;
    const j = Math.floor(k / stride);
    return i >= 1 && i <= lattice.columns && j >= 1 && j <= lattice.rows;
  };
  const own = [...cut.storage.keys()];
  /** Who asks whom for how much; all asks are made before any is granted, so that their order does not matter. */
  const asks: { from: number; to: number; area: number }[] = [];
  const asked = new Map<number, number>();
  const spare = new Map<number, number>();
  const spareOf = (k: number): number => {
    let known = spare.get(k);
    if (known === undefined) {
      known = inSection(k) ? Math.max(0, area(k) - need(k)) : 0;
      spare.set(k, known);
    }
    return known;
  };
  for (const k of own) {
    const lacking = need(k) - area(k);
    if (lacking <= 0) continue;
    const openings = openingsOf(k).filter(({ length, other }) => length > 0 && spareOf(other) > 0);
    const weight = openings.reduce((sum, { length, other }) => sum + length * spareOf(other), 0);
    for (const { length, other } of openings) {
      const wanted = (lacking * length * spareOf(other)) / weight;
      asks.push({ from: k, to: other, area: wanted });
      asked.set(other, (asked.get(other) ?? 0) + wanted);
    }
  }
  const granted = new Map<number, number>();
  for (const { from, to, area: wanted } of asks) {
    const given = wanted * Math.min(1, spareOf(to) / (asked.get(to) ?? wanted));
    granted.set(from, (granted.get(from) ?? 0) + given);
    granted.set(to, (granted.get(to) ?? 0) - given);
  }
  for (const [k, change] of granted) cut.storage.set(k, area(k) + change);
  for (const k of corners) if (area(k) < need(k)) cut.storage.set(k, need(k));
  for (const k of own) {
    const factor = area(k) / need(k);
    if (factor >= 1 - 1e-9) continue;
    for (const { map, g, length } of openingsOf(k))
      if (length > 0) map.set(g, Math.min(length, map.get(g) ?? 1) * factor);
  }
}
