/** The yardsticks: two C programs of `kernels/bench`, built and run where gcc is there, in the same run as what they measure. */
import { spawnSync } from "node:child_process";
import { mkdtempSync, rmSync } from "node:fs";
import { tmpdir } from "node:os";
import { join } from "node:path";
import { fileURLToPath } from "node:url";

const SOURCES = fileURLToPath(new URL("../../bench", import.meta.url));
const LONGEST_MS = 300_000;

/** Runs a program; null where it cannot be started or fails. */
const output = (command: string, args: readonly string[]): string | null => {
  const ran = spawnSync(command, args, { encoding: "utf8", timeout: LONGEST_MS });
  return ran.status === 0 ? ran.stdout : null;
};

const figuresOf = (text: string | null, key: string, value: string): Map<number, number> => {
  const figures = new Map<number, number>();
  for (const line of (text ?? "").split("\n").filter((one) => one !== "")) {
    const read = JSON.parse(line) as Record<string, number>;
    figures.set(read[key], read[value]);
  }
  return figures;
};

/** Keeps the best of each figure over all runs, as the cases keep the best of their rounds. */
export class Yardsticks {
  /** Million cell-steps a second of the textbook's loops on one thread, by cells along a side. */
  readonly textbook = new Map<number, number>();
  /** GB/s of memory, by threads. */
  readonly triad = new Map<number, number>();
  private readonly folder: string | null;

  constructor(wanted: boolean) {
    this.folder = wanted ? Yardsticks.build() : null;
  }

  get available(): boolean {
    return this.folder !== null;
  }

  private static build(): string | null {
    const folder = mkdtempSync(join(tmpdir(), "heddle-bench-"));
    const make = (name: string, flag: string): boolean =>
      output("gcc", ["-O3", "-march=native", flag, "-o", join(folder, name), join(SOURCES, `${name}.c`)]) !==
      null;
    if (make("textbook", "-ffast-math") && make("triad", "-fopenmp")) return folder;
    rmSync(folder, { recursive: true, force: true });
    return null;
  }

  measure(cells: number): void {
    this.measureTextbook(cells);
    this.measureTriad();
  }

  private measureTextbook(cells: number): void {
    if (this.folder === null) return;
    const text = output(join(this.folder, "textbook"), [String(cells)]);
    for (const [n, rate] of figuresOf(text, "n", "mcells")) {
      this.textbook.set(n, Math.max(rate, this.textbook.get(n) ?? 0));
    }
  }

  private measureTriad(): void {
    if (this.folder === null) return;
    for (const [threads, rate] of figuresOf(output(join(this.folder, "triad"), []), "threads", "gbs")) {
      this.triad.set(threads, Math.max(rate, this.triad.get(threads) ?? 0));
    }
  }

  dispose(): void {
    if (this.folder !== null) rmSync(this.folder, { recursive: true, force: true });
  }
}
