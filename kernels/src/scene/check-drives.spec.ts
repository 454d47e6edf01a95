import { describe, expect, it } from "vitest";
import { readScene, type SceneInput } from "./index.js";

const electricGuide = { left: "absorbing", right: "absorbing", bottom: "electric", top: "electric" } as const;
const open = { left: "absorbing", right: "absorbing", bottom: "absorbing", top: "absorbing" } as const;

const base: SceneInput = {
  format: "heddle-scene",
  version: 1,
  name: "Guide",
  polarization: "TEz",
  section: { widthMm: 60, heightMm: 20 },
  band: { fromGHz: 1, toGHz: 6 },
  mesh: { cellMm: 1 },
  edges: electricGuide,
};
const port = {
  id: "in",
  from: [10, 0] as [number, number],
  to: [10, 20] as [number, number],
  inward: "+x" as const,
  mode: 0,
};
const wave = { kind: "plane-wave" as const, id: "w", angle: 45 };

const lines = (changes: Partial<SceneInput>): string[] => {
  const outcome = readScene({ ...base, ...changes });
  return outcome.ok ? [] : outcome.problems.map(({ path, sentence }) => `${path}: ${sentence}`);
};
const metal = (id: string, y: number, height: number) =>
  ({ kind: "rectangle", id, medium: "pec", x: 0, y, width: 60, height }) as const;

describe("a port", () => {
  it("is accepted across a guide between electric edges, painted metal or walls", () => {
    expect(lines({ ports: [port] })).toEqual([]);
    const inner = { ...port, from: [10, 5] as [number, number], to: [10, 15] as [number, number] };
    expect(lines({ ports: [inner], paint: [metal("low", 0, 5), metal("high", 15, 5)] })).toEqual([]);
    const walls = [5, 15].map((y) => ({
      kind: "wall" as const,
      id: `w${String(y)}`,
      points: [
        [0, y],
        [60, y],
      ] as [number, number][],
    }));
    expect(lines({ edges: open, ports: [inner], paint: walls })).toEqual([]);
    expect(lines({ ports: [{ ...port, from: port.to, to: port.from }] })).toEqual([]);
  });

  it.each<[string, Partial<SceneInput>, string]>([
    [
      "one end in the open",
      { ports: [{ ...port, to: [10, 15] }] },
      "ports[0].to: The port does not end on an electric wall at (10, 15) mm",
    ],
    [
      "magnetic edges",
      { edges: { ...electricGuide, bottom: "magnetic" }, ports: [port] },
      "ports[0].from: The port does not end on an electric wall",
    ],
    [
      "a line along the guide",
      { ports: [{ ...port, to: [20, 0] }] },
      "ports[0]: The line from (10, 0) to (20, 0) mm does not run across a guide along +x",
    ],
    [
      "a slanted line",
      { ports: [{ ...port, to: [11, 20] }] },
      "ports[0]: The line from (10, 0) to (11, 20) mm does not run across",
    ],
    [
      "a closed edge behind",
      { edges: { ...electricGuide, left: "electric" }, ports: [port] },
      "ports[0].inward: Behind the port the left edge is electric",
    ],
    [
      "something in the guide behind",
      { ports: [port], paint: [{ kind: "ellipse", id: "post", medium: "pec", x: 5, y: 10, rx: 2, ry: 2 }] },
      "ports[0]: Along the port and behind it",
    ],
    [
      "a thin wall in the guide behind",
      {
        ports: [port],
        paint: [
          {
            kind: "wall",
            id: "w",
            points: [
              [2, 10],
              [8, 10],
            ],
          },
        ],
      },
      "ports[0]: Along the port and behind it",
    ],
    [
      "a guide that opens behind",
      {
        edges: open,
        ports: [{ ...port, from: [10, 5], to: [10, 15] }],
        paint: [
          { kind: "rectangle", id: "low", medium: "pec", x: 5, y: 0, width: 55, height: 5 },
          metal("high", 15, 5),
        ],
      },
      "ports[0].from: The electric wall at (10, 5) mm does not run on behind the port",
    ],
    [
      "a mode finer than the mesh",
      { ports: [{ ...port, mode: 11 }] },
      "ports[0].mode: Mode 11 needs at least 22 cells across the guide, which has 20",
    ],
    [
      "its like at the same place",
      { ports: [port, { ...port, id: "again" }] },
      'ports[1]: The ports "in" and "again" are the same line and mode',
    ],
    [
      "another port in the guide behind",
      { ports: [port, { ...port, id: "later", from: [30, 0], to: [30, 20] }] },
      'ports[1]: The port "in" lies in the guide behind the port "later"',
    ],
    [
      "a lossy guide",
      { media: [{ id: "m", name: "M", conductivity: 0.1 }], background: "m", ports: [port] },
      "ports[0]: Along the port and behind it",
    ],
  ])("is refused with %s", (_what, changes, expected) => {
    expect(
      lines(changes).some((line) => line.startsWith(expected)),
      lines(changes).join("\n"),
    ).toBe(true);
  });
});

describe("a port below its cut-off over the whole band", () => {
  const warnings = (mode: number): string[] => {
    const outcome = readScene({ ...base, ports: [{ ...port, mode }] });
    return outcome.ok ? outcome.warnings.map(({ path, sentence }) => `${path}: ${sentence}`) : ["refused"];
  };
  it("draws a warning with the cut-off", () => {
    // c/2w of 20 mm is 7.495 GHz.
    expect(warnings(1)).toEqual([
      expect.stringMatching(/^ports\[0\]\.mode: Mode 1 .* cut-off of 7\.495 GHz/) as string,
    ]);
    expect(warnings(0)).toEqual([]);
  });
});

describe("a plane wave", () => {
  it("is accepted in open background, around things inside its box", () => {
    const inside = { kind: "ellipse" as const, id: "e", medium: "pec", x: 30, y: 10, rx: 3, ry: 3 };
    expect(lines({ edges: open, sources: [wave], paint: [inside] })).toEqual([]);
  });

  it.each<[string, Partial<SceneInput>, string]>([
    ["a closed edge", { sources: [wave] }, "edges.bottom: A plane wave needs absorbing edges all round"],
    ["a patch across its box", { edges: open, sources: [wave], paint: [metal("m", 0, 3)] }, ""],
    [
      "an inset that leaves no box",
      { edges: open, sources: [{ ...wave, insetMm: 10 }] },
      "sources[0].insetMm: An inset of 10 mm leaves no box",
    ],
    [
      "a wall across its box",
      {
        edges: open,
        sources: [wave],
        paint: [
          {
            kind: "wall",
            id: "w",
            points: [
              [0, 10],
              [30, 10],
            ],
          },
        ],
      },
      "sources[0]: The box of the plane wave",
    ],
    [
      "an area across its box",
      { edges: open, sources: [wave], paint: [metal("m", 8, 3)] },
      "sources[0]: The box of the plane wave, 4 mm inside",
    ],
    [
      "a lossy background",
      { edges: open, sources: [wave], media: [{ id: "m", name: "M", magneticLoss: 1 }], background: "m" },
      "sources[0]: The box of the plane wave",
    ],
  ])("meets %s", (_what, changes, expected) => {
    if (expected === "") expect(lines(changes)).toEqual([]);
    else
      expect(
        lines(changes).some((line) => line.startsWith(expected)),
        lines(changes).join("\n"),
      ).toBe(true);
  });
});
