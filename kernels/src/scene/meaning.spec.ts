import { describe, expect, it } from "vitest";
import { MAXIMA } from "./index.js";
import { type Draft, plain, refusals } from "./testing.js";

describe("what only the whole document tells", () => {
  const lossless = { id: "tan", name: "T" };
  it.each<[string, Draft, string]>([
    [
      "an id twice",
      {
        sources: [
          { kind: "line", id: "a", x: 1, y: 1 },
          { kind: "line", id: "a", x: 2, y: 2 },
        ],
      },
      'sources[1].id: "a" is already the id of sources[0]',
    ],
    [
      "a built-in id for another medium",
      { media: [{ id: "air", name: "Air", relativePermittivity: 2 }], paint: [] },
      'media[0].id: "air" is built in',
    ],
    ["a background that is not there", { background: "sand" }, 'background: There is no medium "sand"'],
    [
      "a patch of no medium",
      { paint: [{ kind: "ellipse", id: "e", medium: "sand", x: 5, y: 5, rx: 1, ry: 1 }] },
      'paint[0].medium: There is no medium "sand"',
    ],
    [
      "a limit on no probe",
      { limits: [{ id: "l", name: "L", sense: "below", points: [[1, 0]], of: { probe: "near" } }] },
      'limits[0].of.probe: There is no probe "near"',
    ],
    [
      "a limit on no port",
      { limits: [{ id: "l", name: "L", sense: "below", points: [[1, 0]], of: { s: ["p", "q"] } }] },
      'limits[0].of.s[1]: There is no port "q"',
    ],
    [
      "a share that is no absorption",
      { limits: [{ id: "l", name: "L", sense: "below", value: 1, of: { absorbedShare: "far" } }] },
      'limits[0].of.absorbedShare: "far" does not measure absorbed power',
    ],
    [
      "a limit that runs backwards",
      {
        limits: [
          {
            id: "l",
            name: "L",
            sense: "below",
            points: [
              [2, 0],
              [1, 0],
            ],
            of: { probe: "far" },
          },
        ],
      },
      "limits[0].points: The frequencies of a limit must not fall",
    ],
    [
      "a component of the other polarization",
      { probes: [{ kind: "point", id: "p", x: 1, y: 1, field: "Hz" }] },
      "probes[0].field: TMz has no Hz; choose Ez, Hx, Hy",
    ],
    [
      "a voltage in TMz",
      { probes: [{ kind: "line", id: "p", from: [0, 0], to: [0, 5], quantity: "voltage" }] },
      "probes[0].quantity: TMz has no electric field in the section",
    ],
    [
      "a source outside",
      { sources: [{ kind: "line", id: "s", x: 101, y: 1 }] },
      "sources[0]: The source at (101, 1) mm lies outside the section of 100 × 60 mm",
    ],
    [
      "a probe outside",
      { probes: [{ kind: "point", id: "p", x: 1, y: -1, field: "Ez" }] },
      "probes[0]: The probe at (1, -1) mm lies outside",
    ],
    [
      "an area probe that sticks out",
      { probes: [{ kind: "area", id: "p", x: 90, y: 1, width: 20, height: 1, quantity: "energy" }] },
      "probes[0]: The probe's upper right corner at (110, 2) mm lies outside",
    ],
    [
      "a line probe of no length",
      { probes: [{ kind: "line", id: "p", from: [1, 1], to: [1, 1], quantity: "power" }] },
      "probes[0]: It starts and ends at the same point",
    ],
    [
      "a port outside",
      { sources: [], ports: [{ id: "p", from: [120, 0], to: [120, 60], inward: "-x", mode: 1 }] },
      "ports[0].from: The port at (120, 0) mm lies outside",
    ],
    [
      "mode 0 in TMz",
      { sources: [], ports: [{ id: "p", from: [10, 0], to: [10, 60], inward: "+x", mode: 0 }] },
      "ports[0].mode: In TMz a guide's modes start at 1",
    ],
    [
      "sources and ports",
      { ports: [{ id: "p", from: [10, 0], to: [10, 60], inward: "+x", mode: 1 }] },
      "ports: A scene is driven by sources or by ports, never by both",
    ],
    [
      "a rectangle without width",
      { paint: [{ kind: "rectangle", id: "r", medium: "air", x: 1, y: 1, width: 0, height: 1 }] },
      "paint[0].width: It is 0 mm; it must be greater than 0.",
    ],
    [
      "a wall of one place",
      {
        paint: [
          {
            kind: "wall",
            id: "w",
            points: [
              [1, 1],
              [1, 1],
            ],
          },
        ],
      },
      "paint[0].points: All its points are the same",
    ],
    [
      "a section of no width",
      { section: { widthMm: 0, heightMm: 5 }, paint: [], sources: [], probes: [] },
      "section.widthMm: It is 0 mm; it must be greater than 0.",
    ],
    ["a band upside down", { band: { fromGHz: 10, toGHz: 1 } }, "band.toGHz: The band runs from 10 to 1 GHz"],
    ["an unknown name", { section: { widthMm: "a", heightMm: 5 } }, 'section.widthMm: "a" is no parameter'],
    [
      "a value that is not finite",
      { parameters: [{ name: "a", value: 0 }], sources: [{ kind: "line", id: "s", x: "1/a", y: 1 }] },
      'sources[0].x: "1/a" gives Infinity',
    ],
    [
      "a parameter by itself",
      { parameters: [{ name: "a", value: "a + 1" }] },
      'parameters[0].value: "a" is defined by itself',
    ],
    [
      "a later parameter",
      {
        parameters: [
          { name: "a", value: "b" },
          { name: "b", value: 1 },
        ],
      },
      'parameters[0].value: "b" is defined later',
    ],
    [
      "a function's name",
      { parameters: [{ name: "min", value: 1 }] },
      'parameters[0].name: "min" is the name of a function',
    ],
    [
      "a parameter twice",
      {
        parameters: [
          { name: "a", value: 1 },
          { name: "a", value: 2 },
        ],
      },
      'parameters[1].name: "a" is already the name of parameters[0]',
    ],
    ["too coarse a mesh", { mesh: { cellMm: 4 } }, "mesh.cellMm: The mesh has 7."],
    [
      "too few cells a wavelength",
      { mesh: { cellsPerWavelength: 7 } },
      "mesh.cellsPerWavelength: The mesh has 7",
    ],
    [
      "too many cells",
      { mesh: { cellMm: 0.02 } },
      "mesh.cellMm: The section would have 5000 × 3000 cells; the maximum is 4096",
    ],
    ["too many steps", { stop: { maxTimeNs: 1e8 } }, "stop.maxTimeNs: 100000000 ns are"],
    [
      "too many points",
      {
        paint: [
          {
            kind: "stroke",
            id: "s",
            medium: "air",
            widthMm: 1,
            points: Array.from({ length: MAXIMA.points + 1 }, () => [1, 1]),
          },
        ],
      },
      "paint: The patches have 200001 points in all; the maximum is 200000",
    ],
  ])("%s", (_what, changes, expected) => {
    const lines = refusals({ media: [...(plain().media ?? []), lossless], ...changes });
    expect(
      lines.some((line) => line.startsWith(expected)),
      lines.slice(0, 5).join("\n"),
    ).toBe(true);
  });

  it("listing air as air is no conflict", () => {
    expect(refusals({ media: [{ id: "air", name: "Air" }, ...(plain().media ?? [])] })).toEqual([]);
  });
});

