/**
 * Branches between steps. With the memory I = S + q·V no field of the step to come is needed but by q itself:
 *
 *   S⁺ = κS + q(1 + κ)V,     (I⁺ + I)/2 = (S⁺ + S)/2 + q(V⁺ + V)/2.
 *
 * The last part couples the points of a branch by the matrix q·wwᵀ. Its diagonal majorant D = q·diag(|w|·Σ|w|) stands in the
 * coefficients as a loss; the surplus D − q·wwᵀ, which has no negative eigenvalue, is given back one step late:
 *
 *   current of point i = wᵢ(S⁺ + S)/2 − (uᵢ + uᵢ of the step before)/2,   uᵢ = q(|wᵢ|·Σ|w|·vᵢ − wᵢV).
 *
 * So all that is added to the exact trapezoidal branch is (D − q·wwᵀ)(1 − z⁻¹), whose real part (D − q·wwᵀ)(1 − cos ωΔt) is never negative:
 * the branch stays passive at any step, and what is added vanishes with the square of the cell beside the branch itself.
 */
import type { Branch, DrivePoint, EngineFields } from "./engine.js";

/** Points of one branch, at most. */
export const BRANCH_POINTS = 4;
/** Numbers kept for one branch: its currents, u of the step before, S. */
export const BRANCH_NUMBERS = 2 * BRANCH_POINTS + 1;

const keyOf = ({ points, decay, conductance }: Branch): string =>
  [
    decay,
    conductance,
    ...points.flatMap(({ field, row, column, weight }) => [field, row, column, weight]),
  ].join(" ");

/** The row at whose end a branch can be advanced. */
export const rowOf = ({ points }: Branch): number => Math.max(...points.map(({ row }) => row));

/** Numbers of each branch of `now`, by BRANCH_NUMBERS, those of branches that were there before taken over. */
export function carryBranches(
  before: readonly Branch[],
  state: Float64Array,
  now: readonly Branch[],
): Float64Array {
  const places = new Map(before.map((branch, index) => [keyOf(branch), index * BRANCH_NUMBERS]));
  const carried = new Float64Array(now.length * BRANCH_NUMBERS);
  now.forEach((branch, index) => {
    const place = places.get(keyOf(branch));
    if (place !== undefined)
      carried.set(state.subarray(place, place + BRANCH_NUMBERS), index * BRANCH_NUMBERS);
  });
  return carried;
}

/** What branches draw, as drives whose signals are their currents: signal BRANCH_NUMBERS·branch + point. */
export const branchDrives = (branches: readonly Branch[]): DrivePoint[] =>
  branches.flatMap(({ points }, index) =>
    points.map(({ field, row, column }, n) => ({
      ...{ field, row, column },
      ...{ weight: 1, signal: index * BRANCH_NUMBERS + n },
    })),
  );

/** Branches of the reference engine. */
export class BranchMemory {
  /** BRANCH_NUMBERS of each branch. */
  state: Float64Array = new Float64Array(0);
  drives: readonly DrivePoint[] = [];
  private branches: readonly Branch[] = [];
  private byRow = new Map<number, number[]>();

  /** The signals of `drives`. */
  get currents(): Float64Array {
    return this.state;
  }

  set(branches: readonly Branch[]): void {
    if (branches.some(({ points }) => points.length > BRANCH_POINTS))
      throw new RangeError(`A branch has at most ${BRANCH_POINTS} points.`);
    this.state = carryBranches(this.branches, this.state, branches);
    this.branches = branches;
    this.drives = branchDrives(branches);
    this.byRow = new Map();
    branches.forEach((branch, index) => {
      const row = rowOf(branch);
      this.byRow.set(row, [...(this.byRow.get(row) ?? []), index]);
    });
  }

  /** When row j, and the row before it, are final for this step. */
  advance(j: number, fields: EngineFields, stride: number): void {
    for (const index of this.byRow.get(j) ?? []) {
      const { points, decay, conductance } = this.branches[index];
      const at = index * BRANCH_NUMBERS;
      const { state } = this;
      const valueOf = ({ field, row, column }: Branch["points"][number]): number =>
        fields[field][row * stride + column];
      const voltage = points.reduce((sum, point) => sum + point.weight * valueOf(point), 0);
      const total = points.reduce((sum, { weight }) => sum + Math.abs(weight), 0);
      const before = state[at + 2 * BRANCH_POINTS];
      const after = decay * before + conductance * (1 + decay) * voltage;
      state[at + 2 * BRANCH_POINTS] = after;
      points.forEach((point, n) => {
        const { weight } = point;
        const u = conductance * (Math.abs(weight) * total * valueOf(point) - weight * voltage);
        state[at + n] = weight * 0.5 * (after + before) - 0.5 * (u + state[at + BRANCH_POINTS + n]);
        state[at + BRANCH_POINTS + n] = u;
      });
    }
  }
}
