/** What a running scene may become: paint, media and sources may change, its lattice and what is read from it may not. */
import type { Problem, ResolvedScene } from "../scene/index.js";
import { canonicalJson, gridOf } from "../scene/index.js";
import type { GridSummary } from "./session.js";

const same = (a: unknown, b: unknown): boolean => canonicalJson({ value: a }) === canonicalJson({ value: b });

/** Why an edit is refused; empty where it can be applied. Paths are those of the edited scene. */
export function editProblems(running: ResolvedScene, edited: ResolvedScene, grid: GridSummary): Problem[] {
  const problems: Problem[] = [];
  const refuse = (path: string, sentence: string): void => {
    problems.push({ path, sentence });
  };
  const anew = "start a new run for it";
  if (edited.polarization !== running.polarization)
    refuse("polarization", `A run keeps its polarization; ${anew}.`);
  if (!same(edited.section, running.section))
    refuse("section", `A run keeps the size of its section; ${anew}.`);
  if (!same(edited.edges, running.edges)) refuse("edges", `A run keeps the edges of its section; ${anew}.`);
  if (!same(edited.band, running.band)) refuse("band", `A run keeps its band; ${anew}.`);
  if (!same(edited.stop, running.stop)) refuse("stop", `A run keeps its stop condition; ${anew}.`);
  if (!same(edited.mesh, running.mesh)) refuse("mesh", `A run keeps its mesh; ${anew}.`);
  if (!same(edited.probes, running.probes)) refuse("probes", `A run keeps its probes; ${anew}.`);
  if (problems.length > 0) return problems;
  const wanted = gridOf(edited);
  if (wanted.nx !== grid.nx || wanted.ny !== grid.ny) {
    refuse(
      "media",
      `The edited media ask for ${wanted.nx} × ${wanted.ny} cells; the run has ${grid.nx} × ${grid.ny} and keeps them. Give the mesh as a cell size, or ${anew}.`,
    );
  }
  return problems;
}
