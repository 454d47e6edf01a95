/** Triangles over the filled part of a section, each of one medium, with the kind of wall on each side. */
import type { Raster } from "../../geometry/index.js";
import type { Drawing, SectionSide } from "./drawing.js";
import { drawingOf, SIDES } from "./drawing.js";
import type { FrameEdge } from "./frame.js";
import { buildFrame, isFill } from "./frame.js";
import { placePoints } from "./points.js";
import { singularVertices } from "./singular.js";
import type { Triangles } from "./triangulation.js";
import { edgeKey, nextHalf, triangulate } from "./triangulation.js";
import type { ResolvedScene } from "../../scene/index.js";

export const INNER = 0;
export const ELECTRIC = 1;
export const MAGNETIC = 2;
/** An absorbing edge of the section that no metal covers. */
export const OPEN = 3;

export interface SectionMesh {
  drawing: Drawing;
  /** x, y of vertex n at 2n, 2n + 1 (mm). */
  coordinates: Float64Array;
  count: number;
  /** Three vertices a triangle, counter-clockwise. */
  corners: Uint32Array;
  /** By side 3t + k, from corner k to the next: INNER, ELECTRIC, MAGNETIC or OPEN. */
  walls: Uint8Array;
  /** By side: the triangle's side beyond it, or −1 at a wall. */
  beyond: Int32Array;
  /** By side: Ω per square of the film on it, or 0. */
  films: Float64Array;
  /** By triangle: index of its medium. */
  medium: Int32Array;
  /** Thin walls end in the open, where |H_t|² of a TM mode has no integral. */
  freeWallEnds: boolean;
  legMm: number;
}

/** Medium of every triangle of the whole triangulation. */
function mediaOf(
  { corners }: Triangles,
  xy: Float64Array,
  onlyMedium: Int32Array,
  raster: Raster,
  locate: (xs: number[], ys: number[]) => Int32Array,
): Int32Array {
  const count = corners.length / 3;
  const medium = new Int32Array(count);
  const unsure: number[] = [];
  const xs: number[] = [];
  const ys: number[] = [];
  for (let t = 0; t < count; t += 1) {
    let x = 0;
    let y = 0;
    for (let k = 0; k < 3; k += 1) {
      x += xy[2 * corners[3 * t + k]] / 3;
      y += xy[2 * corners[3 * t + k] + 1] / 3;
    }
    const i = Math.min(raster.columns - 1, Math.floor((x / raster.widthMm) * raster.columns));
    const j = Math.min(raster.rows - 1, Math.floor((y / raster.heightMm) * raster.rows));
    medium[t] = onlyMedium[j * raster.columns + i];
    if (medium[t] < 0) {
      unsure.push(t);
      xs.push(x);
      ys.push(y);
    }
  }
  const found = locate(xs, ys);
  unsure.forEach((t, n) => {
    medium[t] = found[n];
  });
  return medium;
}

function wallBeyond(drawing: Drawing, edge: FrameEdge | undefined, medium: number): number {
  if (edge !== undefined && edge.wall >= 0) return ELECTRIC;
  if (medium < 0) {
    const kind = edge !== undefined && edge.side >= 0 ? drawing.edges[SIDES[edge.side]] : "electric";
    return kind === "magnetic" ? MAGNETIC : kind === "absorbing" ? OPEN : ELECTRIC;
  }
  const { kind } = drawing.media[medium];
  return kind === "fill" ? INNER : kind === "magnetic" ? MAGNETIC : ELECTRIC;
}

/** Columns and rows of elements with legs of at most `legMm`. */
export function rasterOf(widthMm: number, heightMm: number, legMm: number): Raster {
  const along = (length: number): number => Math.max(1, Math.ceil(length / legMm - 1e-6));
  return { widthMm, heightMm, columns: along(widthMm), rows: along(heightMm) };
}

/**
 * Meshes the filled part of a scene's section with triangles whose legs are about `legMm`, smaller where the drawing is finer.
 * Throws an Error with a sentence where the drawing defeats it.
 */
