/** What a running scene may become: paint, media and sources may change, its lattice and what is read from it may not. */
import type { FieldArray, Lattice } from "../lattice/index.js";
import { cellOfColumn, cellOfRow } from "../lattice/index.js";
import type { LatticeBox } from "../media/index.js";
import { wholeLattice } from "../media/index.js";
import type { Problem, ResolvedPatch, ResolvedScene } from "../scene/index.js";
import { canonicalJson, gridOf } from "../scene/index.js";
import type { CoefficientSource, Engine } from "../stepping/index.js";
import { rowCoefficients } from "../stepping/index.js";
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
  if (!same(edited.ports, running.ports)) refuse("ports", `A run keeps its ports; ${anew}.`);
  if (problems.length > 0) return problems;
  const wanted = gridOf(edited);
  if (wanted.nx !== grid.nx || wanted.ny !== grid.ny) {
    refuse(
      "media",
      `The edited media ask for ${wanted.nx} × ${wanted.ny} cells; the run has ${grid.nx} × ${grid.ny} and keeps them. Give the mesh as a cell size, or ${anew}.`,
    );
  }
  // Metal that leaves the mesh lines would get a smaller step in a new run; here the cut cells are held stable at the run's
  // own step (media/open-faces.ts), which costs accuracy, and an edited run is for the eye.
  return problems;
}

interface MmBox {
  left: number;
  right: number;
  bottom: number;
  top: number;
}

/** A box that surely holds the patch. */
function boxOf(patch: ResolvedPatch): MmBox {
  const around = (x: number, y: number, rx: number, ry: number): MmBox => ({
    left: x - rx,
    right: x + rx,
    bottom: y - ry,
    top: y + ry,
  });
  if (patch.kind === "rectangle") {
    const { x, y, width, height, angle } = patch;
    const turned = angle !== 0;
    const reach = Math.hypot(width, height) / 2;
    return around(x + width / 2, y + height / 2, turned ? reach : width / 2, turned ? reach : height / 2);
  }
  if (patch.kind === "ellipse") {
    const { x, y, rx, ry, angle } = patch;
    const reach = Math.max(rx, ry) * 1.01;
    return around(x, y, angle !== 0 ? reach : rx * 1.01, angle !== 0 ? reach : ry * 1.01);
  }
  const margin = patch.kind === "stroke" ? patch.widthMm * 0.51 : 0;
  const box = { left: Infinity, right: -Infinity, bottom: Infinity, top: -Infinity };
  for (const [x, y] of patch.points) {
    box.left = Math.min(box.left, x - margin);
    box.right = Math.max(box.right, x + margin);
    box.bottom = Math.min(box.bottom, y - margin);
    box.top = Math.max(box.top, y + margin);
  }
  return box;
}

/**
 * Field points this far (in cells) outside a changed patch may change with it: it takes a corner's room from half the distance, and
 * the field about a corner is followed over five cells.
 */
const REACH_CELLS = 17;

/**
 * The part of the lattice whose coefficients an edit can change; null where it changes none. Paint of the two scenes is compared
 * in order, media included: what lies between their common beginning and their common end has changed.
 */
export function changedBox(before: ResolvedScene, after: ResolvedScene, lattice: Lattice): LatticeBox | null {
  const textOf = (scene: ResolvedScene, patch: ResolvedPatch): string =>
    canonicalJson({ patch, medium: "medium" in patch ? scene.mediaById.get(patch.medium) : null });
  const background = (scene: ResolvedScene): unknown => scene.mediaById.get(scene.background);
  if (!same(background(before), background(after))) return wholeLattice(lattice);
  const old = before.paint.map((patch) => textOf(before, patch));
  const now = after.paint.map((patch) => textOf(after, patch));
  let start = 0;
  while (start < old.length && start < now.length && old[start] === now[start]) start += 1;
  let end = 0;
  while (end < old.length - start && end < now.length - start && old.at(-1 - end) === now.at(-1 - end))
    end += 1;
  const changed = [
    ...before.paint.slice(start, before.paint.length - end),
    ...after.paint.slice(start, after.paint.length - end),
  ].map(boxOf);
  if (changed.length === 0) return null;
  const left = Math.min(...changed.map((box) => box.left)) / 1000 / lattice.dx - REACH_CELLS;
  const right = Math.max(...changed.map((box) => box.right)) / 1000 / lattice.dx + REACH_CELLS;
  const bottom = Math.min(...changed.map((box) => box.bottom)) / 1000 / lattice.dy - REACH_CELLS;
  const top = Math.max(...changed.map((box) => box.top)) / 1000 / lattice.dy + REACH_CELLS;
  const whole = wholeLattice(lattice);
  // What reaches the edge of the section goes on into the layers behind it.
  return {
    firstColumn: left <= 0 ? 0 : Math.floor(left - cellOfColumn(lattice, 0)),
    lastColumn: right >= lattice.nx ? whole.lastColumn : Math.ceil(right - cellOfColumn(lattice, 0)),
    firstRow: bottom <= 0 ? 0 : Math.floor(bottom - cellOfRow(lattice, 0)),
    lastRow: top >= lattice.ny ? whole.lastRow : Math.ceil(top - cellOfRow(lattice, 0)),
  };
}

/**
 * A source of coefficients that, row by row before they take effect, clears fields which could not leave by themselves: a point
 * that becomes a conductor would keep its field frozen; one so lossy that its field dies within a step (a < 0) would let it
 * ring at the step rate in the semi-implicit form.
 */
export function clearingOverdamped(engine: Engine, source: CoefficientSource): CoefficientSource {
  const { stride } = engine.lattice;
  const { f, gx, gy } = engine.fields;
  const before = rowCoefficients(stride);
  return (j, after) => {
    source(j, after);
    engine.readCoefficients(j, before);
    const base = j * stride;
    const clear = (field: FieldArray, aOld: Float64Array, aNew: Float64Array, bNew: Float64Array): void => {
      for (let i = 0; i < stride; i += 1) {
        if (bNew[i] === 0 || (aNew[i] < 0 && aOld[i] >= 0)) field[base + i] = 0;
      }
    };
    clear(f, before.aF, after.aF, after.bF);
    clear(gx, before.aGx, after.aGx, after.bGx);
    clear(gy, before.aGy, after.aGy, after.bGy);
  };
}