describe("a run that would not fit into memory", () => {
  const probes = Array.from({ length: 200 }, (_, n) => ({
    ...{ kind: "point", id: `p${String(n)}`, field: "Ez", x: 20, y: 30 },
  }));

  it("is refused with the number, by its traces and by its poles", () => {
    // 0.167 ps a step: 12 million steps of 200 traces are 17.9 GiB.
    const [traces, ...others] = refusals({ probes, stop: { maxTimeNs: 20_000 } });
    expect(others).toEqual([]);
    expect(traces).toMatch(
      /^stop\.maxTimeNs: The run could need (\d+(\.\d+)?) GiB of memory, \1 of them for the traces, with \d+ cells and \d+ steps; the maximum is 4 GiB: stop earlier/,
    );
    const poles = Array.from({ length: 20 }, () => ({ kind: "debye", delta: 0.01, tauNs: 1 }));
    const media = [{ id: "foam", name: "Foam", electricPoles: poles }];
    const [cells] = refusals({ media, mesh: { cellMm: 0.03 } });
    // (3333 + 56) × 2000 cells of 104 + 8·(4 + 120) bytes.
    expect(cells).toMatch(
      /^mesh\.cellMm: The run could need 6\.\d+ GiB of memory, 0\.\d+ of them for the traces/,
    );
  });

  it("is let pass where it fits", () => {
    expect(refusals({ probes, stop: { maxTimeNs: 1000 } })).toEqual([]);
    expect(refusals({ mesh: { cellMm: 0.03 } })).toEqual([]);
  });
});
