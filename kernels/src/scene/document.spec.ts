import { describe, expect, it } from "vitest";
import {
  canonicalJson,
  documentSha256,
  readScene,
  resolveScene,
  resultSha256,
  type Scene,
  SceneError,
  sceneDiff,
  sceneJsonSchema,
  sceneSha256,
  type SolveResult,
} from "./index.js";
import { migrateDocument } from "./migrations.js";
import { plain, read, resolved } from "./testing-document.js";

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
