/** The lowest modes of one mesh, checked for completeness by an inertia count. */
import { PivotError } from "./algebra/factorization.js";
import type { Factorization } from "./algebra/factorization.js";
import type { Eigenpair } from "./algebra/lanczos.js";
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

/** Each value near its like from another mesh, so that none can have been passed over. */
const agrees = (found: readonly Eigenpair[], other: readonly number[]): boolean =>
  found.length > 0 &&
  found.length <= other.length &&
  found.every(({ value }, n) => Math.abs(value / other[n] - 1) < ALIKE);

/**
 * The lowest `count` solutions of K x = λ M x above the static ones, rising, and up to GUARD more; fewer where the mesh has
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
  const wanted = Math.min(available, count + GUARD);
  let found: Eigenpair[] = [];
  for (let round = 0; round < ROUNDS; round += 1) {
    const locked = [...still, ...found.map(({ vector }) => vector)];
    const asked = round === 0 ? wanted : Math.min(wanted, unknowns - locked.length);
    const search = lowestEigenpairs(operator, asked, locked, round + 1);
    for (;;) {
      const step = search.next();
      if (step.done === true) {
        found = [...found, ...step.value].sort((p, q) => p.value - q.value);
        break;
      }
      yield;
    }
    if (found.length >= available || agrees(found, known)) return found;
    // The widest gap behind the modes asked for is where the count is surest.
    const from = Math.min(count, found.length - 1);
    let gapAfter = Math.max(0, from - 1);
    const last = Math.min(found.length - 1, count + GUARD);
    for (let n = gapAfter; n < last; n += 1)
      if (found[n + 1].value - found[n].value > found[gapAfter + 1].value - found[gapAfter].value)
        gapAfter = n;
    const below = found[gapAfter].value;
    const room = found[Math.min(gapAfter + 1, found.length - 1)].value - below;
    const expected = still.length + gapAfter + 1;
    if (countBelow(space, below + room / 2, room) === expected) return found;
    yield;
  }
  throw new Error("Some modes of the section could not be told apart; ask for fewer or refine the mesh.");
}
