import { describe, expect, it } from "vitest";
import { COMPUTED, FEATURES, readScene, REFINEMENTS, type SceneInput } from "./index.js";
import { plain } from "./testing-document.js";

describe("what no engine computes yet", () => {
  const none = new Set<never>();
  const all = new Set([...FEATURES, ...REFINEMENTS]);
  const pole = { kind: "debye" as const, delta: 1, tauNs: 0.01 };
  const poled = { id: "m", name: "M", electricPoles: [pole], magneticPoles: [pole] };
  it.each<[string, Partial<SceneInput>, string, string]>([
    [
      "ports",
      {
        sources: [],
        paint: [],
        edges: { left: "absorbing", right: "absorbing", bottom: "electric", top: "electric" },
        ports: [{ id: "p", from: [5, 0], to: [5, 30], inward: "+x", mode: 0, drive: true }],
      },
      "ports",
      "Waveguide ports are not computed yet",
    ],
    [
      "plane waves",
      { paint: [], sources: [{ kind: "plane-wave", id: "w", angle: 30 }] },
      "sources[0]",
      "Plane waves are not computed yet",
    ],
    ["electric poles", { media: [poled] }, "media[0].electricPoles", "Electric poles"],
    ["magnetic poles", { media: [poled] }, "media[0].magneticPoles", "Magnetic poles"],
    [
      "films",
      {
        paint: [
          {
            kind: "film",
            id: "f",
            points: [
              [1, 1],
              [9, 9],
            ],
            ohmsPerSquare: 377,
          },
        ],
      },
      "paint[0]",
      "Resistive films",
    ],
    [
      "line probes",
      { probes: [{ kind: "line", id: "p", from: [1, 1], to: [1, 9], quantity: "voltage" }] },
      "probes[0]",
      "Line probes",
    ],
    [
      "area probes",
      { probes: [{ kind: "area", id: "p", x: 1, y: 1, width: 2, height: 2, quantity: "absorbed" }] },
      "probes[0]",
      "Area probes",
    ],
  ])("%s are refused by name for a run, and kept in a document", (_what, changes, path, part) => {
    expect(readScene(plain(changes)).ok).toBe(true);
    const run = readScene(plain(changes), { purpose: "run", features: none });
    if (run.ok) throw new Error("accepted");
    expect(run.problems.find((problem) => problem.path === path)?.sentence).toContain(part);
    expect(readScene(plain(changes), { purpose: "run", features: all }).ok).toBe(true);
  });

  it("a scene that nothing drives is refused a run", () => {
    expect(readScene(plain({ sources: [] })).ok).toBe(true);
    const run = readScene(plain({ sources: [] }), { purpose: "run" });
    expect(run).toMatchObject({
      ok: false,
      problems: [{ path: "sources", sentence: "Nothing drives this scene; place a source." }],
    });
  });

  it("judgements and corrections are missed in warnings, each by name", () => {
    const limits: SceneInput["limits"] = [
      {
        id: "level",
        name: "Emission",
        sense: "below",
        points: [
          [1, 40],
          [5, 30],
        ],
        of: { probe: "p" },
      },
      { id: "ring", name: "Ringing", sense: "below", value: 200, of: { q: "highest" } },
    ];
    const scene = plain({ limits, wallConductivity: 5.8e7, outOfPlane: { kind: "height", mm: 10 } });
    const sentences = (features: ReadonlySet<never> | typeof all): string[] => {
      const run = readScene(scene, { purpose: "run", features });
      if (!run.ok) throw new Error(run.problems[0]?.sentence);
      return run.warnings.map(({ sentence }) => sentence);
    };
    expect(sentences(none).join("\n")).toMatch(
      /cut on the mesh lines.*plates 10 mm apart.*plates above and below is not yet.*own metal walls is in no S.*"Emission" \(level\) is not judged.*"Ringing" \(ring\) is not judged/s,
    );
    // What remains when everything is computed is the caution about the third dimension.
    expect(sentences(all)).toHaveLength(1);
    expect(sentences(all)[0]).toContain("plates 10 mm apart");
  });

  it("metal is said to be cut on the mesh lines only where metal is drawn", () => {
    const run = readScene(plain({ paint: [] }), { purpose: "run", features: none });
    expect(run).toMatchObject({ ok: true, warnings: [] });
  });

  it("nothing is claimed that is not in the lists", () => {
    for (const name of COMPUTED) expect(all.has(name)).toBe(true);
  });
});
