import type { Limit, SolveResult } from "@heddle/kernels/scene";
import { renderToStaticMarkup } from "react-dom/server";
import { describe, expect, it } from "vitest";
import { LimitsPanel, verdictWords } from "./limits-panel";
import type { MeshCheckProps } from "./mesh-check";
import { levelWords, MeshCheck } from "./mesh-check";
import { leastOf, ShieldingPanel } from "./shielding-panel";
import { worstMismatch } from "./trust-panel";

const textOf = (element: React.ReactElement): string =>
  renderToStaticMarkup(element)
    .replaceAll(/<style.*?<\/style>|<[^>]*>/g, " ")
    .replaceAll(/\s+/g, " ")
    .trim();

const line: Limit = {
  id: "a",
  name: "Return loss",
  sense: "below",
  points: [[9, -20]],
  of: { s: ["in", "in"] },
};
const share: Limit = { id: "b", name: "Lining", sense: "above", value: 0.8, of: { absorbedShare: "area" } };
const resultOf = (over: Partial<SolveResult>): SolveResult => over as SolveResult;

describe("limits", () => {
  const judged = { id: "a", holds: true, margin: 3.24, atGHz: 9.86, uncertainty: null };

  it("are kept, broken or not judged, by how much and where", () => {
    expect(verdictWords(line, judged)).toBe("kept by 3.2\u2009dB at 9.86\u2009GHz");
    expect(verdictWords(line, { ...judged, holds: false, margin: -0.018 })).toBe(
      "broken by 0.018\u2009dB at 9.86\u2009GHz",
    );
    expect(verdictWords(line, { ...judged, holds: null, margin: null })).toBe("not judged");
    expect(verdictWords(line, undefined)).toBe("not judged");
    expect(verdictWords(share, { ...judged, margin: 0.05, uncertainty: 0.002 })).toBe(
      "kept by 5.0\u2009points\u2009±\u20090.2\u2009points at 9.86\u2009GHz",
    );
  });

  it("are listed as the scene has them, whether a run judged them or not", () => {
    const panel = (result: SolveResult | null) =>
      textOf(<LimitsPanel limits={[line, share]} result={result} outdated={false} />);
    expect(panel(null)).toBe("Limits Run the scene to judge them. Return loss Lining");
    expect(panel(resultOf({ limits: [judged] }))).toBe(
      "Limits Return loss kept by 3.2 dB at 9.86 GHz Lining not judged",
    );
    expect(textOf(<LimitsPanel limits={[]} result={null} outdated={false} />)).toBe("");
  });
});

describe("the check on a finer mesh", () => {
  const props: Omit<MeshCheckProps, "result"> = {
    underWay: false,
    onCheck: () => undefined,
    refusal: null,
    limitAtGHz: (to) => (to === "in" ? 10 : null),
    nameOf: (id) => `probe ${id}`,
  };
  const s = (to: string) => ({
    to,
    from: "in",
    GHz: [9, 10],
    re: [1, 0.1],
    im: [0, 0],
    uncertainty: [0.2, 0.01],
  });
  const extrapolation = {
    ratio: 2,
    order: 2,
    steady: true,
    s: [s("in"), s("out")],
    resonances: [{ probe: "p", GHz: 2.45, ghzUncertainty: 1e-4, q: 300, qUncertainty: 2 }],
    probes: [{ id: "p", drive: "in", GHz: [9, 10], re: [0, 4], im: [3, 0], uncertainty: [0.1, 0.2] }],
  };
  const resonances = [
    { probe: "p", GHz: 2.44, q: 290, levelDb: 0, ghzUncertainty: null, qUncertainty: null },
    { probe: "q", GHz: 2.44, q: 290, levelDb: 0, ghzUncertainty: null, qUncertainty: null },
  ];

  it("is offered where it was not made, and not to who may not run", () => {
    const result = resultOf({});
    expect(textOf(<MeshCheck result={result} {...props} />)).toBe("Check on a finer mesh");
    expect(renderToStaticMarkup(<MeshCheck result={result} {...props} />)).not.toMatch(/disabled=""/);
    expect(renderToStaticMarkup(<MeshCheck result={result} {...props} onCheck={null} />)).toMatch(
      /disabled=""/,
    );
    expect(textOf(<MeshCheck result={result} {...props} underWay />)).toBe("Being checked on a finer mesh.");
  });

  it("tells S at its limit's worst frequency, else the widest uncertainty; resonances; probes", () => {
    const text = textOf(<MeshCheck result={resultOf({ extrapolation, resonances })} {...props} />);
    expect(text).toContain("At zero cell size in ← in at 10 GHz −20.00 ± 0.92 dB");
    expect(text).toContain("out ← in |S| ± 0.2");
    expect(text).toContain("2.45 GHz ± 100 kHz Q 300 ± 2");
    expect(text).toContain("probe p, from in ± 5 % of peak");
    const shaky = { ...extrapolation, steady: false };
    expect(textOf(<MeshCheck result={resultOf({ extrapolation: shaky })} {...props} />)).toMatch(
      /On the finer mesh.*nothing is extrapolated/,
    );
  });

  it("gives no level to what may as well be nothing", () => {
    expect(levelWords(0.1, 0.01)).toBe("−20.00\u2009±\u20090.92\u2009dB");
    expect(levelWords(0.05, 0.05)).toBe("below −20.0\u2009dB");
  });
});

describe("shielding beside the sheet", () => {
  const props = { outdated: false, underWay: false, onRun: null, refusal: null, nameOf: (id: string) => id };
  const one = { probe: "p", GHz: [1, 2, 3], dB: [40, 31.5, null] };

  it("is the least of the band, and where", () => {
    expect(leastOf(one)).toEqual({ dB: 31.5, GHz: 2 });
    expect(leastOf({ ...one, dB: [null, null, null] })).toBeNull();
    const result = resultOf({ shielding: [one] });
    expect(textOf(<ShieldingPanel marked result={result} {...props} />)).toBe(
      "Shielding, least p 31.5 dB at 2 GHz",
    );
  });

  it("is offered where a patch is marked, and not otherwise", () => {
    expect(textOf(<ShieldingPanel marked={false} result={resultOf({})} {...props} />)).toBe("");
    expect(textOf(<ShieldingPanel marked result={null} {...props} />)).toMatch(/Run without the shield, too/);
  });
});

describe("the power balance", () => {
  it("is told where it closes worst", () => {
    const nothing = [null, null, null];
    const balance = { GHz: [1, 2, 3], input: nothing, absorbed: nothing, leaving: nothing };
    expect(worstMismatch(resultOf({ balance: { ...balance, mismatch: [0.01, -0.04, null] } }))).toEqual({
      share: 0.04,
      GHz: 2,
    });
    expect(worstMismatch(resultOf({ balance: { ...balance, mismatch: nothing } }))).toBeNull();
    expect(worstMismatch(resultOf({}))).toBeNull();
  });
});
