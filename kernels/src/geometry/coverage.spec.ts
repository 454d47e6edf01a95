import { describe, expect, it } from "vitest";
import type { PaintedArea, Raster } from "./index.js";
import { CoverageSweep, LineCutter, materialFraction } from "./index.js";

const raster: Raster = { widthMm: 10, heightMm: 8, columns: 20, rows: 16 };
const cellArea = 0.25;

const areaOf = (areas: PaintedArea[], medium: number): number =>
  materialFraction(areas, 0, raster, medium).reduce((sum, share) => sum + share, 0) * cellArea;

describe("coverage", () => {
  it("is exact for a rectangle off the raster lines, cell by cell", () => {
    const areas: PaintedArea[] = [
      { shape: { kind: "rectangle", x: 1.1, y: 2.2, width: 3, height: 1.05, angle: 0 }, medium: 1 },
    ];
    const shares = materialFraction(areas, 0, raster, 1);
    const overlap = (a: number, b: number, c: number, d: number): number =>
      Math.max(0, Math.min(b, d) - Math.max(a, c)) / 0.5;
    for (let row = 0; row < 16; row += 1) {
      for (let column = 0; column < 20; column += 1) {
        const want =
          overlap(1.1, 4.1, column * 0.5, (column + 1) * 0.5) *
          overlap(2.2, 3.25, row * 0.5, (row + 1) * 0.5);
        expect(Math.abs(shares[row * 20 + column] - want)).toBeLessThan(1e-6);
      }
    }
  });

  it("keeps the area of turned rectangles, ellipses and strokes", () => {
    const turned: PaintedArea[] = [
      { shape: { kind: "rectangle", x: 3, y: 3, width: 4, height: 1.3, angle: 33 }, medium: 1 },
    ];
    expect(areaOf(turned, 1)).toBeCloseTo(5.2, 6);
    const ellipse: PaintedArea[] = [
      { shape: { kind: "ellipse", x: 5.03, y: 4.01, rx: 3, ry: 1.7, angle: 20 }, medium: 1 },
    ];
    expect(areaOf(ellipse, 1)).toBeCloseTo(Math.PI * 3 * 1.7, 5);
    const stroke: PaintedArea[] = [
      {
        shape: {
          kind: "stroke",
          points: [
            [2, 2],
            [6, 5],
          ],
          widthMm: 1,
        },
        medium: 1,
      },
    ];
    expect(areaOf(stroke, 1)).toBeCloseTo(5 + Math.PI * 0.25, 5);
    // A stroke that comes back on itself covers no place twice.
    const folded: PaintedArea[] = [
      {
        shape: {
          kind: "stroke",
          points: [
            [2, 2],
            [6, 5],
            [2, 2],
          ],
          widthMm: 1,
        },
        medium: 1,
      },
    ];
    expect(areaOf(folded, 1)).toBeCloseTo(5 + Math.PI * 0.25, 5);
  });

  it("leaves holes open by the even-odd rule", () => {
    const areas: PaintedArea[] = [
      {
        shape: {
          kind: "polygon",
          points: [
            [1, 1],
            [8, 1],
            [8, 7],
            [1, 7],
          ],
          holes: [
            [
              [2.3, 2.2],
              [4.1, 2.6],
              [3, 5],
            ],
          ],
        },
        medium: 1,
      },
    ];
    const hole = 0.5 * Math.abs((4.1 - 2.3) * (5 - 2.2) - (3 - 2.3) * (2.6 - 2.2));
    expect(areaOf(areas, 1)).toBeCloseTo(42 - hole, 6);
  });

  it("lets later paint cover earlier paint exactly where they cross", () => {
    const below: PaintedArea = {
      shape: {
        kind: "polygon",
        points: [
          [1, 1],
          [9, 2],
          [4, 7],
        ],
        holes: [],
      },
      medium: 1,
    };
    const above: PaintedArea = {
      shape: {
        kind: "polygon",
        points: [
          [0, 4],
          [9.7, 3.1],
          [9.5, 6.3],
          [0.4, 5],
        ],
        holes: [],
      },
      medium: 2,
    };
    const alone = areaOf([below], 1);
    const over = areaOf([below, above], 1);
    const under = areaOf([above, below], 2);
    const whole = areaOf([above], 2);
    // What `above` takes from `below` is what `below` takes from `above`: their common area.
    expect(alone - over).toBeCloseTo(whole - under, 6);
    expect(alone - over).toBeGreaterThan(1);
    expect(areaOf([below, above], 0) + over + whole).toBeCloseTo(80, 6);
  });

  it("agrees with points thrown at it, for a heap of shapes", () => {
    let seed = 7;
    const random = (): number => {
      seed = (seed * 48271) % 2147483647;
      return seed / 2147483647;
    };
    const areas: PaintedArea[] = Array.from({ length: 14 }, (_, n) => ({
      shape:
        n % 2 === 0
          ? {
              kind: "ellipse",
              x: 10 * random(),
              y: 8 * random(),
              rx: 0.4 + random(),
              ry: 0.4 + random(),
              angle: 90 * random(),
            }
          : {
              kind: "stroke",
              points: [
                [10 * random(), 8 * random()],
                [10 * random(), 8 * random()],
                [10 * random(), 8 * random()],
              ],
              widthMm: 0.3 + random(),
            },
      medium: 1 + (n % 3),
    }));
    const sweep = new CoverageSweep(areas, 0, raster);
    const fine = new CoverageSweep(areas, 0, { ...raster, columns: 20 * 16, rows: 16 * 16 });
    for (let row = 0; row < 16; row += 1) {
      const sums = new Map<string, number>();
      for (let part = 0; part < 16; part += 1) {
        const painted = fine.row(row * 16 + part);
        for (let cell = 0; cell < 20 * 16; cell += 1) {
          const only = painted.medium[cell];
          const shares = only >= 0 ? [{ medium: only, share: 1 }] : painted.shares(cell);
          for (const { medium, share } of shares) {
            const key = `${Math.floor(cell / 16)}/${medium}`;
            sums.set(key, (sums.get(key) ?? 0) + share / 256);
          }
        }
      }
      const painted = sweep.row(row);
      for (let cell = 0; cell < 20; cell += 1) {
        const only = painted.medium[cell];
        const shares = only >= 0 ? [{ medium: only, share: 1 }] : painted.shares(cell);
        expect(shares.reduce((sum, { share }) => sum + share, 0)).toBeCloseTo(1, 6);
        for (const { medium, share } of shares) {
          // Chords leave the curves by at most 0.4 % of a cell.
          expect(Math.abs(share - (sums.get(`${cell}/${medium}`) ?? 0))).toBeLessThan(8e-3);
        }
      }
    }
  });

  it("gives the same row out of order as in order", () => {
    const areas: PaintedArea[] = [
      { shape: { kind: "ellipse", x: 5, y: 4, rx: 3, ry: 2, angle: 10 }, medium: 1 },
    ];
    const ordered = new CoverageSweep(areas, 0, raster);
    const rows = Array.from({ length: 16 }, (_, row) => ordered.row(row).medium.slice());
    for (const row of [9, 3, 12, 4]) expect(ordered.row(row).medium).toEqual(rows[row]);
  });
});

describe("cuts along lines", () => {
  it("gives the chord of a circle and the order of overlapping paint", () => {
    const areas: PaintedArea[] = [
      { shape: { kind: "ellipse", x: 5, y: 4, rx: 3, ry: 3, angle: 0 }, medium: 1 },
      { shape: { kind: "rectangle", x: 4, y: 0, width: 1, height: 8, angle: 0 }, medium: 2 },
    ];
    const cuts = new LineCutter(areas, 0, raster, "x").cut((4 + 1.8) * 2);
    const half = Math.sqrt(9 - 1.8 ** 2);
    expect(cuts.map(({ medium }) => medium)).toEqual([0, 1, 2, 1, 0]);
    expect(cuts[1].from).toBeCloseTo(2 * (5 - half), 2);
    expect(cuts[2]).toEqual({ from: 8, to: 10, medium: 2 });
    expect(cuts[3].to).toBeCloseTo(2 * (5 + half), 2);
  });
});
