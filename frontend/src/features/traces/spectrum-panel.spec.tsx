import type { Limit, SolveResult } from "@heddle/kernels/scene";
import { renderToStaticMarkup } from "react-dom/server";
import { describe, expect, it } from "vitest";
import { SpectrumPanel } from "./spectrum-panel";

const GHz = [9, 9.5, 10];
const pair = (to: string, re: number[]) => ({ to, from: "in", re, im: [0, 0, 0], groupDelayNs: [1, 1, 1] });
const result = {
  probes: [
    {
      id: "p",
      drive: "in",
      kind: "point",
      quantity: "Ez",
      unit: "V/m",
      trace: { startNs: 0, stepNs: 1, values: [] },
      spectrum: { GHz, re: [1, 1, 1], im: [0, 0, 0] },
    },
  ],
  ports: {
    GHz,
    s: [pair("in", [0.1, 0.01, 0.2]), pair("out", [0.9, 1, 0.8])],
    passivity: { worst: 1, atGHz: 9.5 },
  },
  limits: [{ id: "rl", holds: false, margin: -6.02, atGHz: 10, uncertainty: null }],
  quality: { warnings: [] },
} as unknown as SolveResult;
const limit: Limit = {
  id: "rl",
  name: "Return loss",
  sense: "below",
  points: [
    [9, -20],
    [10, -20],
  ],
  of: { s: ["in", "in"] },
};
const drawn = (over: Partial<SolveResult> = {}): string =>
  renderToStaticMarkup(
    <SpectrumPanel
      result={{ ...result, ...over }}
      previous={null}
      band={{ fromGHz: 9, toGHz: 10 }}
      limits={[limit]}
      nameOf={(id) => id}
      selected={null}
      empty="Nothing yet."
    />,
  );

describe("the spectrum of a scene with ports", () => {
  it("shows S first, every pair by a line of its own, and offers the probes", () => {
    const html = drawn();
    expect(html).toContain("|S|, dB");
    for (const name of ["|S|", "Phase", "Delay", "Probes"]) expect(html).toContain(`>${name}</button>`);
    expect(html).toContain('aria-pressed="true">|S|');
    const dashes = [...html.matchAll(/<line x1="0" x2="22"[^>]*stroke-dasharray="([^"]*)"/g)].map(
      ([, dash]) => dash,
    );
    expect(new Set(dashes).size).toBe(2);
    expect(html).toContain("in ← in: largest −13.98");
  });

  it("draws the limit with its margin, and the values where it is broken worst", () => {
    const html = drawn();
    expect(html).toContain("Return loss, broken");
    expect(html).toContain("6.0\u2009dB over");
    expect(html).toContain("Values where the limit is nearest");
    expect(html).toContain("<b>10\u2009GHz</b>");
  });

  it("has the guide's frequencies on an axis of their own where they are told", () => {
    expect(drawn()).not.toContain("in the guide");
    const ports = result.ports && { ...result.ports, guideGHz: [11, 11.4, 11.9] };
    expect(drawn({ ports })).toContain("GHz in the guide");
  });

  it("fills the bar of a run on two meshes", () => {
    expect(drawn()).not.toContain("zero cell size");
    const s = [
      { to: "in", from: "in", GHz, re: [0.1, 0.01, 0.2], im: [0, 0, 0], uncertainty: [0.02, 0.02, 0.02] },
    ];
    const html = drawn({
      extrapolation: { s, probes: [], resonances: [], ratio: 2, order: 2, steady: true },
    });
    expect(html).toContain("zero cell size");
    expect(html).toContain("(−14.89 … −13.15)");
  });

  it("says why there is nothing to show", () => {
    const edited = { ports: undefined, probes: [], edits: [{ step: 3, sceneSha256: "x" }] };
    expect(drawn(edited)).toMatch(/edited while it ran/);
  });
});
