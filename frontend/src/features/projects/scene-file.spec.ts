import { describe, expect, it } from "vitest";
import { readSceneFile, sceneFileName } from "./scene-file";

const sentence = (text: string): string => {
  const read = readSceneFile(text);
  if (!("sentence" in read)) throw new Error("It was read.");
  return read.sentence;
};

describe("readSceneFile", () => {
  it("reads an object", () => {
    expect(readSceneFile('{"format":"heddle-scene"}')).toEqual({ document: { format: "heddle-scene" } });
  });
  it("says what is wrong with everything else", () => {
    expect(sentence("{")).toMatch(/^This file is not JSON \(/);
    expect(sentence("[1]")).toMatch(/no scene/);
    expect(sentence("null")).toMatch(/no scene/);
    expect(sentence(`"${"x".repeat(2 * 1024 * 1024)}"`)).toMatch(/larger than 2 MB/);
  });
});

describe("sceneFileName", () => {
  it("makes a plain name with the revision", () => {
    expect(sceneFileName("Vented pod, rev C", 4)).toBe("vented-pod-rev-c.r4.json");
    expect(sceneFileName("Éclisse / été", 1)).toBe("eclisse-ete.r1.json");
    expect(sceneFileName("…", 2)).toBe("scene.r2.json");
  });
});
