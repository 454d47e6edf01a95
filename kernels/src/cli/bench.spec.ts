import { Writable } from "node:stream";
import { describe, expect, it } from "vitest";
import { type BenchPace, runBench } from "./bench.js";
import { type BenchFigure, benchRatios } from "./bench-ratios.js";
import { Yardsticks } from "./bench-yardsticks.js";

class Collected extends Writable {
  text = "";
  override _write(chunk: Buffer, _encoding: string, done: () => void): void {
    this.text += chunk.toString("utf8");
    done();
  }
}
const SHORT: BenchPace = { rounds: 2, roundSeconds: 0.01, threads: [1, 2], yardsticks: false };
const run = async (args: readonly string[]): Promise<{ status: number; stdout: string; stderr: string }> => {
  const stdout = new Collected();
  const stderr = new Collected();
  return { status: await runBench(args, stdout, stderr, SHORT), stdout: stdout.text, stderr: stderr.text };
};

describe("bench", () => {
  it("gives the figures of one case as JSON", { timeout: 60_000 }, async () => {
    const ran = await run(["--json", "--case", "mixed-512"]);
    expect(ran).toMatchObject({ status: 0, stderr: "" });
    const { cases } = JSON.parse(ran.stdout) as { cases: BenchFigure[] };
    expect(cases.map(({ polarization, threads }) => `${polarization} ${String(threads)}`)).toEqual([
      "TMz 1",
      "TMz 2",
      "TEz 1",
      "TEz 2",
    ]);
    for (const figure of cases) {
      expect(figure).toMatchObject({ case: "mixed-512", engine: "wasm", nx: 512, ny: 512, cells: 512 * 512 });
      expect(figure.steps % 64).toBe(0);
      expect(figure.millionCellStepsPerSecond).toBeGreaterThanOrEqual(figure.medianMillionCellStepsPerSecond);
      expect(figure.medianMillionCellStepsPerSecond).toBeGreaterThan(0);
    }
  });

  it("takes ratios from figures and yardsticks of the same run, and none where one is missing", () => {
    const figure = (name: string, polarization: string, threads: number, rate: number): BenchFigure => ({
      case: name,
      polarization,
      engine: "wasm",
      threads,
      nx: 1,
      ny: 1,
      cells: 1,
      steps: 64,
      millionCellStepsPerSecond: rate,
      medianMillionCellStepsPerSecond: rate,
      openSeconds: 0,
    });
    const yardsticks = new Yardsticks(false);
    expect(yardsticks.available).toBe(false);
    yardsticks.textbook.set(2048, 400);
    yardsticks.triad.set(2, 24);
    const figures = [
      figure("mixed-2048", "TMz", 1, 1000),
      figure("mixed-2048", "TMz", 2, 1800),
      figure("mixed-2048", "TEz", 2, 1710),
      figure("mixed-512", "TMz", 2, 2000),
    ];
    expect(benchRatios(figures, yardsticks).map(({ value }) => value)).toEqual([4.5, 1.8, 1.8, 0.95]);
  });

  it("refuses a case and an option that do not exist, by name", async () => {
    expect(await run(["--case", "nope"])).toMatchObject({ status: 2, stdout: "" });
    const option = await run(["--bogus"]);
    expect(option.status).toBe(2);
    expect(option.stderr).toContain("--bogus");
  });
});
