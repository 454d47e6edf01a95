import { describe, expect, it } from "vitest";
import { nextRange, quantitiesOf } from "./quantities";

describe("quantities", () => {
  it("offers the components that the polarization has, out-of-plane first", () => {
    expect(quantitiesOf("TMz")[0]).toBe("Ez");
    expect(quantitiesOf("TEz")[0]).toBe("Hz");
    expect(quantitiesOf("TEz")).not.toContain("Ez");
  });

  it("steps the range through 1, 2, 5, 10", () => {
    expect(nextRange(1, 1)).toBe(2);
    expect(nextRange(5, 1)).toBe(10);
    expect(nextRange(1, -1)).toBe(0.5);
    expect(nextRange(820, -1)).toBe(500);
    expect(nextRange(0.0033, 1)).toBe(0.005);
    let range = 7e-5;
    for (let i = 0; i < 9; i += 1) range = nextRange(range, -1);
    expect(range).toBeCloseTo(1e-7, 12);
  });
});
