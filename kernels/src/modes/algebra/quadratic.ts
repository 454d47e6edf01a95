/**
 * Quadratic triangles for −∇·(s∇F) = λ m F: six values an element, at its corners and the middles of its sides.
 *
 * With k_ij = s·A ∇L_i·∇L_j (L the area coordinates, A the area) every entry of the stiffness is a multiple of one or a sum of k's, and
 * the mass is a fixed matrix times m·A (O. C. Zienkiewicz, R. L. Taylor, The Finite Element Method, 5th ed. 2000, vol. 1, ch. 8;
 * integrated here anew with ∫L₁ᵃL₂ᵇL₃ᶜ = 2A·a!b!c!/(a+b+c+2)!).
 */

/** Twice the area of the flattest triangle over the square of its longest side. */
const FLATTEST = 1e-7;

/** Numbers kept per element: k01, k12, k20, m·A. */
export const ELEMENT_NUMBERS = 4;

/** Corner i and the middles it meets: side k runs from corner k to corner k + 1 and has its middle at 3 + k. */
const MASS: Float64Array = massMatrix();

function massMatrix(): Float64Array {
  const mass = new Float64Array(36);
  for (let i = 0; i < 3; i += 1) {
    for (let j = 0; j < 3; j += 1) {
      mass[6 * i + j] = i === j ? 6 : -1;
      mass[6 * (3 + i) + 3 + j] = i === j ? 32 : 16;
      // The side opposite to corner i is side i + 1.
      const opposite = j === (i + 1) % 3 ? -4 : 0;
      mass[6 * i + 3 + j] = opposite;
      mass[6 * (3 + j) + i] = opposite;
    }
  }
  return mass.map((entry) => entry / 180);
}

/** Writes c·stiffness + d·mass of the element whose numbers start at `at` into `out` (6 × 6, symmetric). */
export function elementMatrix(
  numbers: Float64Array,
  at: number,
  c: number,
  d: number,
  out: Float64Array,
): void {
  const k01 = c * numbers[at];
  const k12 = c * numbers[at + 1];
  const k20 = c * numbers[at + 2];
  const area = d * numbers[at + 3];
  for (let n = 0; n < 36; n += 1) out[n] = area * MASS[n];
  const add = (i: number, j: number, value: number): void => {
    out[6 * i + j] += value;
    if (i !== j) out[6 * j + i] += value;
  };
  add(0, 0, -k01 - k20);
  add(1, 1, -k01 - k12);
  add(2, 2, -k12 - k20);
  add(0, 1, -k01 / 3);
  add(1, 2, -k12 / 3);
  add(0, 2, -k20 / 3);
  add(0, 3, (4 / 3) * k01);
  add(1, 3, (4 / 3) * k01);
  add(1, 4, (4 / 3) * k12);
  add(2, 4, (4 / 3) * k12);
  add(2, 5, (4 / 3) * k20);
  add(0, 5, (4 / 3) * k20);
  const sum = (-8 / 3) * (k01 + k12 + k20);
  add(3, 3, sum);
  add(4, 4, sum);
  add(5, 5, sum);
  add(3, 4, (8 / 3) * k20);
  add(4, 5, (8 / 3) * k01);
  add(3, 5, (8 / 3) * k12);
}

/** The four numbers of a triangle with corners a, b, c, stiffness s and mass m, written at `at`. */
export function elementNumbers(
  corner: readonly [number, number, number, number, number, number],
  s: number,
  m: number,
  numbers: Float64Array,
  at: number,
): void {
  const [ax, ay, bx, by, cx, cy] = corner;
  const twice = (bx - ax) * (cy - ay) - (cx - ax) * (by - ay);
  const longest = Math.max(
    (bx - ax) ** 2 + (by - ay) ** 2,
    (cx - bx) ** 2 + (cy - by) ** 2,
    (ax - cx) ** 2 + (ay - cy) ** 2,
  );
  // ∇L of a corner is the opposite side, turned, over twice the area. A triangle flatter than rounding can tell only ties its middle
  // corner to the line between the others; stiffer than this it would drown the rest.
  const scale = s / (2 * Math.max(twice, FLATTEST * longest));
  numbers[at] = scale * ((cx - bx) * (ax - cx) + (cy - by) * (ay - cy));
  numbers[at + 1] = scale * ((ax - cx) * (bx - ax) + (ay - cy) * (by - ay));
  numbers[at + 2] = scale * ((bx - ax) * (cx - bx) + (by - ay) * (cy - by));
  numbers[at + 3] = (m * Math.max(twice, 0)) / 2;
}
