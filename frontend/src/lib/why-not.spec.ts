import { describe, expect, it } from "vitest";
import { whyNot } from "./why-not";

describe("whyNot", () => {
  it("says nothing to those who may", () => {
    expect(whyNot("engineer", "scene.edit")).toBeNull();
  });
  it("names what is refused and who can", () => {
    expect(whyNot("reviewer", "scene.edit")).toBe(
      "As reviewer you cannot create or edit scenes and media. An owner or engineer can.",
    );
    expect(whyNot("engineer", "workspace.administer")).toBe(
      "As engineer you cannot manage members, roles and deletion. An owner can.",
    );
  });
});
