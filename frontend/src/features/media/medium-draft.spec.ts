import { AIR } from "@heddle/kernels/scene";
import { describe, expect, it } from "vitest";
import { draftOf, emptyPole, mediumId, mediumOf } from "./medium-draft";

const foam = {
  medium: {
    ...AIR,
    id: "foam",
    name: "Foam",
    conductivity: 0.05,
    magneticPoles: [{ kind: "lorentz" as const, delta: 2, resonanceGHz: 3, dampingGHz: 1 }],
  },
  source: "measured",
};

describe("mediumOf", () => {
  it("gives back what a draft was made of", () => {
    expect(mediumOf(draftOf(foam), "foam")).toEqual({ medium: foam.medium, faults: {} });
    const metal = { medium: { id: "m", name: "Metal", perfect: "electric" as const }, source: "ideal" };
    expect(mediumOf(draftOf(metal), "m")).toEqual({ medium: metal.medium, faults: {} });
  });
  it("reads figures as they are typed", () => {
    const { medium } = mediumOf(
      { ...draftOf(foam), conductivity: "2,5e-3", relativePermittivity: " 4.4 " },
      "foam",
    );
    expect(medium).toMatchObject({ conductivity: 0.0025, relativePermittivity: 4.4 });
  });
  it("names every fault at its field", () => {
    const draft = {
      ...draftOf(null),
      relativePermittivity: "0.5",
      conductivity: "-1",
      magneticLoss: "much",
      poles: [{ ...emptyPole(7), delta: "1", tauNs: "0" }],
    };
    const { medium, faults } = mediumOf(draft, "x");
    expect(medium).toBeNull();
    expect(Object.keys(faults).sort()).toEqual(
      ["conductivity", "magneticLoss", "name", "poles.7.tauNs", "relativePermittivity", "source"].sort(),
    );
    expect(faults["relativePermittivity"]).toBe("A number from 1 to 10⁶.");
  });
});

describe("mediumId", () => {
  it("is plain, short and not taken", () => {
    expect(mediumId("Carbon foam, 10 mm", new Set())).toBe("carbon-foam-10-mm");
    expect(mediumId("Foam", new Set(["foam", "foam-2"]))).toBe("foam-3");
    expect(mediumId("…", new Set())).toBe("medium");
    expect(mediumId("x".repeat(80), new Set())).toHaveLength(40);
  });
});
