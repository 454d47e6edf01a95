import { Writable } from "node:stream";
import { describe, expect, it } from "vitest";
import { runBench } from "./bench.js";

class Collected extends Writable {
  text = "";
  override _write(chunk: Buffer, _encoding: string, done: () => void): void {
    this.text += chunk.toString("utf8");
    done();
  }
}
const run = async (args: readonly string[]): Promise<{ status: number; stdout: string; stderr: string }> => {
  const stdout = new Collected();
  const stderr = new Collected();
  return { status: await runBench(args, stdout, stderr), stdout: stdout.text, stderr: stderr.text };
};

describe("bench", () => {
  it("gives the figure of one case as JSON", { timeout: 60_000 }, async () => {
    const ran = await run(["--json", "--case", "mixed-512"]);
    expect(ran).toMatchObject({ status: 0, stderr: "" });
    const [figure, ...others] = JSON.parse(ran.stdout) as {
      steps: number;
      seconds: number;
      cellStepsPerSecond: number;
    }[];
    expect(others).toEqual([]);
    expect(figure).toMatchObject({ case: "mixed-512", engine: "reference", nx: 512, ny: 512 });
    expect(figure.cellStepsPerSecond).toBeCloseTo((512 * 512 * figure.steps) / figure.seconds, 3);
  });

  it("refuses a case and an option that do not exist, by name", async () => {
    expect(await run(["--case", "nope"])).toMatchObject({ status: 2, stdout: "" });
    const option = await run(["--bogus"]);
    expect(option.status).toBe(2);
    expect(option.stderr).toContain("--bogus");
  });
});
