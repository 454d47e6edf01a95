import type { SceneInput } from "@heddle/kernels/scene";

/** An open box with a line source, a probe and a block of lining: about 2,400 cells. */
export const smallScene = (changes: Partial<SceneInput> = {}): SceneInput => ({
  format: "heddle-scene",
  version: 1,
  name: "Small box",
  polarization: "TMz",
  section: { widthMm: 60, heightMm: 40 },
  band: { fromGHz: 2, toGHz: 6 },
  mesh: { cellMm: 1, metal: "conformal" },
  edges: { left: "electric", right: "electric", bottom: "electric", top: "absorbing" },
  media: [{ id: "lining", name: "Lining", conductivity: 2 }],
  paint: [{ id: "block", kind: "rectangle", x: 5, y: 5, width: 10, height: 10, medium: "lining" }],
  sources: [{ id: "wire", kind: "line", x: 30, y: 20 }],
  probes: [{ id: "inside", kind: "point", x: 45, y: 12, field: "Ez" }],
  stop: { maxTimeNs: 8, decayDb: 60 },
  ...changes,
});

/** The same driven by a tone that does not end while anybody looks. */
export const endlessScene = (changes: Partial<SceneInput> = {}): SceneInput =>
  smallScene({
    sources: [{ id: "wire", kind: "line", x: 30, y: 20, waveform: { kind: "tone", GHz: 4, rampCycles: 5 } }],
    stop: { maxTimeNs: 20_000, decayDb: 300 },
    ...changes,
  });
