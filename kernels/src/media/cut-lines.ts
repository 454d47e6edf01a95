/**
 * Conformal electric conductors for TMz: F = Ez is zero at nodes in metal, and a G between a node and metal has only the distance
 * from the node to the surface for its length.
 *
 * The mesh lines through the nodes are cut exactly. Where an edge leads from a free node into metal after θ of its length, the flux
 * of H through it passes θ of its face, so bG ∝ 1/θ. This is the symmetric form of the Dirichlet condition on a curve, second order in F
 * (F. Gibou et al., J. Comput. Phys. 176 (2002) 205), and symmetric means that energy is conserved. Metal that crosses an edge between
 * two free nodes (a sheet, a wall) takes the nearer node, from where the distances to both its faces count, up to one and a half.
 *
 * Stability. Gershgorin's circles bound the eigenvalues of the lattice by the sum over a node's four G of share/θ (to metal) or
 * 2·share (to a free node) over its storage. A node whose sum exceeds that of a whole one is given so much more storage that it does
 * not: such a node lies within half a cell of metal, where Ez is of the order of its distance, so the change of an energy is
 * of third order in the cell. Δt stays.
 */
import type { PaintedArea } from "../geometry/index.js";
import { LineCutter, SLIVER } from "../geometry/index.js";
import type { Lattice } from "../lattice/index.js";
import { cellOfColumn, cellOfRow } from "../lattice/index.js";
import { correctCorners } from "./corner-links.js";
import { FIXED_F } from "./conductors.js";
import type { CutCells } from "./cut-cells.js";
import { noCutCells, stepShares } from "./cut-cells.js";
import type { OpenFacesInput } from "./open-faces.js";

/** A node this near to metal (in cells) lies in it. */
const NODE_REACH = 1e-3;
/** Lines are cut this much to either side, so that surfaces along them count. */
const SIDE_STEP = 1e-5;
/** Sheets push the surface beyond the node they take by up to this much. */
const LONGEST = 1.5;

/** Metal on one line of nodes: from … to in numbers of F's points. */
type Stretch = [number, number];

interface Axis {
  count: number;
  origin: number;
  cells: number;
  openLow: boolean;
  openHigh: boolean;
  /** From one point of F to the next along the line, and from line to line. */
  step: number;
  across: number;
}

function axesOf(lattice: Lattice): { x: Axis; y: Axis } {
  const { edges, stride, columns, rows, nx, ny } = lattice;
  return {
    x: {
      count: columns,
      origin: cellOfColumn(lattice, 0),
      cells: nx,
      openLow: edges.left === "absorbing",
      openHigh: edges.right === "absorbing",
      step: 1,
      across: stride,
    },
    y: {
      count: rows,
      origin: cellOfRow(lattice, 0),
      cells: ny,
      openLow: edges.bottom === "absorbing",
      openHigh: edges.top === "absorbing",
      step: stride,
      across: 1,
    },
  };
}

/** Sorted stretches, touching ones joined. */
function joined(stretches: Stretch[]): Stretch[] {
  stretches.sort((p, q) => p[0] - q[0]);
  const kept: Stretch[] = [];
  for (const [from, to] of stretches) {
    const last = kept.at(-1);
    if (last && from <= last[1] + SLIVER) last[1] = Math.max(last[1], to);
    else kept.push([from, to]);
  }
  return kept;
}

function metalOnLine(
  cutter: LineCutter,
  sides: readonly number[],
  along: Axis,
  input: OpenFacesInput,
): Stretch[] {
  const found: Stretch[] = [];
  for (const side of sides) {
    for (const { from, to, medium } of cutter.cut(side)) {
      if (!input.closed(medium) || to <= 0 || from >= along.cells) continue;
      found.push([
        from > SLIVER ? from - along.origin : along.openLow ? -Infinity : -along.origin,
        to < along.cells - SLIVER
          ? to - along.origin
          : along.openHigh
            ? Infinity
            : along.cells - along.origin,
      ]);
    }
  }
  return joined(found);
}

