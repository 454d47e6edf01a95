import { describe, expect, it } from "vitest";
import { applyDiff, diffScenes, invertDiff, isEmptyDiff } from "../document/scene-diff";
import { emptyScene, SheetDriver } from "../driver/sheet-driver";

const patch = (id: string, x = 0) =>
  ({ kind: "rectangle", id, medium: "pec", x, y: 0, width: 1, height: 1, angle: 0 }) as const;

describe("a diff of two scenes", () => {
  const before = emptyScene({ paint: [patch("a"), patch("b"), patch("c"), patch("d")] });
  const [a, b, c, d] = before.paint;

  it.each([
    ["an item changed", { ...before, paint: [a, patch("b", 7), c, d] }],
    ["items taken away", { ...before, paint: [b, d] }],
    ["items added in the middle", { ...before, paint: [a, patch("x"), patch("y"), b, c, d] }],
    ["items in another order", { ...before, paint: [d, b, c, a] }],
    ["all at once", { ...before, name: "Other", paint: [patch("e"), d, patch("a", 3)] }],
    ["a key that was absent", { ...before, wallConductivity: 5.8e7 }],
  ])("goes there and back: %s", (_, after) => {
    const diff = diffScenes(before, after);
    expect(applyDiff(before, diff)).toEqual(after);
    expect(applyDiff(after, invertDiff(diff))).toEqual(before);
  });

  it("keeps only what changed, by reference", () => {
    const after = { ...before, paint: [a, patch("b", 7), c, d] };
    const diff = diffScenes(before, after);
    expect(diff.lists).toHaveLength(1);
    expect(diff.lists[0]?.items.map(({ id }) => id)).toEqual(["b"]);
    expect(applyDiff(before, diff).paint[0]).toBe(a);
    expect(isEmptyDiff(diffScenes(before, { ...before }))).toBe(true);
  });

  it("leaves alone what came from elsewhere in the meantime", () => {
    const mine = { ...before, paint: [a, patch("b", 7), c, d] };
    const undo = invertDiff(diffScenes(before, mine));
    const theirs = { ...mine, paint: [...mine.paint, patch("theirs")] };
    expect(applyDiff(theirs, undo).paint).toEqual([...before.paint, patch("theirs")]);
  });
});

describe("history", () => {
  it("undoes and redoes a thousand steps", () => {
    const driver = new SheetDriver().tool("source");
    driver.click([10, 10]);
    for (let i = 0; i < 1000; i += 1) driver.key("ArrowRight");
    const far = driver.document.sources[0];
    for (let i = 0; i < 1001; i += 1) driver.undo();
    expect(driver.document.sources).toEqual([]);
    expect(driver.editor.state.undoLabel).toBeNull();
    for (let i = 0; i < 1001; i += 1) driver.redo();
    expect(driver.document.sources[0]).toEqual(far);
    expect(driver.editor.state.redoLabel).toBeNull();
  });

  it("gives up what was undone when something new is done, and names its steps", () => {
    const driver = new SheetDriver().tool("rectangle").drag([10, 10], [20, 20]).drag([30, 10], [40, 20]);
    driver.undo();
    expect(driver.editor.state.redoLabel).toBe("Draw a rectangle");
    driver.tool("probe").click([80, 80]);
    expect(driver.editor.state.redoLabel).toBeNull();
    driver.undo().undo();
    expect(driver.document).toMatchObject({ paint: [], probes: [] });
  });

  it("forgets a deleted item in the selection and lets undo in mid-gesture take the gesture back", () => {
    const driver = new SheetDriver().tool("rectangle").drag([10, 10], [20, 20]);
    driver.move([50, 50]).down([50, 50]).move([70, 70]);
    expect(driver.paint).toHaveLength(2);
    driver.undo();
    expect(driver.paint).toHaveLength(1);
    driver.up([70, 70]);
    expect(driver.paint).toHaveLength(1);
    driver.undo();
    expect(driver.selection).toEqual([]);
  });
});
