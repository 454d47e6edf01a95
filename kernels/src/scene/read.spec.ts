import { describe, expect, it } from "vitest";
import { MAXIMA, readScene } from "./index.js";
import { type Draft, plain, problemsOf, refusals, warningsOf } from "./testing.js";

describe("a scene that is read", () => {
  it("has its defaults filled in", () => {
    const outcome = readScene(JSON.stringify(plain()));
    if (!outcome.ok) throw new Error("refused");
    expect(outcome.warnings).toEqual([]);
    expect(outcome.scene).toMatchObject({
      notes: "",
      outOfPlane: { kind: "unbounded" },
      parameters: [],
      mesh: { cellsPerWavelength: 20, metal: "conformal" },
      background: "air",
      ports: [],
      limits: [],
      // 1,000 periods of 10 GHz.
      stop: { decayDb: 60, maxTimeNs: 100 },
      media: [{ relativePermeability: 1, magneticLoss: 0, electricPoles: [], magneticPoles: [] }],
      paint: [{ angle: 0 }],
      sources: [{ amplitude: 1 }],
    });
  });

  it("reads the same when it is written back", () => {
    const once = readScene(plain());
    if (!once.ok) throw new Error("refused");
    expect(readScene(JSON.stringify(once.scene))).toEqual(once);
  });

  it("may fill half of the stop and of the mesh itself", () => {
    const outcome = readScene({ ...plain(), stop: { maxTimeNs: 5 }, mesh: { cellMm: 0.5 } });
    expect(outcome).toMatchObject({
      scene: { stop: { maxTimeNs: 5, decayDb: 60 }, mesh: { cellMm: 0.5, metal: "conformal" } },
    });
  });
});

describe("text that is no scene", () => {
  it.each([
    ["no JSON", "{", "not JSON"],
    ["a list", "[]", "not an object"],
    ["nothing", "null", "not an object"],
    ["another document", '{"format":"notes"}', '"format" must be "heddle-scene"'],
  ])("is refused in one sentence: %s", (_what, text, part) => {
    const problems = problemsOf(text);
    expect(problems).toHaveLength(1);
    expect(problems[0]?.sentence).toContain(part);
  });

  it("is refused above 2 MB, as text and as a value", () => {
    const document = { ...plain(), notes: "x".repeat(MAXIMA.jsonBytes) };
    expect(problemsOf(JSON.stringify(document))[0]?.sentence).toContain("larger than 2 MB");
    expect(problemsOf(document)[0]?.sentence).toContain("larger than 2 MB");
    // Two bytes a character: under the limit in characters, above it in bytes.
    const wide = JSON.stringify({ ...plain(), notes: "ß".repeat(MAXIMA.jsonBytes * 0.6) });
    expect(wide.length).toBeLessThan(MAXIMA.jsonBytes);
    expect(problemsOf(wide)[0]?.sentence).toContain("larger than 2 MB");
  });

  it("survives a value that nests without end", () => {
    let deep: unknown = 1;
    for (let level = 0; level < 100_000; level++) deep = [deep];
    expect(problemsOf({ ...plain(), notes: deep }).length).toBeGreaterThan(0);
  });
});

describe("what the schema refuses, with path and sentence", () => {
  it.each<[string, Draft, string]>([
    ["an unknown key", { colour: "red" }, 'colour: The key "colour" is not known here'],
    [
      "an unknown key within",
      { band: { fromGHz: 1, toGHz: 10, unit: "GHz" } },
      'band.unit: The key "unit" is not known',
    ],
    ["a missing value", { name: undefined }, "name: It is missing; give a text."],
    [
      "a missing choice",
      { polarization: undefined },
      'polarization: It is missing; it must be one of "TMz", "TEz".',
    ],
    [
      "a number as text",
      { band: { fromGHz: "1", toGHz: 10 } },
      'band.fromGHz: It is "1"; it must be a number.',
    ],
    ["NaN", { band: { fromGHz: Number.NaN, toGHz: 10 } }, "band.fromGHz: It is NaN, which is not finite"],
    [
      "infinity as a length",
      { section: { widthMm: Infinity, heightMm: 1 } },
      "section.widthMm: It is Infinity, which is not finite",
    ],
    [
      "a length beyond all bounds",
      { section: { widthMm: 1e7, heightMm: 1 } },
      "section.widthMm: It is 10000000; it must be at most 1000000.",
    ],
    [
      "a negative frequency",
      { band: { fromGHz: -1, toGHz: 10 } },
      "band.fromGHz: It is -1; it must be greater than 0.",
    ],
    [
      "an edge of another kind",
      { edges: { left: "open", right: "electric", bottom: "electric", top: "electric" } },
      'edges.left: It is "open"; it must be one of',
    ],
    [
      "a bad id",
      { probes: [{ kind: "point", id: "Far!", x: 1, y: 1, field: "Ez" }] },
      "probes[0].id: An id is 1 to 40 characters",
    ],
    [
      "a shape of another kind",
      { paint: [{ kind: "star", id: "s" }] },
      'paint[0].kind: It is "star"; it must be one of "rectangle"',
    ],
    [
      "a polygon of two points",
      {
        paint: [
          {
            kind: "polygon",
            id: "p",
            medium: "air",
            points: [
              [0, 0],
              [1, 1],
            ],
          },
        ],
      },
      "paint[0].points: It needs at least 3 entries.",
    ],
    [
      "a coordinate that is null",
      {
        paint: [
          {
            kind: "wall",
            id: "w",
            points: [
              [0, 0],
              [1, null],
            ],
          },
        ],
      },
      "paint[0].points[1][1]: It is null; give a finite number of millimetres",
    ],
    [
      "a perfect medium with σ",
      { media: [{ id: "m", name: "M", perfect: "electric", conductivity: 1 }] },
      'media[0].conductivity: The key "conductivity" is not known here',
    ],
    [
      "ε below 1",
      { media: [{ id: "m", name: "M", relativePermittivity: 0.5 }] },
      "media[0].relativePermittivity: It is 0.5; it must be at least 1.",
    ],
    [
      "a negative σ*",
      { media: [{ id: "m", name: "M", magneticLoss: -1 }] },
      "media[0].magneticLoss: It is -1; it must be at least 0.",
    ],
    ["a mesh of neither kind", { mesh: {} }, 'mesh: Give one of "cellMm", "cellsPerWavelength" here.'],
    [
      "a mesh of both kinds",
      { mesh: { cellMm: 1, cellsPerWavelength: 20 } },
      'mesh.cellsPerWavelength: The key "cellsPerWavelength" is not known here',
    ],
    [
      "a value limit on a probe",
      { limits: [{ id: "l", name: "L", sense: "below", value: 1, of: { probe: "far" } }] },
      'limits[0].of: Give one of "q", "cutoff", "absorbedShare" here.',
    ],
  ])("%s", (_what, changes, expected) => {
    expect(
      refusals(changes).some((line) => line.startsWith(expected)),
      refusals(changes).join("\n"),
    ).toBe(true);
  });

  it("more entries than the maximum", () => {
    const probe = { kind: "point", x: 1, y: 1, field: "Ez" };
    const probes = Array.from({ length: MAXIMA.probes + 1 }, (_, index) => ({
      ...probe,
      id: `p${String(index)}`,
    }));
    expect(refusals({ probes })[0]).toBe("probes: It has more than 200 entries, the maximum.");
    expect(refusals({ probes: probes.slice(1) })).toEqual([]);
  });
});

