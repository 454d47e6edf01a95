import { describe, expect, it } from "vitest";
import { ApiError, apiErrorFrom, sentenceOf } from "./errors";

describe("apiErrorFrom", () => {
  it("takes the server's own sentence, code and problems", () => {
    const problems = [{ path: "paint[2].medium", sentence: "There is no medium foam." }];
    const error = apiErrorFrom(422, { code: "scene-refused", message: "Not taken.", problems });
    expect(error).toMatchObject({ status: 422, code: "scene-refused", message: "Not taken.", problems });
  });
  it.each([
    [401, "not-signed-in"],
    [403, "not-allowed"],
    [413, "too-large"],
    [429, "too-many"],
    [502, "unavailable"],
    [500, "internal"],
    [400, "bad-request"],
  ])("finds a sentence for a bare %i", (status, code) => {
    const error = apiErrorFrom(status, null);
    expect(error.code).toBe(code);
    expect(error.message).toMatch(/^[A-Z].*\.$/);
  });
  it("survives a body that is something else", () => {
    expect(apiErrorFrom(500, { message: "", problems: "none" })).toMatchObject({
      code: "internal",
      problems: [],
    });
  });
});

describe("sentenceOf", () => {
  it("shows what a refusal says and hides what a fault says", () => {
    expect(sentenceOf(new ApiError(404, "not-found", "It is gone."))).toBe("It is gone.");
    expect(sentenceOf(new TypeError("x is undefined"))).not.toMatch(/undefined/);
  });
});
