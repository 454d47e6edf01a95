import { describe, expect, it } from "vitest";
import {
  canonicalJson,
  COMPUTED,
  documentSha256,
  estimateCost,
  FEATURES,
  gridOf,
  readScene,
  REFINEMENTS,
  type ResolvedScene,
  resolveScene,
  resultSha256,
  type Scene,
  SceneError,
  sceneDiff,
  type SceneInput,
  sceneJsonSchema,
  sceneSha256,
  shortestWavelengthMm,
  type SolveResult,
  wavelengthMm,
} from "./index.js";
import { migrateDocument } from "./migrations.js";

const plain = (changes: Partial<SceneInput> = {}): SceneInput => ({
  format: "heddle-scene",
  version: 1,
  name: "Plain",
  polarization: "TEz",
  section: { widthMm: "a", heightMm: "b" },
  band: { fromGHz: 1, toGHz: 5 },
  parameters: [
    { name: "a", value: 60, plus: 0.1, minus: 0.1 },
    { name: "b", value: "a/2" },
  ],
  mesh: { cellMm: 1 },
  edges: { left: "absorbing", right: "absorbing", bottom: "absorbing", top: "absorbing" },
  paint: [
    {
      kind: "polygon",
      id: "block",
      medium: "pec",
      points: [
        ["a/4", 0],
        ["a/2", 0],
        ["a/2", "b/2"],
      ],
      holes: [
        [
          [20, 1],
          [21, 1],
          [21, 2],
        ],
      ],
    },
    {
      kind: "wall",
      id: "fin",
      points: [
        [40, "b/3"],
        [50, 10],
      ],
    },
  ],
  sources: [{ kind: "line", id: "loop", x: "a - 50", y: 10 }],
  probes: [{ kind: "point", id: "p", x: 55, y: "max(1, b/10)", field: "Hz" }],
  ...changes,
});
const read = (changes: Partial<SceneInput> = {}): Scene => {
  const outcome = readScene(plain(changes));
  if (!outcome.ok)
    throw new Error(outcome.problems.map(({ path, sentence }) => `${path}: ${sentence}`).join("\n"));
  return outcome.scene;
};
const resolved = (changes: Partial<SceneInput> = {}): ResolvedScene => resolveScene(read(changes));

describe("a resolved scene", () => {
  it("has numbers for all lengths, everywhere they may be expressions", () => {
    const scene = resolved();
    expect(scene.section).toEqual({ widthMm: 60, heightMm: 30 });
    expect(scene.paint).toMatchObject([
      {
        points: [
          [15, 0],
          [30, 0],
          [30, 15],
        ],
        holes: [
          [
            [20, 1],
            [21, 1],
            [21, 2],
          ],
        ],
      },
      {
        points: [
          [40, 10],
          [50, 10],
        ],
      },
    ]);
    expect(scene.sources[0]).toMatchObject({ x: 10, y: 10 });
    expect(scene.probes[0]).toMatchObject({ y: 3 });
    expect(Object.fromEntries(scene.parameterValues)).toEqual({ a: 60, b: 30 });
    expect(scene).not.toHaveProperty("parameters");
  });

  it("has the built-in media, and the default pulse over the whole band", () => {
    const scene = resolved();
    expect(scene.mediaById.get("air")).toMatchObject({ relativePermittivity: 1, conductivity: 0 });
    expect(scene.mediaById.get("pec")).toMatchObject({ perfect: "electric" });
    expect(scene.sources[0]?.waveform).toEqual({ kind: "pulse", centerGHz: 3, widthGHz: 4 });
  });

  it("starts a plane wave four cells inside unless told otherwise", () => {
    const wave = { kind: "plane-wave" as const, id: "w", angle: 0 };
    const bare = { paint: [], sources: [wave] };
    expect(resolved(bare).sources[0]).toMatchObject({ insetMm: 4 });
    expect(resolved({ ...bare, sources: [{ ...wave, insetMm: "b/5" }] }).sources[0]).toMatchObject({
      insetMm: 6,
    });
  });

  it("leaves waveform values alone, whatever their keys", () => {
    const waveform = { kind: "samples" as const, stepNs: 0.1, values: [0, 1, 0] };
    expect(
      resolved({ sources: [{ kind: "line", id: "s", x: 1, y: 1, waveform }] }).sources[0]?.waveform,
    ).toEqual(waveform);
  });

  it("is refused with every problem where a scene was not read first", () => {
    const scene: Scene = { ...read(), section: { widthMm: "nowhere", heightMm: "1/0" } };
    expect(() => resolveScene(scene)).toThrow(SceneError);
    expect(() => resolveScene(scene)).toThrow(/section\.widthMm.*\n?section\.heightMm/s);
  });
});