/** Metal on every line of nodes along `axis`, by the line's number. */
function metalAlong(lattice: Lattice, input: OpenFacesInput, axis: "x" | "y"): Map<number, Stretch[]> {
  const axes = axesOf(lattice);
  const along = axes[axis];
  const across = axes[axis === "x" ? "y" : "x"];
  const { widthMm, heightMm } = input;
  const areas: readonly PaintedArea[] = input.areas;
  const raster = { widthMm, heightMm, columns: lattice.nx, rows: lattice.ny };
  const cutter = new LineCutter(areas, input.background, raster, axis);
  const lines = new Map<number, Stretch[]>();
  const inside = (position: number): number =>
    Math.min(across.cells - SIDE_STEP, Math.max(SIDE_STEP, position));
  for (let n = 1; n <= across.count; n += 1) {
    const position = n + across.origin;
    const sides = [inside(position - SIDE_STEP), inside(position + SIDE_STEP)];
    const metal = metalOnLine(cutter, sides, along, input);
    if (metal.length > 0) lines.set(n, metal);
  }
  return lines;
}

const nodesIn = ([from, to]: Stretch, count: number): [number, number] => {
  const first = Math.ceil(from - NODE_REACH);
  const last = Math.floor(to + NODE_REACH);
  if (first <= last) return [Math.max(1, first), Math.min(count, last)];
  const nearest = Math.round((from + to) / 2);
  return [Math.max(1, nearest), Math.min(count, nearest)];
};

/** Raises FIXED_F at nodes in metal and returns the factors of what is near it. */
export function cutLines(lattice: Lattice, input: OpenFacesInput, flags: Uint8Array): CutCells {
  const axes = axesOf(lattice);
  const cut = noCutCells(false);
  const shares = stepShares(lattice);
  const lines = { x: metalAlong(lattice, input, "x"), y: metalAlong(lattice, input, "y") };
  for (const axis of ["x", "y"] as const) {
    const { step, across, count } = axes[axis];
    for (const [n, metal] of lines[axis]) {
      for (const stretch of metal) {
        const [first, last] = nodesIn(stretch, count);
        for (let i = first; i <= last; i += 1) flags[n * across + i * step] |= FIXED_F;
      }
    }
  }
  /** Free nodes beside a cut length or a corner. */
  const beside = new Set<number>();
  for (const axis of ["x", "y"] as const) {
    const { step, across, count } = axes[axis];
    const lengths = axis === "x" ? cut.lengthGy : cut.lengthGx;
    const setLength = (node: number, g: number, distance: number): void => {
      if (distance > LONGEST || Math.abs(distance - 1) < SLIVER) return;
      lengths.set(g, 1 / distance);
      beside.add(node);
    };
    for (const [n, metal] of lines[axis]) {
      const base = n * across;
      for (const stretch of metal) {
        const [first, last] = nodesIn(stretch, count);
        const before = base + (first - 1) * step;
        const after = base + (last + 1) * step;
        if (first > 1 && !(flags[before] & FIXED_F)) setLength(before, before, stretch[0] - (first - 1));
        if (last < count && !(flags[after] & FIXED_F))
          setLength(after, base + last * step, last + 1 - stretch[1]);
      }
    }
  }
  for (const k of correctCorners(lattice, input.corners, cut, flags)) beside.add(k);
  for (const k of beside) {
    const sum = (g: number, other: number, map: Map<number, number>, share: number): number =>
      share * (flags[other] & FIXED_F ? 0.5 : 1) * (map.get(g) ?? 1);
    const total =
      sum(k - 1, k - 1, cut.lengthGy, shares.x) +
      sum(k, k + 1, cut.lengthGy, shares.x) +
      sum(k - lattice.stride, k - lattice.stride, cut.lengthGx, shares.y) +
      sum(k, k + lattice.stride, cut.lengthGx, shares.y);
    if (total > 1) cut.storage.set(k, total);
  }
  return cut;
}
