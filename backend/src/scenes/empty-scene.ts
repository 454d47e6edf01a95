/** The sheet of a new scene: nothing drawn, open on all sides, the size and band of a small enclosure. */
export const emptyScene = (name: string): Record<string, unknown> => ({
  format: "heddle-scene",
  version: 1,
  name,
  polarization: "TMz",
  section: { widthMm: 300, heightMm: 200 },
  band: { fromGHz: 0.5, toGHz: 3 },
  edges: { left: "absorbing", right: "absorbing", bottom: "absorbing", top: "absorbing" },
});