describe("the grid", () => {
  const grid = (widthMm: number, cellMm: number) =>
    gridOf(
      resolved({ section: { widthMm, heightMm: 30 }, mesh: { cellMm }, paint: [], sources: [], probes: [] }),
    );

  it("fills the section exactly, with cells of at most the size asked for", () => {
    expect(grid(60, 1)).toMatchObject({ nx: 60, ny: 30, dxMm: 1, dyMm: 1 });
    const uneven = grid(60.5, 1);
    expect(uneven.nx).toBe(61);
    expect(uneven.nx * uneven.dxMm).toBeCloseTo(60.5, 12);
    expect(uneven.dxMm).toBeLessThanOrEqual(1);
  });

  it("adds no cell for rounding: 0.3/0.1 is three", () => {
    expect(0.3 / 0.1).not.toBe(3);
    expect(grid(0.3, 0.1).nx).toBe(3);
    expect(grid(3 * (1 + 1e-7), 1).nx).toBe(3);
    expect(grid(3 * (1 + 1e-5), 1).nx).toBe(4);
  });

  it("steps at 0.99 of the two-dimensional limit and counts steps up to the last", () => {
    const g = gridOf(resolved({ mesh: { cellMm: 1, metal: "staircase" }, stop: { maxTimeNs: 10 } }));
    // 1 mm / (c √2), in ps; c = 0.299792458 mm/ps.
    expect(g.stepPs).toBeCloseTo((0.99 * 1) / (0.299792458 * Math.SQRT2), 12);
    expect(g.maxSteps).toBe(Math.ceil(10_000 / g.stepPs));
    expect(g.courant).toBe(0.99);
  });

  it("steps at 0.82 of the limit where conformal metal cuts cells of TEz, and only there", () => {
    const courant = (polarization: "TMz" | "TEz", x: number, medium = "pec", more: object = {}): number =>
      gridOf(
        resolved({
          polarization,
          mesh: { cellMm: 1 },
          sources: [],
          probes: [],
          paint: [{ kind: "rectangle", id: "block", medium, x, y: 3, width: 6, height: 4, ...more }],
        }),
      ).courant;
    expect(courant("TEz", 5.3)).toBe(0.82);
    expect(courant("TEz", 5)).toBe(0.99);
    expect(courant("TEz", 5, "pec", { angle: 10 })).toBe(0.82);
    expect(courant("TEz", 5.3, "air")).toBe(0.99);
    expect(courant("TMz", 5.3)).toBe(0.99);
  });

  it("takes the shortest wavelength among media that are used and not too lossy", () => {
    const glass = { id: "glass", name: "Glass", relativePermittivity: 4 };
    const carbon = { id: "carbon", name: "Carbon", relativePermittivity: 9, conductivity: 10 };
    const unused = { id: "unused", name: "Unused", relativePermittivity: 25 };
    const media = [glass, carbon, unused];
    const area = { kind: "rectangle" as const, x: 1, y: 1, width: 5, height: 5 };
    const mesh = { cellsPerWavelength: 20 };
    // c/f = 59.958 mm at 5 GHz; half of it in ε = 4.
    const both = resolved({
      media,
      mesh,
      paint: [
        { ...area, id: "g", medium: "glass" },
        { ...area, id: "c", medium: "carbon" },
      ],
    });
    expect(shortestWavelengthMm(both)).toBeCloseTo(299.792458 / 5 / 2, 9);
    expect(gridOf(both).nx).toBe(Math.ceil(60 / (299.792458 / 5 / 2 / 20)));
    const lossyOnly = resolved({ media, mesh, background: "carbon", paint: [] });
    expect(shortestWavelengthMm(lossyOnly)).toBeCloseTo(299.792458 / 5, 9);
  });

  it("looks over the whole band where a medium is dispersive", () => {
    const pole = { kind: "lorentz" as const, delta: 1, resonanceGHz: 3, dampingGHz: 0.05 };
    const slow = { id: "slow", name: "Slow", electricPoles: [pole] };
    const scene = resolved({
      media: [slow],
      paint: [{ kind: "ellipse", id: "e", medium: "slow", x: 9, y: 9, rx: 1, ry: 1 }],
    });
    const filled = scene.mediaById.get("slow");
    if (filled === undefined || "perfect" in filled) throw new Error("missing");
    // Below its resonance the medium is slowest, far from the band's upper edge.
    expect(shortestWavelengthMm(scene)).toBeLessThan(0.75 * wavelengthMm(filled, 5));
  });

  it("says what a run costs, with the absorbing layers outside the section", () => {
    const cost = estimateCost(resolved());
    expect(cost).toMatchObject({ nx: 60, ny: 30, cells: (60 + 24) * (30 + 24) });
    expect(cost.cellsPerWavelength.air).toBeCloseTo(59.958, 2);
    const closed = { left: "electric", right: "electric", bottom: "electric", top: "magnetic" } as const;
    expect(estimateCost(resolved({ edges: closed })).cells).toBe(60 * 30);
  });
});

