import { describe, expect, it } from "vitest";
import { drawingOf } from "../document/drawing";
import { parseTypedLength, shiftLength } from "../document/lengths";
import { emptyScene } from "../driver/sheet-driver";
import { itemAt } from "./hit";
import { distanceToPolyline, insideRings, type Xy } from "./points";
import { simplifyPolyline } from "./simplify";
import { snapPoint } from "./snap";

describe("simplify", () => {
  it("keeps every point of a noisy path within the tolerance of what remains", () => {
    let seed = 7;
    const noise = (): number => {
      seed = (seed * 16807) % 2147483647;
      return seed / 2147483647 - 0.5;
    };
    const path = Array.from({ length: 500 }, (_, i): Xy => [i * 0.2, 20 * Math.sin(i / 60) + noise() * 0.1]);
    const simple = simplifyPolyline(path, 0.2);
    expect(simple.length).toBeLessThan(80);
    for (const point of path) expect(distanceToPolyline(point, simple)).toBeLessThanOrEqual(0.2 + 1e-12);
    expect([simple[0], simple.at(-1)]).toEqual([path[0], path.at(-1)]);
  });

  it("takes ten thousand points that fold back on themselves", () => {
    const path = Array.from({ length: 10_000 }, (_, i): Xy => [i % 2 === 0 ? 0 : 100, i]);
    expect(simplifyPolyline(path, 1)).toHaveLength(10_000);
  });
});

describe("hit", () => {
  const ring: [number, number][] = [
    [40, 40],
    [60, 40],
    [60, 60],
    [40, 60],
  ];
  const drawing = drawingOf(
    emptyScene({
      paint: [
        {
          kind: "polygon",
          id: "frame",
          medium: "pec",
          points: [
            [20, 20],
            [80, 20],
            [80, 80],
            [20, 80],
          ],
          holes: [ring],
        },
        { kind: "ellipse", id: "oval", medium: "pec", x: 150, y: 50, rx: 30, ry: 10, angle: 90 },
        {
          kind: "wall",
          id: "fin",
          points: [
            [100, 10],
            [100, 90],
          ],
        },
      ],
    }),
  );

  it("falls through a hole", () => {
    expect(itemAt(drawing, [30, 30], 1)).toBe("paint:frame");
    expect(itemAt(drawing, [50, 50], 1)).toBeNull();
    expect(insideRings([50, 50], [ring])).toBe(true);
  });
  it("follows an ellipse's turn", () => {
    expect(itemAt(drawing, [150, 75], 1)).toBe("paint:oval");
    expect(itemAt(drawing, [175, 50], 1)).toBeNull();
  });
  it("finds a thin wall within reach", () => {
    expect(itemAt(drawing, [101.5, 50], 2)).toBe("paint:fin");
    expect(itemAt(drawing, [101.5, 50], 1)).toBeNull();
  });
});

describe("snap", () => {
  const drawing = drawingOf(
    emptyScene({
      paint: [{ kind: "rectangle", id: "a", medium: "pec", x: 33.3, y: 20, width: 20, height: 10, angle: 0 }],
    }),
  );
  const options = { gridMm: 5, reachMm: 1 };

  it("prefers a corner to the grid, and the grid to nothing", () => {
    expect(snapPoint(drawing, [33.9, 20.4], options)).toEqual({ at: [33.3, 20], reason: "corner" });
    expect(snapPoint(drawing, [36.2, 43.1], options)).toEqual({ at: [35, 45], reason: "grid" });
  });
  it("rests on the section's edge and leaves the other coordinate to the grid", () => {
    expect(snapPoint(drawing, [199.4, 43.1], options)).toEqual({ at: [200, 45], reason: "section" });
  });
  it("does not attract an item to itself", () => {
    const ignore = new Set(["paint:a"] as const);
    expect(snapPoint(drawing, [33.9, 20.4], { ...options, ignore }).reason).toBe("grid");
  });
});

describe("typed lengths", () => {
  const values = new Map([["gap", 4]]);
  it.each([
    ["12.5", 12.5, 12.5],
    ["12,5", 12.5, 12.5],
    ["0.5in", 12.7, 12.7],
    ["80 µm", 0.08, 0.08],
    ["−3", -3, -3],
    ["gap/2 + 1", "gap/2 + 1", 3],
  ])("%s", (text, length, value) => {
    expect(parseTypedLength(text, values)).toEqual({ ok: true, length, value });
  });
  it.each(["", "12 lightyears", "other + 1", "1/0", "constructor", "gap;gap"])(
    "refuses %j in a sentence",
    (text) => {
      const typed = parseTypedLength(text, values);
      expect(typed.ok).toBe(false);
      expect(!typed.ok && typed.sentence.length).toBeGreaterThan(10);
    },
  );
});

describe("a length that is moved", () => {
  it.each([
    [12.3, 0.4, 12.7],
    ["gap", 3, "gap + 3"],
    ["gap + 3", -3, "gap"],
    ["gap - 1.5", 1, "gap - 0.5"],
    ["a*2", 2, "a*2 + 2"],
    ["2*3", 2, "2*3 + 2"],
    ["1e-3", 2, "1e-3 + 2"],
    ["gap * -3", 2, "gap * -3 + 2"],
    ["max(a, b + 3)", 1, "max(a, b + 3) + 1"],
    ["a - (b + 3)", 1, "a - (b + 3) + 1"],
    ["a1 - 2", 1, "a1 - 1"],
  ])("%s by %s", (length, by, moved) => {
    expect(shiftLength(length, by)).toBe(moved);
  });
});
