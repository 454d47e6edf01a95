import { describe, expect, it } from "vitest";
import { ApiError } from "../../lib/api";
import { signInSentence } from "./sentences";

describe("signInSentence", () => {
  it("says the same whether the address or the password is wrong", () => {
    for (const status of [401, 403]) {
      expect(signInSentence(new ApiError(status, "not-signed-in", "INVALID"))).toMatch(
        /do not belong together/,
      );
    }
  });
  it("passes on how long to wait, and what an unreachable server means", () => {
    expect(signInSentence(new ApiError(429, "too-many", "Wait 59 seconds."))).toBe("Wait 59 seconds.");
    expect(signInSentence(new ApiError(0, "unreachable", "No server."))).toBe("No server.");
  });
});
