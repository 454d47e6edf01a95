/** The lowest modes of one mesh, checked for completeness by an inertia count. */
import { PivotError } from "./algebra/factorization.js";
import type { Factorization } from "./algebra/factorization.js";
import type { Eigenpair, Search } from "./algebra/lanczos.js";
import { lowestEigenpairs } from "./algebra/lanczos.js";
import type { ElementSpace } from "./space.js";
import { factorShifted, multiplyMass } from "./space.js";

/** Modes beyond those asked for, among which the inertia's shift finds a gap. */
const GUARD = 2;
const ROUNDS = 6;
/** Two meshes' eigenvalues within this are taken for the same mode's. */
const ALIKE = 2e-3;

/** Constants on the floating parts, with unit mass. */
function statics(space: ElementSpace): Float64Array[] {
  return space.floating.map((dofs) => {
    const x = new Float64Array(space.unknowns);
    for (const dof of dofs) x[dof] = 1;
    const mass = new Float64Array(space.unknowns);
    multiplyMass(space, x, mass);
    let norm = 0;
    for (let i = 0; i < x.length; i += 1) norm += x[i] * mass[i];
    return x.map((value) => value / Math.sqrt(norm));
  });
}

/** A shift below the whole spectrum, on the scale of the first eigenvalue: (π / longest extent)². */
function shiftBelow(space: ElementSpace): number {
  const { drawing } = space.mesh;
  const longest = Math.max(drawing.widthMm, drawing.heightMm);
  let index = 1;
  for (const medium of drawing.media)
    if (medium.kind === "fill") index = Math.max(index, Math.sqrt(medium.epsilon * medium.mu));
  return space.floating.length > 0 ? -((1 / (longest * index)) ** 2) : 0;
}

/** How many eigenvalues lie below `value`; the shift gives way a little where it hits one. */
function countBelow(space: ElementSpace, value: number, room: number): number {
  for (let attempt = 0; ; attempt += 1) {
    try {
      return factorShifted(space, value + (attempt * room) / 7).negative;
    } catch (error) {
      if (!(error instanceof PivotError) || attempt >= 3) throw error;
    }
  }
}

/** The widest gap about the last of `count` rising values: where a count is surest. */
function gapBehind(
  values: readonly number[],
  count: number,
): { middle: number; width: number; below: number } {
  const width = (n: number): number => values[n + 1] - values[n];
  const last = Math.min(values.length - 1, count + GUARD);
  if (last < 1) return { middle: values[0] * 1.001, width: values[0] * 1e-3, below: 1 };
  let at = Math.max(0, Math.min(count, last) - 1);
  for (let n = at + 1; n < last; n += 1) if (width(n) > width(at)) at = n;
  return { middle: values[at] + width(at) / 2, width: width(at), below: at + 1 };
}

/** Runs a search to its end, yielding between its steps. */
function* finish(search: Generator<number, Search>): Generator<void, Search> {
  for (;;) {
    const { done, value } = search.next();
    if (done === true) return value;
    yield;
  }
}

/** Each value near its like from another mesh, so that none can have been passed over. */
const agrees = (found: readonly Eigenpair[], other: readonly number[]): boolean =>
  found.length > 0 &&
  found.length <= other.length &&
  found.every(({ value }, n) => Math.abs(value / other[n] - 1) < ALIKE);

/**
 * The lowest `count` solutions of K x = λ M x above the static ones, rising, and perhaps some more; fewer where the mesh has
 * fewer. That none is missing is proven by an inertia count, or, where `known` is given, by agreement with the complete list
 * of another mesh. Yields between steps of about a tenth of a second.
 */
export function* lowestModes(
  space: ElementSpace,
  count: number,
  known: readonly number[] = [],
): Generator<void, Eigenpair[]> {
  const { unknowns } = space;
  const still = statics(space);
  const available = unknowns - still.length;
  if (available <= 0 || count <= 0) return [];
  const shift = shiftBelow(space);
  const factors: Factorization = factorShifted(space, shift);
  yield;
  const operator = {
    unknowns,
    shift,
    multiplyMass: (x: Float64Array, out: Float64Array): void => multiplyMass(space, x, out),
    solvePair: (x: Float64Array): void => factors.solvePair(x),
  };
  let asked = Math.min(available, count);
  let found: Eigenpair[] = [];
  for (let round = 0; round < ROUNDS; round += 1) {
    const locked = [...still, ...found.map(({ vector }) => vector)];
    const search = yield* finish(lowestEigenpairs(operator, asked, GUARD, locked, round + 1));
    found = [...found, ...search.pairs].sort((p, q) => p.value - q.value);
    if (found.length >= available || agrees(found, known)) return found;
    const values = [...found.map(({ value }) => value), ...search.guards].sort((p, q) => p - q);
    const gap = gapBehind(values, count);
    const missing = countBelow(space, gap.middle, gap.width) - (still.length + gap.below);
    yield;
    if (missing === 0) return found;
    // A mode of higher degeneracy than the block has vectors: its other members are the lowest of what is left.
    asked = Math.max(1, missing);
  }
  throw new Error("Some modes of the section could not be told apart; ask for fewer or refine the mesh.");
}
