import { existsSync, readdirSync, readFileSync } from "node:fs";
import { join } from "node:path";
import { fileURLToPath } from "node:url";
import { describe, expect, it } from "vitest";
import { estimateCost, readScene, resolveScene } from "./index.js";

const folder = fileURLToPath(new URL("../../../examples", import.meta.url));
const names = readdirSync(folder, { withFileTypes: true })
  .filter((entry) => entry.isDirectory())
  .map((entry) => entry.name);

/** A minute at the reference engine's 40 million cell-steps a second. */
const MOST_CELL_STEPS = 60 * 40e6;
const PNG_SIGNATURE = [0x89, 0x50, 0x4e, 0x47, 0x0d, 0x0a, 0x1a, 0x0a];

describe("the examples", () => {
  it("all stand in their list, which names no others", () => {
    const list = readFileSync(join(folder, "README.md"), "utf8");
    const linked = [...list.matchAll(/\]\(([a-z0-9-]+)\/README\.md\)/g)].map(([, name]) => name);
    expect(linked.sort()).toEqual([...names].sort());
  });

  it("are ten or more, each under a name of its own", () => {
    expect(names.length).toBeGreaterThanOrEqual(10);
    const titles = names.map((name) => {
      const read = readScene(readFileSync(join(folder, name, "scene.json"), "utf8"));
      return read.ok ? read.scene.name : name;
    });
    expect(new Set(titles).size).toBe(names.length);
  });

  it.each(names)("%s is a scene that can be run in a minute, with a paragraph and a picture", (name) => {
    const read = readScene(readFileSync(join(folder, name, "scene.json"), "utf8"), { purpose: "run" });
    if (!read.ok)
      throw new Error(read.problems.map(({ path, sentence }) => `${path}: ${sentence}`).join("\n"));
    const cost = estimateCost(resolveScene(read.scene));
    expect(cost.cells * cost.steps).toBeLessThan(MOST_CELL_STEPS);
    expect(read.scene.probes.length + read.scene.ports.length).toBeGreaterThan(0);

    const blocks = readFileSync(join(folder, name, "README.md"), "utf8")
      .trim()
      .split(/\n\s*\n/);
    expect(blocks).toHaveLength(2);
    expect(blocks[0]).toMatch(/^# \S/);
    expect(blocks[1].length).toBeGreaterThan(200);

    const picture = join(folder, name, "thumbnail.png");
    expect(existsSync(picture)).toBe(true);
    expect([...readFileSync(picture).subarray(0, 8)]).toEqual(PNG_SIGNATURE);
  });
});
