import { describe, expect, it } from "vitest";
import { counted, eitherOf, initialsOf } from "./words";

describe("words", () => {
  it("takes the initials of first and last name", () => {
    expect(initialsOf("Marta de la Olsen")).toBe("MO");
    expect(initialsOf("åsa")).toBe("Å");
    expect(initialsOf("  ")).toBe("");
  });
  it("counts and lists", () => {
    expect(counted(1, "scene")).toBe("1 scene");
    expect(counted(0, "scene")).toBe("0 scenes");
    expect(eitherOf(["owner", "engineer", "manager"])).toBe("owner, engineer or manager");
    expect(eitherOf(["owner"])).toBe("owner");
  });
});
