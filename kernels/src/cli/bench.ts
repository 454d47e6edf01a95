/** `bench`: cell-steps a second of the reference engine on sections that every release can be compared by. */
import type { Writable } from "node:stream";
import { parseArgs } from "node:util";
import { readScene, type Scene, type SceneInput } from "../scene/index.js";
import { openSession } from "../solving/index.js";

interface BenchCase {
  name: string;
  cells: number;
  scene: Scene;
}

export interface BenchFigure {
  case: string;
  engine: string;
  nx: number;
  ny: number;
  steps: number;
  seconds: number;
  cellStepsPerSecond: number;
}

const MEASURED_SECONDS = 3;
const WARM_STEPS = 4;
const TURN_STEPS = 4;

/** N × N cells of 1 mm; `mixed` has lossy areas, metal and absorbing edges, `empty` is a metal box of air. */
const benchScene = (kind: "empty" | "mixed", cells: number): SceneInput => ({
  format: "heddle-scene",
  version: 1,
  name: `${kind}-${String(cells)}`,
  polarization: "TMz",
  section: { widthMm: cells, heightMm: cells },
  band: { fromGHz: 1, toGHz: 10 },
  mesh: { cellMm: 1 },
  edges:
    kind === "empty"
      ? { left: "electric", right: "electric", bottom: "electric", top: "electric" }
      : { left: "absorbing", right: "absorbing", bottom: "absorbing", top: "absorbing" },
  media:
    kind === "empty" ? [] : [{ id: "foam", name: "Foam", relativePermittivity: 1.8, conductivity: 0.05 }],
  paint:
    kind === "empty"
      ? []
      : [
          {
            kind: "rectangle",
            id: "foam",
            medium: "foam",
            x: 0.1 * cells,
            y: 0.1 * cells,
            width: 0.3 * cells,
            height: 0.3 * cells,
          },
          {
            kind: "ellipse",
            id: "post",
            medium: "pec",
            x: 0.7 * cells,
            y: 0.6 * cells,
            rx: 0.1 * cells,
            ry: 0.15 * cells,
          },
        ],
  sources: [{ kind: "line", id: "wire", x: 0.5 * cells, y: 0.25 * cells }],
  // Long enough that no case ends by itself while it is timed.
  stop: { maxTimeNs: 20_000, decayDb: 300 },
});

const benchCases = (): BenchCase[] =>
  [512, 1024].flatMap((cells) =>
    (["empty", "mixed"] as const).map((kind) => {
      const name = `${kind}-${String(cells)}`;
      const outcome = readScene(benchScene(kind, cells), { purpose: "run" });
      if (!outcome.ok) throw new Error(`The bench scene ${name} is refused: ${outcome.problems[0].sentence}`);
      return { name, cells, scene: outcome.scene };
    }),
  );

const measure = async (bench: BenchCase): Promise<BenchFigure> => {
  const session = await openSession(bench.scene, { engine: "reference" });
  try {
    session.advance(WARM_STEPS);
    const from = session.step;
    const started = performance.now();
    let seconds = 0;
    while (seconds < MEASURED_SECONDS) {
      const outcome = session.advance(TURN_STEPS);
      if (outcome.kind !== "running") throw new Error(`The bench ${bench.name} ended before it was timed.`);
      seconds = (performance.now() - started) / 1000;
    }
    const { nx, ny } = session.grid;
    const steps = session.step - from;
    return {
      case: bench.name,
      engine: "reference",
      nx,
      ny,
      steps,
      seconds,
      cellStepsPerSecond: (nx * ny * steps) / seconds,
    };
  } finally {
    session.dispose();
  }
};

/** Measures every case, or the one that `--case` names. Resolves with the exit status: 0, or 2 for a wrong option. */
export const runBench = async (
  args: readonly string[],
  stdout: Writable,
  stderr: Writable,
): Promise<0 | 2> => {
  let values: { json?: boolean; case?: string };
  try {
    ({ values } = parseArgs({
      args: [...args],
      options: { json: { type: "boolean" }, case: { type: "string" } },
    }));
  } catch (error) {
    stderr.write(
      `options: ${error instanceof Error ? error.message : "They cannot be read"}; use --json and --case NAME.\n`,
    );
    return 2;
  }
  const all = benchCases();
  const chosen = values.case === undefined ? all : all.filter(({ name }) => name === values.case);
  if (chosen.length === 0) {
    stderr.write(
      `--case: There is no case "${values.case ?? ""}"; use ${all.map(({ name }) => name).join(", ")}.\n`,
    );
    return 2;
  }
  const figures: BenchFigure[] = [];
  for (const bench of chosen) {
    const figure = await measure(bench);
    figures.push(figure);
    if (values.json !== true)
      stdout.write(
        `${figure.case.padEnd(12)} ${figure.engine}  ${(figure.cellStepsPerSecond / 1e6).toFixed(1).padStart(7)} M cell-steps/s\n`,
      );
  }
  if (values.json === true) stdout.write(`${JSON.stringify(figures)}\n`);
  return 0;
};
