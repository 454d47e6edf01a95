/** What a run says when its field is no longer finite. */
import { describe, expect, it } from "vitest";
import { readScene, resolveScene } from "../scene/index.js";
import { ReferenceEngine } from "../stepping/index.js";
import { nonFiniteFailure } from "./failure.js";
import { coefficientsOf, drivesOf, latticeOf, layersOf } from "./plan.js";

const read = readScene({
  format: "heddle-scene",
  version: 1,
  name: "Failing",
  polarization: "TMz",
  section: { widthMm: 40, heightMm: 30 },
  band: { fromGHz: 2, toGHz: 6 },
  mesh: { cellMm: 1 },
  edges: { left: "absorbing", right: "absorbing", bottom: "electric", top: "electric" },
  media: [{ id: "foam", name: "Foam", relativePermittivity: 2 }],
  paint: [{ kind: "rectangle", id: "block", medium: "foam", x: 20, y: 10, width: 10, height: 10 }],
  sources: [{ kind: "line", id: "wire", x: 5, y: 5 }],
});

describe("a field that is no longer finite", () => {
  if (!read.ok) throw new Error("refused");
  const scene = resolveScene(read.scene);
  const { lattice } = latticeOf(scene);
  const drives = drivesOf(scene, lattice);
  const engine = (): ReferenceEngine =>
    new ReferenceEngine(
      {
        lattice,
        coefficients: coefficientsOf(scene, lattice).row,
        layers: layersOf(scene, lattice),
        drives: drives.points,
        signals: drives.signals,
        taps: [],
        records: 0,
      },
      "f64",
    );
  /** Index of the node at x, y in mm. */
  const at = (x: number, y: number): number =>
    (1 + lattice.layers.bottom + y) * lattice.stride + 1 + lattice.layers.left + x;

  it.each([
    [25, 15, '"foam" near x = 25.00 mm, y = 15.00 mm'],
    [10, 5, '"air" near x = 10.00 mm, y = 5.000 mm'],
  ])("is traced to its medium: at %s, %s", (x, y, words) => {
    const failing = engine();
    failing.fields.f[at(x, y)] = Number.NaN;
    const { code, sentence } = nonFiniteFailure(failing, scene, drives, [new Float64Array(64)]);
    expect([code, sentence]).toEqual(["non-finite", expect.stringContaining(words)]);
  });

  it("is traced to a source first, where that drives too much", () => {
    const failing = engine();
    failing.fields.f[at(25, 15)] = Number.NaN;
    const { sentence } = nonFiniteFailure(failing, scene, drives, [new Float64Array(64).fill(Number.NaN)]);
    expect(sentence).toContain('the source "wire"');
  });
});
