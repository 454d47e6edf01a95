import { describe, expect, it } from "vitest";
import { exampleFacts } from "./example-facts";

describe("exampleFacts", () => {
  it("tells field, size and band", () => {
    const document = {
      polarization: "TEz",
      section: { widthMm: 300, heightMm: 200 },
      band: { fromGHz: 0.3, toGHz: 2 },
    };
    expect(exampleFacts(document)).toBe("TEz · 300\u2009×\u2009200\u2009mm · 0.3 to 2\u2009GHz");
  });
  it("leaves out lengths that are expressions", () => {
    expect(exampleFacts({ polarization: "TMz", section: { widthMm: "2*a", heightMm: 5 } })).toBe("TMz");
  });
});
