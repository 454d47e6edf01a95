/** The options of `solve`, parsed and refused by name. */
import { parseArgs } from "node:util";
import type { Problem } from "../scene/index.js";
import type { EngineName, Precision } from "../solving/session.js";

export interface SolveOptions {
  sceneFile: string;
  /** Where the result goes; null: standard output. */
  out: string | null;
  frequenciesGHz: number[] | null;
  /** Solve the scene without its shield patches too. */
  shielding: boolean;
  /** Solve on cells half as large too. */
  twoMesh: boolean;
  /** Undefined: the session's own choice. */
  engine: EngineName | undefined;
  precision: Precision | undefined;
  /** Undefined: as many as the machine has cores. */
  threads: number | undefined;
}

export const SOLVE_USAGE =
  "npm run --silent solve -- SCENE.json [--out RESULT.json] [--frequencies 1,2.5,4] [--shielding] [--two-mesh] [--engine wasm|reference] [--precision f32|f64] [--threads N]";

const MOST_FREQUENCIES = 100_000;
const MOST_THREADS = 64;

const isEngine = (text: string): text is EngineName => text === "wasm" || text === "reference";
const isPrecision = (text: string): text is Precision => text === "f32" || text === "f64";

export type ParsedOptions = { ok: true; options: SolveOptions } | { ok: false; problems: Problem[] };

const parseFrequencies = (text: string): number[] | Problem => {
  const path = "--frequencies";
  const values = text.split(",").map((part) => (part.trim() === "" ? Number.NaN : Number(part)));
  if (values.length > MOST_FREQUENCIES)
    return { path, sentence: `It names more than ${String(MOST_FREQUENCIES)} frequencies; give fewer.` };
  const wrong = values.findIndex((value) => !(value > 0 && Number.isFinite(value)));
  if (wrong >= 0)
    return {
      path,
      sentence: `Entry ${String(wrong + 1)} is no frequency; give GHz above 0 separated by commas, such as 1,2.5,4.`,
    };
  return values;
};

/** Parses the arguments after the command's name. All problems come at once, with the option as path. */
export const parseSolveOptions = (args: readonly string[]): ParsedOptions => {
  let parsed;
  try {
    parsed = parseArgs({
      args: [...args],
      allowPositionals: true,
      options: {
        out: { type: "string" },
        frequencies: { type: "string" },
        shielding: { type: "boolean" },
        "two-mesh": { type: "boolean" },
        engine: { type: "string" },
        precision: { type: "string" },
        threads: { type: "string" },
      },
    });
  } catch (error) {
    const reason =
      error instanceof Error ? (error.message.split(/\.(?:\s|$)/)[0] ?? "") : "they cannot be read";
    return { ok: false, problems: [{ path: "options", sentence: `${reason}. Usage: ${SOLVE_USAGE}` }] };
  }
  const { values, positionals } = parsed;
  const problems: Problem[] = [];
  const [sceneFile, ...more] = positionals;
  if (positionals.length === 0)
    problems.push({ path: "options", sentence: `Name the scene to solve. Usage: ${SOLVE_USAGE}` });
  if (more.length > 0)
    problems.push({ path: "options", sentence: `One scene at a time; "${more[0]}" is one too many.` });
  const { engine, precision } = values;
  if (engine !== undefined && !isEngine(engine))
    problems.push({ path: "--engine", sentence: `There is no engine "${engine}"; use wasm or reference.` });
  if (precision !== undefined && !isPrecision(precision))
    problems.push({ path: "--precision", sentence: `"${precision}" is no precision; use f32 or f64.` });
  if (engine === "wasm" && precision === "f64")
    problems.push({
      path: "--precision",
      sentence: "The wasm engine computes in f32; use --engine reference for f64.",
    });
  const threads = Number(values.threads ?? "1");
  if (!Number.isInteger(threads) || threads < 1 || threads > MOST_THREADS)
    problems.push({
      path: "--threads",
      sentence: `"${values.threads ?? ""}" is no number of threads; give 1 to ${String(MOST_THREADS)}.`,
    });
  if (values.out === "") problems.push({ path: "--out", sentence: "Name the file that the result goes to." });
  const frequencies = values.frequencies === undefined ? null : parseFrequencies(values.frequencies);
  if (frequencies !== null && !Array.isArray(frequencies)) problems.push(frequencies);
  if (problems.length > 0 || (frequencies !== null && !Array.isArray(frequencies)))
    return { ok: false, problems };
  return {
    ok: true,
    options: {
      sceneFile,
      out: values.out ?? null,
      frequenciesGHz: frequencies,
      shielding: values.shielding === true,
      twoMesh: values["two-mesh"] === true,
      engine: engine !== undefined && isEngine(engine) ? engine : undefined,
      precision: precision !== undefined && isPrecision(precision) ? precision : undefined,
      threads: values.threads === undefined ? undefined : threads,
    },
  };
};
