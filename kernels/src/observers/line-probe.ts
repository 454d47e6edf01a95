/** Taps of line probes: the voltage along a line, and what the power through it is made of. */
import type { Lattice } from "../lattice/index.js";
import type { Tap } from "../stepping/index.js";
import { pointProbeTaps } from "./point-probe.js";

type Point = readonly [number, number];

/** A piece of a line within one cell about F's points: its middle, and how far it goes, in mm. */
interface Piece {
  x: number;
  y: number;
  dx: number;
  dy: number;
}

const EPSILON = 1e-9;

/** A line cut wherever it passes half way between two of F's columns or rows. */
function piecesOf(lattice: Lattice, from: Point, to: Point): Piece[] {
  const cells = [lattice.dx * 1000, lattice.dy * 1000];
  const cuts = [0, 1];
  cells.forEach((cell, axis) => {
    const start = from[axis] / cell;
    const length = to[axis] / cell - start;
    if (Math.abs(length) < EPSILON) return;
    const low = Math.min(start, start + length);
    const high = Math.max(start, start + length);
    for (let n = Math.floor(low); n <= high + 1; n += 1) {
      const share = (n + 0.5 - lattice.offset - start) / length;
      if (share > EPSILON && share < 1 - EPSILON) cuts.push(share);
    }
  });
  cuts.sort((a, b) => a - b);
  const [wx, wy] = [to[0] - from[0], to[1] - from[1]];
  return cuts.slice(1).flatMap((end, index): Piece[] => {
    const start = cuts[index];
    const middle = (start + end) / 2;
    if (end - start < EPSILON) return [];
    return [
      { x: from[0] + middle * wx, y: from[1] + middle * wy, dx: (end - start) * wx, dy: (end - start) * wy },
    ];
  });
}

/** Taps of one field component along a piece, times how far the piece goes along it, in metres. */
function along(lattice: Lattice, piece: Piece, record: number, sign: number): Tap[] {
  const [ofX, ofY] = lattice.polarization === "TMz" ? (["Hx", "Hy"] as const) : (["Ex", "Ey"] as const);
  return (
    [
      [ofX, piece.dx],
      [ofY, piece.dy],
    ] as const
  ).flatMap(([component, length]) =>
    length === 0
      ? []
      : pointProbeTaps(lattice, component, piece.x, piece.y, record).map((tap) => ({
          ...tap,
          weight: (sign * tap.weight * length) / 1000,
        })),
  );
}

/** ∫E·dl from → to in volts (TEz). Throws a RangeError for TMz, where no E lies in the section's plane. */
export function voltageTaps(lattice: Lattice, from: Point, to: Point, record: number): Tap[] {
  if (lattice.polarization !== "TEz") throw new RangeError("A voltage along a line needs TEz.");
  return piecesOf(lattice, from, to).flatMap((piece) => along(lattice, piece, record, 1));
}

export interface PowerTaps {
  taps: Tap[];
  /** Pieces of the line: each has two records, F and its partner, one after the other from the first record on. */
  pieces: number;
}

/**
 * Records from which the power toward the left of from → to follows as Σ F·G: with n the left normal of the line's direction t,
 * (E × H)·n is Ez·(H·t) in TMz and −Hz·(E·t) in TEz.
 */
export function powerTaps(lattice: Lattice, from: Point, to: Point, firstRecord: number): PowerTaps {
  const pieces = piecesOf(lattice, from, to);
  const onNodes = lattice.polarization === "TMz";
  const taps = pieces.flatMap((piece, index) => [
    ...pointProbeTaps(lattice, onNodes ? "Ez" : "Hz", piece.x, piece.y, firstRecord + 2 * index),
    ...along(lattice, piece, firstRecord + 2 * index + 1, onNodes ? 1 : -1),
  ]);
  return { taps, pieces: pieces.length };
}
