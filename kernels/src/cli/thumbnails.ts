/** Draws `thumbnail.png` for every example: `node kernels/bin/thumbnails.mjs [NAME …]`. */
import { readdirSync, readFileSync, writeFileSync } from "node:fs";
import { join } from "node:path";
import { readScene, resolveScene } from "../scene/index.js";
import { openSession } from "../solving/index.js";
import { drawThumbnail } from "./thumbnail.js";

const WIDTH = 480;
/** The moment of each picture in ns: waves well on their way, before a long ring-down blurs what happened. */
const MOMENT_NS: Readonly<Record<string, number>> = {
  "channel-isolation": 0.5,
  "door-choke": 1.1,
  "e-plane-mitre": 0.6,
  filter: 4.5,
  "filter-off": 4.5,
  "flange-overlap-2": 0.62,
  "flange-overlap-10": 0.62,
  "h-plane-bend": 1.6,
  "h-plane-tee": 1.9,
  iris: 1.1,
  "load-middle": 1.4,
  "load-wall": 1.4,
  "load-walls": 1.4,
  "matched-layer": 1.1,
  "pod-lining-foam": 9,
  "pod-lining-sheet": 9,
  "pod-rings": 4,
  "ridge-gap": 1.5,
  "round-guide": 1.2,
  "slotted-box-tone": 12,
  "vent-along": 1.05,
  "vent-across": 1.2,
  "via-fence": 1.7,
};
const DEFAULT_NS = 2.5;

const draw = async (folder: string, name: string): Promise<void> => {
  const read = readScene(readFileSync(join(folder, name, "scene.json"), "utf8"), { purpose: "run" });
  if (!read.ok)
    throw new Error(`${name} is refused: ${read.problems.map(({ sentence }) => sentence).join(" ")}`);
  const scene = resolveScene(read.scene);
  const session = await openSession(read.scene);
  try {
    session.advance(Math.round(((MOMENT_NS[name] ?? DEFAULT_NS) * 1000) / session.grid.stepPs));
    const quantity = scene.polarization === "TMz" ? "Ez" : "Hz";
    const field = session.sampleField({ quantity, width: session.grid.nx, height: session.grid.ny });
    writeFileSync(join(folder, name, "thumbnail.png"), drawThumbnail(scene, field, WIDTH));
  } finally {
    session.dispose();
  }
};

/** Draws the examples that `names` lists, or all below `folder`. */
export const drawThumbnails = async (folder: string, names: readonly string[]): Promise<void> => {
  const all = readdirSync(folder, { withFileTypes: true })
    .filter((entry) => entry.isDirectory())
    .map((entry) => entry.name);
  for (const name of names.length > 0 ? names : all) await draw(folder, name);
};
