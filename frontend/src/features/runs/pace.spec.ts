import { describe, expect, it } from "vitest";
import { PACE_POSITIONS, paceAt, paceWords, positionOf } from "./pace";

describe("pace", () => {
  it("runs from 10 ps/s to as fast as it goes", () => {
    expect(paceAt(0)).toBe(10);
    expect(paceAt(PACE_POSITIONS - 1)).toBe(1e6);
    expect(paceAt(PACE_POSITIONS)).toBeNull();
  });

  it("finds the position of each pace again", () => {
    for (let position = 0; position <= PACE_POSITIONS; position += 1)
      expect(positionOf(paceAt(position))).toBe(position);
    expect(positionOf(1)).toBe(0);
    expect(positionOf(1e9)).toBe(PACE_POSITIONS - 1);
  });

  it("is said in seconds with a prefix", () => {
    expect(paceWords(250)).toBe("250\u2009ps a second");
    expect(paceWords(null)).toBe("as fast as it goes");
  });
});