describe("every problem at once", () => {
  it("names those of the schema and those of the meaning, with the indices of the document as given", () => {
    const lines = refusals({
      colour: "red",
      polarization: "TM",
      paint: [
        { kind: "star", id: "bad" },
        { kind: "rectangle", id: "r", medium: "sand", x: "nowhere", y: 0, width: -1, height: 1 },
      ],
      sources: [{ kind: "line", id: "s", x: 1000, y: 1 }],
      probes: [{ kind: "point", id: "p", x: 1, y: 1, field: "Hz" }],
    });
    const paths = lines.map((line) => line.slice(0, line.indexOf(":")));
    expect(paths.sort()).toEqual(
      [
        "colour",
        "polarization",
        "paint[0].kind",
        "paint[1].medium",
        "paint[1].x",
        "paint[1].width",
        "sources[0]",
      ].sort(),
    );
  });

  it("does not report a reference to what is there but refused itself", () => {
    const lines = refusals({ media: [{ id: "foam", name: "Foam", conductivity: -1 }] });
    expect(lines).toEqual(["media[0].conductivity: It is -1; it must be at least 0."]);
  });

  it("says nothing about places where the section is refused", () => {
    expect(refusals({ section: { widthMm: null, heightMm: 60 } })).toEqual([
      'section.widthMm: It is null; give a finite number of millimetres or an expression such as "a/2 - gap".',
    ]);
  });

  it("cuts an endless list and says so", () => {
    const points = Array.from({ length: 3000 }, () => [null, 1]);
    const lines = refusals({ paint: [{ kind: "wall", id: "w", points }] });
    expect(lines).toHaveLength(1001);
    expect(lines.at(-1)).toBe(": There are 2000 more problems like these.");
  });
});

describe("warnings that let a scene pass", () => {
  it("come between 8 and 15 cells per wavelength, and not at their ends", () => {
    expect(warningsOf({ mesh: { cellsPerWavelength: 15 } })).toEqual([]);
    // 29.98 mm in air and 22.3 in foam, over cells of 2.4 mm.
    const between = warningsOf({ mesh: { cellMm: 2.4 } });
    expect(between[0]).toMatch(
      /^mesh\.cellMm: The mesh has 12\.5 cells per shortest wavelength in "air" at 10 GHz; below 15/,
    );
    expect(between[1]).toMatch(/has 9\.\d+ cells per shortest wavelength in "foam"/);
    // 29.9792458/8 mm: exactly eight cells must not be refused by rounding. The section is a whole number of them.
    const cellMm = 299.792458 / 10 / 8;
    const section = { widthMm: cellMm * 20, heightMm: cellMm * 10 };
    expect(warningsOf({ mesh: { cellMm }, section, paint: [], probes: [] })[0]).toContain("has 8 cells");
  });

  it("come for a lossy medium of under 3 cells per skin depth", () => {
    const media = [{ id: "foam", name: "Carbon", conductivity: 50 }];
    // δ = 1/√(πfμ₀σ) = 0.712 mm at 10 GHz for a good conductor.
    expect(warningsOf({ media, mesh: { cellMm: 0.5 } })[0]).toMatch(
      /"foam" has 1\.\d+ cells per skin depth at 10 GHz/,
    );
    expect(warningsOf({ media, mesh: { cellMm: 0.2 } })).toEqual([]);
  });

  it("come for a source that reaches above the band", () => {
    const waveform = { kind: "tone", GHz: 11 };
    expect(warningsOf({ sources: [{ kind: "line", id: "s", x: 1, y: 1, waveform }] })[0]).toContain(
      "above the band's 10 GHz",
    );
  });
});
