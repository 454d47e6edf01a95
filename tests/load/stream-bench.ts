/**
 * Measures the stream on the built server: a lossy box on an n × n lattice, driven by a tone, watched by some
 * viewers that acknowledge every frame. Prints what came and how late the server's event loop was meanwhile.
 *
 * `npm run bench:stream -w tests -- [--cells 1024] [--viewers 1] [--size 1024] [--seconds 15] [--rate 30]`
 */
import { parseArgs } from "node:util";
import type { SceneInput } from "@heddle/kernels/scene";
import { startServer } from "../support/server.js";
import { openViewer, until, type Viewer } from "../support/viewer.js";

interface Load {
  eventLoopDelayMs: { p50: number; p99: number; max: number };
  residentBytes: number;
  cpuMs: number;
}
interface Run {
  id: string;
  state: string;
  step: number;
  cellStepsPerSecond: number | null;
}

const { values } = parseArgs({
  options: {
    cells: { type: "string", default: "1024" },
    viewers: { type: "string", default: "1" },
    size: { type: "string", default: "1024" },
    seconds: { type: "string", default: "15" },
    rate: { type: "string", default: "30" },
  },
});
const cells = Number(values.cells);
const viewers = Number(values.viewers);
const size = Number(values.size);
const seconds = Number(values.seconds);
const rate = Number(values.rate);
const sleep = (ms: number): Promise<void> => new Promise((resolve) => setTimeout(resolve, ms));

/** Cells of 1 mm; 20 of them in a wavelength. */
const box = (n: number, liningShare = 0.2): SceneInput => ({
  format: "heddle-scene",
  version: 1,
  name: "Bench box",
  polarization: "TMz",
  section: { widthMm: n, heightMm: n },
  band: { fromGHz: 5, toGHz: 14 },
  mesh: { cellMm: 1 },
  edges: { left: "absorbing", right: "absorbing", bottom: "absorbing", top: "absorbing" },
  media: [{ id: "lining", name: "Lining", conductivity: 0.5 }],
  paint: [
    {
      id: "lining",
      kind: "rectangle",
      x: 0.1 * n,
      y: 0.1 * n,
      width: liningShare * n,
      height: 0.8 * n,
      medium: "lining",
    },
  ],
  sources: [{ id: "wire", kind: "line", x: 0.6 * n, y: 0.5 * n, waveform: { kind: "tone", GHz: 10 } }],
  probes: [{ id: "far", kind: "point", x: 0.8 * n, y: 0.8 * n, field: "Ez" }],
  stop: { maxTimeNs: 20_000, decayDb: 300 },
});

const server = await startServer();
const open: Viewer[] = [];
try {
  const owner = await server.as("owner");
  const scene = await owner.scene(box(cells));
  const run = await owner.run(scene.id);
  const get = async (): Promise<Run> => (await owner.send<Run>("GET", `/api/runs/${run.id}`)).body;
  const load = async (): Promise<Load> => (await owner.send<Load>("GET", "/api/health/load")).body;
  await until(async () => (await get()).step > 0, 60_000);
  for (let index = 0; index < viewers; index++) {
    const viewer = await openViewer(server.url, { cookie: owner.cookie, keepFrames: 2 });
    open.push(viewer);
    await viewer.join(run.id);
    await viewer.view({
      runId: run.id,
      quantity: "Ez",
      width: size,
      height: size,
      range: null,
      framesPerSecond: rate,
    });
  }
  const counts = open.map(() => 0);
  let bytes = 0;
  open.forEach((viewer, index) =>
    viewer.socket.on("frame", (_runId, message) => {
      counts[index] = (counts[index] ?? 0) + 1;
      bytes += message.byteLength;
    }),
  );

  /** From sending an edit to the first frame that shows it, in rising order. */
  const editLatenciesMs = async (times: number): Promise<number[]> => {
    const taken: number[] = [];
    const watching = open.at(0);
    for (let n = 1; watching !== undefined && n <= times; n++) {
      const sentAt = performance.now();
      const answer = await owner.send<{ step: number }>("POST", `/api/runs/${run.id}/edits`, {
        document: box(cells, 0.2 + n * 0.02),
      });
      if (answer.status !== 200) throw new Error(`The edit was answered with ${answer.status}.`);
      await until(() => (watching.frames.at(-1)?.step ?? 0) > answer.body.step);
      taken.push(performance.now() - sentAt);
    }
    return taken.sort((a, b) => a - b);
  };

  await sleep(2_000);
  counts.fill(0);
  bytes = 0;
  const before = await load();
  const stepBefore = (await get()).step;
  const startMs = performance.now();
  await sleep(seconds * 1000);
  const after = await load();
  const tookS = (performance.now() - startMs) / 1000;
  const steps = (await get()).step - stepBefore;
  const mean = counts.reduce((sum, count) => sum + count, 0) / Math.max(1, counts.length) / tookS;
  const worst = counts.length === 0 ? 0 : Math.min(...counts) / tookS;
  const answered = await editLatenciesMs(9);
  const { p50, p99, max } = after.eventLoopDelayMs;
  const lines = [
    `lattice              ${cells} × ${cells}, ${steps} steps in ${tookS.toFixed(1)} s`,
    `solver               ${((steps * cells * cells) / tookS / 1e6).toFixed(1)} million cell-steps/s`,
    `viewers              ${viewers}, ${size} × ${size} at ${rate} frames/s asked`,
    `frames/s             ${mean.toFixed(1)} mean, ${worst.toFixed(1)} for the worst viewer`,
    `stream               ${(bytes / tookS / 1e6).toFixed(1)} MB/s`,
    `event loop delay     p50 ${p50.toFixed(1)} ms, p99 ${p99.toFixed(1)} ms, max ${max.toFixed(1)} ms`,
    `server processor     ${(((after.cpuMs - before.cpuMs) / (tookS * 1000)) * 100).toFixed(0)} % of one core, solver included`,
    `live edit to frame   ${answered.at(4)?.toFixed(0) ?? "–"} ms median, ${answered.at(-1)?.toFixed(0) ?? "–"} ms worst of ${answered.length}`,
    `server memory        ${(after.residentBytes / 1e6).toFixed(0)} MB resident`,
  ];
  process.stdout.write(`${lines.join("\n")}\n`);
  await owner.send("POST", `/api/runs/${run.id}/commands`, { kind: "stop" });
} finally {
  for (const viewer of open) viewer.close();
  await server.stop();
}
