/** Scenes through the public door: a document in, a result out. */
import type { ComplexSpectrum, SceneInput, SolveResult } from "@heddle/kernels/scene";
import { readScene } from "@heddle/kernels/scene";
import type { SessionOptions } from "@heddle/kernels/solving";
import { openSession } from "@heddle/kernels/solving";

type Core = "format" | "version" | "name";
export type Document = Omit<SceneInput, Core> & Partial<Pick<SceneInput, Core>>;

export const ELECTRIC_BOX = {
  left: "electric",
  right: "electric",
  bottom: "electric",
  top: "electric",
} as const;
export const OPEN_SPACE = {
  left: "absorbing",
  right: "absorbing",
  bottom: "absorbing",
  top: "absorbing",
} as const;

/** Runs a scene to its own end. Throws with every problem of a refused scene. */
export async function solve(document: Document, options: SessionOptions = {}): Promise<SolveResult> {
  const read = readScene(
    { format: "heddle-scene", version: 1, name: "accuracy", ...document },
    { purpose: "run" },
  );
  if (!read.ok) throw new Error(read.problems.map(({ path, sentence }) => `${path}: ${sentence}`).join("\n"));
  const session = await openSession(read.scene, options);
  const outcome = session.advance(Number.MAX_SAFE_INTEGER);
  if (outcome.kind !== "ended") throw new Error(`The run did not end: ${JSON.stringify(outcome)}`);
  return session.result();
}

export function traceOf(result: SolveResult, id: string): { start: number; step: number; values: number[] } {
  const probe = result.probes.find((candidate) => candidate.id === id);
  if (!probe) throw new Error(`The result has no probe "${id}".`);
  return { start: probe.trace.startNs * 1e-9, step: probe.trace.stepNs * 1e-9, values: probe.trace.values };
}

/** The complex spectrum of a point probe at the frequency numbered `index`. */
export function phasorOf(result: SolveResult, id: string, index = 0): { re: number; im: number } {
  const spectrum = result.probes.find((candidate) => candidate.id === id)?.spectrum;
  if (!spectrum || !("re" in spectrum)) throw new Error(`The probe "${id}" has no complex spectrum.`);
  const complex: ComplexSpectrum = spectrum;
  const re = complex.re[index];
  const im = complex.im[index];
  if (re === null || im === null)
    throw new Error(`The spectrum of "${id}" is undefined at ${complex.GHz[index]} GHz.`);
  return { re, im };
}

/** S from one port to another at the frequency numbered `index`. */
export function scatteringOf(
  result: SolveResult,
  to: string,
  from: string,
  index: number,
): { re: number; im: number } {
  const entry = result.ports?.s.find((one) => one.to === to && one.from === from);
  const re = entry?.re[index] ?? null;
  const im = entry?.im[index] ?? null;
  if (re === null || im === null)
    throw new Error(`There is no S from "${from}" to "${to}" at index ${index}.`);
  return { re, im };
}
