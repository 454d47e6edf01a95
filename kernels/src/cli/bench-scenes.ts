/** The sections that every release is compared by, drawn anew the same way each time. */
import { readScene, type Scene, type SceneInput } from "../scene/index.js";

export const BENCH_SIZES = [512, 1024, 2048, 4096] as const;
export const BENCH_KINDS = ["empty", "mixed"] as const;
export const BENCH_POLARIZATIONS = ["TMz", "TEz"] as const;
export type BenchKind = (typeof BENCH_KINDS)[number];
export type BenchPolarization = (typeof BENCH_POLARIZATIONS)[number];

type Paint = NonNullable<SceneInput["paint"]>;
type Media = NonNullable<SceneInput["media"]>;

/** Patches of `mixed`: 4 × 3 of them, each in a tile of its own, together 30 % of the section. */
const TILES = { across: 4, up: 3, share: 0.3 };
const PROBES = 16;

/** Numbers from 0 to 1, the same in every run: a multiplicative congruential generator modulo 2³¹ − 1. */
function randomNumbers(seed: number): () => number {
  let state = seed;
  return () => {
    state = (state * 48_271) % 2_147_483_647;
    return state / 2_147_483_647;
  };
}

function lossyPatches(cells: number, random: () => number): { media: Media; paint: Paint } {
  const media: Media = [];
  const paint: Paint = [];
  const [width, height] = [cells / TILES.across, cells / TILES.up];
  const area = TILES.share * width * height;
  for (let tile = 0; tile < TILES.across * TILES.up; tile += 1) {
    const id = `lossy${String(tile)}`;
    media.push({
      id,
      name: `Lossy ${String(tile)}`,
      relativePermittivity: 1.2 + 2 * random(),
      conductivity: 0.002 + 0.05 * random(),
    });
    const x = (tile % TILES.across) * width + width * (0.45 + 0.1 * random());
    const y = Math.floor(tile / TILES.across) * height + height * (0.45 + 0.1 * random());
    const stretch = Math.sqrt(0.6 + 0.8 * random());
    const [a, b] = [Math.sqrt(area) * stretch, Math.sqrt(area) / stretch];
    const angle = 90 * random();
    if (tile % 2 === 0) {
      paint.push({
        kind: "rectangle",
        id: `patch${String(tile)}`,
        medium: id,
        x: x - a / 2,
        y: y - b / 2,
        width: a,
        height: b,
        angle,
      });
    } else {
      const [rx, ry] = [a / Math.sqrt(Math.PI), b / Math.sqrt(Math.PI)];
      paint.push({ kind: "ellipse", id: `patch${String(tile)}`, medium: id, x, y, rx, ry, angle });
    }
  }
  return { media, paint };
}

/** Four walls of metal, 3 cells thick, with a slot in the right one. */
function slottedBox(cells: number): Paint {
  const [x, y, width, height, wall] = [0.62 * cells, 0.58 * cells, 0.2 * cells, 0.25 * cells, 3];
  const slot = Math.max(4, 0.02 * cells);
  const plate = (id: string, left: number, bottom: number, w: number, h: number): Paint[number] => ({
    kind: "rectangle",
    id,
    medium: "pec",
    x: left,
    y: bottom,
    width: w,
    height: h,
  });
  const right = x + width - wall;
  const middle = y + height / 2;
  return [
    plate("floor", x, y, width, wall),
    plate("roof", x, y + height - wall, width, wall),
    plate("back", x, y, wall, height),
    plate("front-low", right, y, wall, middle - slot / 2 - y),
    plate("front-high", right, middle + slot / 2, wall, y + height - middle - slot / 2),
  ];
}

/**
 * N × N cells of 1 mm. `empty` is a metal box of air. `mixed` has 12-cell absorbing edges, twelve lossy rectangles and ellipses
 * over 30 % of the area, a metal box with a slot, a line source and 16 point probes.
 */
function benchInput(kind: BenchKind, cells: number, polarization: BenchPolarization): SceneInput {
  const edge = kind === "empty" ? "electric" : "absorbing";
  const random = randomNumbers(20_261);
  const patches = lossyPatches(cells, random);
  const mixed = kind === "mixed";
  return {
    format: "heddle-scene",
    version: 1,
    name: `${kind}-${String(cells)}`,
    polarization,
    section: { widthMm: cells, heightMm: cells },
    band: { fromGHz: 1, toGHz: 8 },
    mesh: { cellMm: 1 },
    edges: { left: edge, right: edge, bottom: edge, top: edge },
    media: mixed ? patches.media : [],
    paint: mixed ? [...patches.paint, ...slottedBox(cells)] : [],
    sources: [{ kind: "line", id: "wire", x: 0.503 * cells, y: 0.251 * cells }],
    probes: mixed
      ? Array.from({ length: PROBES }, (_, n) => ({
          kind: "point" as const,
          id: `p${String(n)}`,
          x: cells * (0.05 + 0.9 * random()),
          y: cells * (0.05 + 0.9 * random()),
          field: polarization === "TMz" ? ("Ez" as const) : ("Hz" as const),
        }))
      : [],
    // Long enough that no case ends by itself while it is timed.
    stop: { maxTimeNs: 20_000, decayDb: 300 },
  };
}

/** Throws where the scene is refused, which would be a fault of this file. */
export function benchScene(kind: BenchKind, cells: number, polarization: BenchPolarization): Scene {
  const outcome = readScene(benchInput(kind, cells, polarization), { purpose: "run" });
  if (!outcome.ok) {
    const [{ path, sentence }] = outcome.problems;
    throw new Error(`The bench scene ${kind}-${String(cells)} is refused at ${path}: ${sentence}`);
  }
  return outcome.scene;
}
