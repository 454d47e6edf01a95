import { describe, expect, it } from "vitest";
import { safeNext } from "./safe-next";

describe("safeNext", () => {
  it("keeps a path of this product with its query", () => {
    expect(safeNext("/scenes/abc?run=1")).toBe("/scenes/abc?run=1");
  });
  it.each([
    null,
    "",
    "https://elsewhere.example",
    "//elsewhere.example",
    "/\\elsewhere.example",
    "scenes/a",
    "/sign-in?next=/x",
  ])("answers %s with the projects", (next) => {
    expect(safeNext(next)).toBe("/");
  });
});
