/** Dispersive media and films in a session: snapshots, live edits, the warnings that go with them. */
import { describe, expect, it } from "vitest";
import type { Scene, SceneInput } from "../scene/index.js";
import { readScene } from "../scene/index.js";
import type { EngineName } from "./engines.js";
import { openSession } from "./index.js";
import type { SolveSession } from "./index.js";

const film = { kind: "film", id: "film", ohmsPerSquare: 200 } as const;
const rod = { kind: "ellipse", id: "rod", medium: "water", x: 38, y: 22, rx: 9, ry: 7 } as const;

const tmz: Partial<SceneInput> = {
  polarization: "TMz",
  probes: [{ kind: "point", id: "p", x: 45, y: 30, field: "Ez" }],
};

const sceneOf = (changes: Partial<SceneInput> = {}): Scene => {
  const read = readScene({
    format: "heddle-scene",
    version: 1,
    name: "A box",
    polarization: "TEz",
    section: { widthMm: 60, heightMm: 40 },
    band: { fromGHz: 2, toGHz: 6 },
    mesh: { cellMm: 1 },
    edges: { left: "absorbing", right: "electric", bottom: "electric", top: "electric" },
    media: [
      {
        id: "water",
        name: "Wet sand",
        relativePermittivity: 3,
        electricPoles: [
          { kind: "debye", delta: 4, tauNs: 0.02 },
          { kind: "lorentz", delta: 1, resonanceGHz: 5, dampingGHz: 1 },
        ],
      },
    ],
    paint: [
      rod,
      {
        ...film,
        points: [
          [12.3, 0],
          [12.3, 40],
        ],
      },
    ],
    sources: [{ kind: "line", id: "wire", x: 20, y: 15 }],
    probes: [{ kind: "point", id: "p", x: 45, y: 30, field: "Hz" }],
    ...changes,
  });
  if (!read.ok) throw new Error(read.problems.map(({ path, sentence }) => `${path}: ${sentence}`).join("\n"));
  return read.scene;
};

const valuesOf = (session: SolveSession): number[] =>
  session.tracesSince(0).flatMap(({ values }) => [...values]);

describe.each<EngineName>(["wasm", "reference"])(
  "poles and films in a session of the %s engine",
  (engine) => {
    it("go on from a snapshot bit for bit", async () => {
      const [whole, other] = [
        await openSession(sceneOf(), { engine }),
        await openSession(sceneOf(), { engine }),
      ];
      whole.advance(300);
      other.restore(whole.snapshot());
      for (const session of [whole, other]) session.advance(500);
      expect(valuesOf(other)).toEqual(valuesOf(whole));
      expect(Math.max(...valuesOf(whole).map(Math.abs))).toBeGreaterThan(0);
    });

    // TMz: in TEz, what was polarized when it was taken away leaves its charges and their static field behind.
    it("may be painted, moved and taken away while it runs", async () => {
      const session = await openSession(sceneOf(tmz), { engine });
      const slanted = {
        ...film,
        points: [
          [5, 5],
          [50, 33],
        ] as [number, number][],
      };
      const paints: SceneInput["paint"][] = [[rod], [{ ...rod, x: 25 }, slanted], [slanted], []];
      for (const paint of paints) {
        session.advance(200);
        expect(session.edit(sceneOf({ ...tmz, paint }))).toMatchObject({ kind: "applied" });
      }
      const edited = await openSession(sceneOf(tmz), { engine });
      edited.advance(100);
      edited.edit(sceneOf({ ...tmz, paint: [slanted] }));
      edited.restore(session.snapshot());
      expect(session.advance(1e6)).toEqual({ kind: "ended", reason: "decay" });
      edited.advance(1e6);
      expect(valuesOf(edited)).toEqual(valuesOf(session));
    });
  },
);

describe("the warnings", () => {
  it("name a dispersive medium at an absorbing edge, and a slanted film in TEz", async () => {
    const warningsOf = async (changes: Partial<SceneInput>): Promise<string> => {
      const session = await openSession(sceneOf(changes));
      session.advance(64);
      return session.result().quality.warnings.join("\n");
    };
    const slanted = {
      ...film,
      points: [
        [5, 5],
        [50, 33],
      ] as [number, number][],
    };
    expect(await warningsOf({})).not.toMatch(/dispersive medium touches|does not run along/);
    expect(await warningsOf({ paint: [{ ...rod, x: 5 }] })).toMatch(/dispersive medium touches/);
    expect(await warningsOf({ paint: [slanted] })).toMatch(/does not run along the mesh/);
    expect(await warningsOf({ ...tmz, paint: [slanted] })).not.toMatch(/does not run along/);
  });
});