export function meshSection(scene: ResolvedScene, legMm: number): SectionMesh {
  const drawing = drawingOf(scene, legMm);
  const raster = rasterOf(drawing.widthMm, drawing.heightMm, legMm);
  const frame = buildFrame(drawing, legMm, raster);
  const stiffness = (index: number): number => {
    const medium = drawing.media[index];
    if (medium.kind !== "fill") return 1;
    return scene.polarization === "TMz" ? medium.mu : medium.epsilon;
  };
  const singular = singularVertices(drawing, frame, stiffness);
  const points = placePoints(drawing, frame, singular, legMm, raster);
  const { coordinates, pieces, onlyMedium } = points;
  const triangles = triangulate(coordinates, pieces);
  const all = mediaOf(triangles, coordinates, onlyMedium, raster, (xs, ys) => frame.locator.locate(xs, ys));
  const frameEdges = new Map(pieces.map(({ from, to, edge }) => [edgeKey(from, to), edge]));
  const { corners, twins } = triangles;
  const kept: number[] = [];
  for (let t = 0; t < all.length; t += 1) if (isFill(drawing, all[t])) kept.push(t);
  const index = new Int32Array(all.length).fill(-1);
  kept.forEach((t, n) => {
    index[t] = n;
  });
  const mesh: SectionMesh = {
    drawing,
    coordinates,
    count: kept.length,
    corners: new Uint32Array(3 * kept.length),
    walls: new Uint8Array(3 * kept.length),
    beyond: new Int32Array(3 * kept.length).fill(-1),
    films: new Float64Array(3 * kept.length),
    medium: Int32Array.from(kept, (t) => all[t]),
    freeWallEnds: false,
    legMm,
  };
  // Delaunator's triangles all turn the same way; the mesh's turn counter-clockwise.
  const clockwise = kept.length > 0 && signedArea(coordinates, corners, 3 * kept[0]) < 0;
  kept.forEach((t, n) => {
    for (let k = 0; k < 3; k += 1) {
      const h = 3 * t + k;
      const side = clockwise ? 2 - k : k;
      mesh.corners[3 * n + side] = corners[clockwise ? nextHalf(h) : h];
      const twin = twins[h];
      const other = twin < 0 ? -1 : Math.floor(twin / 3);
      const edge = frameEdges.get(edgeKey(corners[h], corners[nextHalf(h)]));
      const wall = wallBeyond(drawing, edge, other < 0 ? -1 : all[other]);
      mesh.walls[3 * n + side] = wall;
      if (wall === INNER) {
        const k2 = twin % 3;
        mesh.beyond[3 * n + side] = 3 * index[other] + (clockwise ? 2 - k2 : k2);
      }
      if (edge !== undefined && edge.film >= 0)
        mesh.films[3 * n + side] = drawing.lines[edge.film].ohmsPerSquare ?? 0;
    }
  });
  mesh.freeWallEnds = singular.some(({ exponent }) => exponent <= 0.5 + 1e-9);
  return mesh;
}

function signedArea(xy: Float64Array, corners: Uint32Array, at: number): number {
  const [a, b, c] = [corners[at], corners[at + 1], corners[at + 2]];
  return (
    (xy[2 * b] - xy[2 * a]) * (xy[2 * c + 1] - xy[2 * a + 1]) -
    (xy[2 * c] - xy[2 * a]) * (xy[2 * b + 1] - xy[2 * a + 1])
  );
}

/** Length in mm of each absorbing edge that no metal covers. */
export function openLengths(mesh: SectionMesh): Map<SectionSide, number> {
  const { coordinates: xy, drawing } = mesh;
  const lengths = new Map<SectionSide, number>();
  for (let s = 0; s < mesh.walls.length; s += 1) {
    if (mesh.walls[s] !== OPEN) continue;
    const a = mesh.corners[s];
    const b = mesh.corners[nextHalf(s)];
    const x = (xy[2 * a] + xy[2 * b]) / 2;
    const y = (xy[2 * a + 1] + xy[2 * b + 1]) / 2;
    const near: [SectionSide, number][] = [
      ["left", x],
      ["right", drawing.widthMm - x],
      ["bottom", y],
      ["top", drawing.heightMm - y],
    ];
    near.sort((p, q) => p[1] - q[1]);
    const side = near[0][0];
    const length = Math.hypot(xy[2 * b] - xy[2 * a], xy[2 * b + 1] - xy[2 * a + 1]);
    lengths.set(side, (lengths.get(side) ?? 0) + length);
  }
  return lengths;
}
