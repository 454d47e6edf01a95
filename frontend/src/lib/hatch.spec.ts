import { AIR, PEC } from "@heddle/kernels/scene";
import { describe, expect, it } from "vitest";
import { hatchOf } from "./hatch";

const filled = (over: Partial<typeof AIR>) => hatchOf({ ...AIR, ...over });

describe("hatchOf", () => {
  it("leaves air bare and marks metal", () => {
    expect(hatchOf(AIR)).toEqual({ perfect: null, fallingPx: null, risingPx: null, tint: 0 });
    expect(hatchOf(PEC).perfect).toBe("electric");
  });
  it("draws closer strokes for more loss, within 9 and 3 px", () => {
    const [weak, strong] = [filled({ conductivity: 0.01 }).fallingPx, filled({ conductivity: 1 }).fallingPx];
    expect(weak).toBeGreaterThan(strong ?? Number.NaN);
    expect(filled({ conductivity: 1e-9 }).fallingPx).toBe(9);
    expect(filled({ conductivity: 5.8e7 }).fallingPx).toBe(3);
    expect(filled({ conductivity: 1 }).risingPx).toBeNull();
  });
  it("draws a matched absorber as an even cross-hatch", () => {
    const { fallingPx, risingPx } = filled({ conductivity: 0.02, magneticLoss: 0.02 * 376.730313 ** 2 });
    expect(risingPx).toBeCloseTo(fallingPx ?? Number.NaN, 6);
  });
  it("counts poles as the loss they bring", () => {
    const { fallingPx, risingPx } = filled({ magneticPoles: [{ kind: "debye", delta: 4, tauNs: 0.1 }] });
    expect(fallingPx).toBeNull();
    expect(risingPx).toBeGreaterThan(3);
    expect(risingPx).toBeLessThan(9);
  });
  it("tints denser dielectrics more", () => {
    expect(filled({ relativePermittivity: 10 }).tint).toBeGreaterThan(
      filled({ relativePermittivity: 2 }).tint,
    );
  });
});