describe("canonical form and hash", () => {
  it("is that of RFC 8785", () => {
    // The sorting and number examples of RFC 8785, sections 3.2.2.3 and 3.2.3 (from memory).
    expect(canonicalJson({ b: 1e21, a: [4.5, 2e-3, 1e-27], "€": "é\n" })).toBe(
      '{"a":[4.5,0.002,1e-27],"b":1e+21,"€":"é\\n"}',
    );
    // SHA-256 of the two bytes "{}", as `printf '{}' | sha256sum` prints it.
    expect(documentSha256({})).toBe("44136fa355b3678a1146ad16f7e8649e94fb4fc21fe77e8310c060f61caaff8a");
  });

  it("does not depend on key order or on defaults being written", () => {
    const scene = read();
    const written = readScene({ notes: "", limits: [], ...plain(), outOfPlane: { kind: "unbounded" } });
    if (!written.ok) throw new Error("refused");
    expect(sceneSha256(written.scene)).toBe(sceneSha256(scene));
    expect(sceneSha256(read({ name: "Other" }))).not.toBe(sceneSha256(scene));
  });

  it("leaves the timing out of a result", () => {
    const result = { format: "heddle-result", timing: { seconds: 1 } } as unknown as SolveResult;
    const later = { ...result, timing: { seconds: 2, cellStepsPerSecond: 1, threads: 1 } };
    expect(resultSha256(later)).toBe(resultSha256(result));
    expect(resultSha256({ ...later, version: 1 })).not.toBe(resultSha256(result));
  });
});

describe("migrations", () => {
  const older = { ...plain(), version: 0, name: undefined, title: "Plain" };
  const renamed = {
    from: 0,
    migrate: ({ title, ...rest }: Record<string, unknown>) => ({ ...rest, name: title }),
  };

  it("bring a made-up older version forward, without touching what was given", () => {
    const outcome = readScene(older, { migrations: [renamed] });
    if (!outcome.ok) throw new Error(outcome.problems[0]?.sentence);
    expect(outcome.scene).toMatchObject({ version: 1, name: "Plain" });
    expect(older).toMatchObject({ version: 0, title: "Plain" });
  });

  it("run one after the other, in order of version", () => {
    const steps = [2, 0, 1].map((from) => ({
      from,
      migrate: (document: Record<string, unknown>) => ({
        ...document,
        trail: [...((document.trail as number[] | undefined) ?? []), from],
      }),
    }));
    const migrated = migrateDocument({ format: "heddle-scene", version: 0 }, steps, 3);
    expect(migrated).toMatchObject({ ok: true, document: { version: 3, trail: [0, 1, 2] } });
  });

  it("refuse a newer version and a gap, each in one sentence", () => {
    const newer = readScene({ ...plain(), version: 2, anything: "else" });
    expect(newer).toMatchObject({ ok: false, problems: [{ path: "version" }] });
    if (newer.ok) throw new Error("accepted");
    expect(newer.problems).toHaveLength(1);
    expect(newer.problems[0]?.sentence).toContain("version 2");
    expect(readScene(older)).toMatchObject({ ok: false, problems: [{ path: "version" }] });
  });
});

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

describe("the difference of two scenes", () => {
  it("is empty for scenes that mean the same", () => {
    expect(sceneDiff(read(), read({ notes: "" }))).toEqual([]);
  });

  it("names what was added, removed, changed and reordered", () => {
    const a = read();
    const [block, fin] = a.paint;
    const b: Scene = {
      ...a,
      name: "Renamed",
      paint: [fin, { ...block, medium: "air" } as typeof block],
      probes: [],
      media: [...read({ media: [{ id: "foam", name: "Foam" }] }).media],
      wallConductivity: 1e7,
    };
    expect(sceneDiff(a, b)).toEqual([
      { path: "name", kind: "changed", sentence: 'The name changed from "Plain" to "Renamed".' },
      {
        path: "wallConductivity",
        kind: "added",
        sentence: "The walls' conductivity changed from nothing to 10000000.",
      },
      { path: "media.foam", kind: "added", sentence: 'The medium "foam" was added.' },
      { path: "paint.block", kind: "changed", sentence: 'The polygon "block" changed in medium.' },
      { path: "paint", kind: "changed", sentence: "The order of the patches changed." },
      { path: "probes.p", kind: "removed", sentence: 'The probe "p" was removed.' },
    ]);
  });
});

describe("the JSON Schema", () => {
  it("is derived from the one schema: required keys, no unknown ones", () => {
    const schema = sceneJsonSchema();
    expect(schema).toMatchObject({ type: "object", additionalProperties: false });
    expect([...(schema.required as string[])].sort()).toEqual(
      ["band", "edges", "format", "name", "polarization", "section", "version"].sort(),
    );
  });
});
