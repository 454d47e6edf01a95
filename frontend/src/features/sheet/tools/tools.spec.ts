import { afterEach, beforeEach, describe, expect, it, vi } from "vitest";
import { foam, SheetDriver } from "../driver/sheet-driver";

beforeEach(() => {
  vi.useFakeTimers();
});
afterEach(() => {
  vi.useRealTimers();
});

const box = (id: string, x: number, y: number, width = 20, height = 10) =>
  ({ kind: "rectangle", id, medium: "pec", x, y, width, height, angle: 0 }) as const;

describe("rectangle and ellipse", () => {
  it("draws from corner to corner on the grid, as one step", () => {
    const driver = new SheetDriver({ media: [foam] }).medium("foam");
    driver.tool("rectangle").drag([10.3, 9.8], [30, 20], [50.2, 30.1]);
    expect(driver.paint).toEqual([{ ...box("rectangle-1", 10, 10, 40, 20), medium: "foam" }]);
    expect(driver.selection).toEqual(["paint:rectangle-1"]);
    expect(driver.editor.historyDepth).toBe(1);
  });

  it("draws in any direction", () => {
    const driver = new SheetDriver().tool("rectangle").drag([50, 30], [10, 10]);
    expect(driver.paint[0]).toMatchObject({ x: 10, y: 10, width: 40, height: 20 });
  });

  it("makes a square with Shift and grows about the middle with Ctrl", () => {
    const square = new SheetDriver().tool("rectangle").holding({ shift: true }).drag([10, 10], [50, 30]);
    expect(square.paint[0]).toMatchObject({ x: 10, y: 10, width: 40, height: 40 });
    const about = new SheetDriver().tool("ellipse").holding({ ctrl: true }).drag([50, 50], [70, 60]);
    expect(about.paint[0]).toMatchObject({ kind: "ellipse", x: 50, y: 50, rx: 20, ry: 10 });
  });

  it("leaves nothing behind for a click or an Escape", () => {
    const driver = new SheetDriver().tool("rectangle").click([20, 20]);
    driver.move([20, 20]).down([20, 20]).move([40, 40]);
    expect(driver.paint).toHaveLength(1);
    driver.key("Escape").up([40, 40]);
    expect(driver.paint).toHaveLength(0);
    expect(driver.editor.historyDepth).toBe(0);
    expect(driver.selection).toEqual([]);
  });

  it("drops a box of round size at the middle on Enter", () => {
    const driver = new SheetDriver().key("r").key("Enter");
    expect(driver.paint[0]).toMatchObject({ kind: "rectangle", x: 90, y: 45, width: 20, height: 10 });
    expect(driver.selection).toEqual(["paint:rectangle-1"]);
  });
});

describe("brush", () => {
  it("paints a stroke that stays near the hand's path with few points", () => {
    const driver = new SheetDriver().tool("brush").brush(6);
    const path = Array.from({ length: 200 }, (_, i): [number, number] => [20 + i * 0.5, 40]);
    driver.drag([20, 40], ...path);
    const [stroke] = driver.paint;
    expect(stroke).toMatchObject({ kind: "stroke", widthMm: 6, medium: "pec" });
    expect("points" in stroke && stroke.points).toEqual([
      [20, 40],
      [119.5, 40],
    ]);
  });

  it("reports the stroke while it grows, at most once in 60 ms, and once when it ends", () => {
    const driver = new SheetDriver().tool("brush");
    const growing = vi.fn();
    const ended = vi.fn();
    driver.editor.onGesture(growing);
    driver.editor.onChange(ended);
    driver.move([20, 40]).down([20, 40]);
    expect(growing).toHaveBeenCalledTimes(1);
    for (let i = 1; i <= 40; i += 1) driver.move([20 + i, 40]);
    expect(growing).toHaveBeenCalledTimes(1);
    vi.advanceTimersByTime(60);
    expect(growing).toHaveBeenCalledTimes(2);
    expect(ended).not.toHaveBeenCalled();
    driver.up([60, 40]);
    expect(ended).toHaveBeenCalledTimes(1);
    vi.advanceTimersByTime(500);
    expect(growing).toHaveBeenCalledTimes(2);
  });

  it("runs straight with Shift, and its width answers to [ and ]", () => {
    const driver = new SheetDriver().tool("brush").brush(4).key("]");
    expect(driver.editor.state.brushWidthMm).toBe(5);
    driver.holding({ shift: true }).drag([20, 20], [40, 45], [80, 20]);
    expect(driver.paint[0]).toMatchObject({
      points: [
        [20, 20],
        [80, 20],
      ],
    });
  });

  it("makes a dot of a click", () => {
    const driver = new SheetDriver().tool("brush").click([33, 44]);
    expect(driver.paint[0]).toMatchObject({ kind: "stroke", points: [[33, 44]] });
  });
});

describe("polygon and wall", () => {
  it("sets points and closes on the first one", () => {
    const driver = new SheetDriver().tool("polygon");
    driver.click([10, 10]).click([40, 10]).click([40, 30]);
    expect(driver.paint).toHaveLength(0);
    driver.click([10, 10]);
    expect(driver.paint[0]).toMatchObject({
      kind: "polygon",
      points: [
        [10, 10],
        [40, 10],
        [40, 30],
      ],
    });
    expect(driver.editor.historyDepth).toBe(1);
  });

  it("ends with a double click without doubling the last point", () => {
    const driver = new SheetDriver().tool("wall").click([10, 10]).click([50, 10]).doubleClick([50, 40]);
    expect(driver.paint[0]).toEqual({
      kind: "wall",
      id: "wall-1",
      points: [
        [10, 10],
        [50, 10],
        [50, 40],
      ],
    });
  });

  it("takes points back with Backspace, keeps to 45° with Shift, ends with Enter", () => {
    const driver = new SheetDriver()
      .tool("wall")
      .click([10, 10])
      .click([50, 10])
      .click([90, 90])
      .key("Backspace");
    driver.holding({ shift: true }).click([51, 40]).key("Enter", {});
    expect(driver.paint[0]).toMatchObject({
      points: [
        [10, 10],
        [50, 10],
        [50, 40],
      ],
    });
  });

  it("says how many points are missing, and Escape gives the shape up", () => {
    const driver = new SheetDriver().tool("polygon").click([10, 10]).click([40, 10]).key("Enter");
    expect(driver.editor.state.notice).toContain("at least 3 points");
    driver.key("Escape").key("Enter");
    expect(driver.paint).toHaveLength(1);
    expect(driver.editor.state.tool).toBe("polygon");
  });
});

describe("select", () => {
  const two = { paint: [box("a", 20, 20), box("b", 60, 20), box("c", 100, 60)] };

  it("clicks, adds with Shift, takes away with Shift, and clears on bare sheet", () => {
    const driver = new SheetDriver(two).click([30, 25]);
    expect(driver.selection).toEqual(["paint:a"]);
    driver.holding({ shift: true }).click([70, 25]);
    expect(driver.selection).toEqual(["paint:a", "paint:b"]);
    driver.click([30, 25]);
    expect(driver.selection).toEqual(["paint:b"]);
    driver.holding({}).click([5, 95]);
    expect(driver.selection).toEqual([]);
  });

  it("picks what was painted last", () => {
    const driver = new SheetDriver({ paint: [box("below", 20, 20), box("above", 25, 22)] }).click([30, 26]);
    expect(driver.selection).toEqual(["paint:above"]);
  });

  it("takes with the marquee what lies wholly inside", () => {
    const driver = new SheetDriver(two).drag([15, 15], [50, 40], [70, 40]);
    expect(driver.selection).toEqual(["paint:a"]);
    driver.holding({ shift: true }).drag([95, 55], [125, 75]);
    expect(driver.selection).toEqual(["paint:a", "paint:c"]);
  });

  it("moves the selection to the grid as one step; Escape and undo bring it back", () => {
    const driver = new SheetDriver(two).drag([30, 25], [35.3, 30], [40.2, 35.4]);
    expect(driver.paint[0]).toMatchObject({ x: 30, y: 30 });
    expect(driver.editor.historyDepth).toBe(1);
    driver.undo();
    expect(driver.paint[0]).toMatchObject({ x: 20, y: 20 });
    driver.redo();
    expect(driver.paint[0]).toMatchObject({ x: 30, y: 30 });
    driver.down([35, 35]).move([80, 80]).key("Escape").up([80, 80]);
    expect(driver.paint[0]).toMatchObject({ x: 30, y: 30 });
    expect(driver.editor.historyDepth).toBe(1);
  });

  it("moves every selected item together and keeps to one axis with Shift", () => {
    const driver = new SheetDriver(two).key("a", { ctrl: true });
    driver.holding({ shift: true, alt: true }).down([30, 25]).holding({ shift: true, alt: true });
    driver.move([42, 28]).up([42, 28]);
    expect(driver.paint.map((patch) => ("x" in patch ? [patch.x, patch.y] : null))).toEqual([
      [32, 20],
      [72, 20],
      [112, 60],
    ]);
  });

  it("keeps an expression's words when its shape is moved", () => {
    const scene = {
      parameters: [{ name: "gap", value: 20, plus: 0, minus: 0 }],
      paint: [{ ...box("a", 0, 20), x: "gap / 2 + 10" }],
    };
    const driver = new SheetDriver(scene).click([30, 25]).key("ArrowRight");
    expect(driver.paint[0]).toMatchObject({ x: "gap / 2 + 12" });
    driver.key("ArrowLeft", { shift: true });
    expect(driver.paint[0]).toMatchObject({ x: "gap / 2 - 8" });
  });

  it("resizes by a handle with the far side standing still, and with Ctrl about the middle", () => {
    const driver = new SheetDriver(two).click([30, 25]).drag([40, 30], [45, 35], [60.2, 40.3]);
    expect(driver.paint[0]).toMatchObject({ x: 20, y: 20, width: 40, height: 20 });
    driver.holding({ ctrl: true }).drag([60, 30], [70, 30]);
    expect(driver.paint[0]).toMatchObject({ x: 10, y: 20, width: 60, height: 20 });
    expect(driver.editor.historyDepth).toBe(2);
  });

  it("never turns a shape inside out", () => {
    const driver = new SheetDriver(two).click([30, 25]).holding({ alt: true }).drag([40, 25], [0, 25]);
    const [patch] = driver.paint;
    expect("width" in patch && Number(patch.width)).toBeGreaterThan(0);
    expect(patch).toMatchObject({ x: 20 });
  });

  it("resizes a turned rectangle with its far corner standing still", () => {
    const driver = new SheetDriver({ paint: [{ ...box("a", 40, 40, 40, 20), angle: 90 }] }).click([60, 50]);
    // Turned by 90° about (60, 50) it spans x 50…70, y 30…70; its right side is now its top.
    driver.holding({ alt: true }).drag([60, 70], [60, 75], [60, 80]);
    expect(driver.paint[0]).toMatchObject({ width: 50, height: 20, angle: 90, x: 35, y: 45 });
  });

  it("moves one point of a polygon", () => {
    const points: [number, number][] = [
      [20, 20],
      [60, 20],
      [60, 60],
    ];
    const driver = new SheetDriver({
      paint: [{ kind: "polygon", id: "t", medium: "pec", points, holes: [] }],
    });
    driver.click([55, 25]).drag([60, 60], [80, 70]);
    expect(driver.paint[0]).toMatchObject({
      points: [
        [20, 20],
        [60, 20],
        [80, 70],
      ],
    });
  });

  it("deletes, duplicates and nudges by keys", () => {
    const driver = new SheetDriver(two).click([30, 25]).key("d", { ctrl: true });
    expect(driver.paint.map(({ id }) => id)).toEqual(["a", "b", "c", "a-1"]);
    expect(driver.selection).toEqual(["paint:a-1"]);
    driver.key("Delete");
    expect(driver.paint).toHaveLength(3);
    driver.undo();
    expect(driver.paint).toHaveLength(4);
  });
});

describe("source and probe", () => {
  it("sets a probe of the section's own component and moves it while held", () => {
    const driver = new SheetDriver({ polarization: "TEz" }).tool("probe").drag([30, 30], [40, 40]);
    expect(driver.document.probes).toEqual([
      { kind: "point", id: "p1", name: "P1", x: 40, y: 40, field: "Hz" },
    ]);
    expect(driver.editor.historyDepth).toBe(1);
    driver.click([80, 50]);
    expect(driver.document.probes.map(({ id }) => id)).toEqual(["p1", "p2"]);
  });

  it("takes an existing source up instead of setting a second one on it", () => {
    const driver = new SheetDriver().tool("source").click([30, 30]).drag([30, 30], [60, 50]);
    expect(driver.document.sources).toEqual([{ kind: "line", id: "source-1", x: 60, y: 50, amplitude: 1 }]);
  });

  it("refuses a source in a scene that its ports drive", () => {
    const port = {
      id: "in",
      from: [0, 0],
      to: [0, 20],
      inward: "+x",
      mode: 1,
      shiftMm: 0,
      drive: true,
    } as const;
    const driver = new SheetDriver({ ports: [{ ...port, from: [0, 0], to: [0, 20] }] }).tool("source");
    driver.click([50, 50]);
    expect(driver.document.sources).toEqual([]);
    expect(driver.editor.state.notice).toContain("driven by its ports");
  });
});

describe("measure and view", () => {
  it("measures without touching the scene", () => {
    const driver = new SheetDriver().tool("measure").drag([10, 10], [40, 50]);
    expect(driver.editor.tools.picture()?.measure).toEqual({ from: [10, 10], to: [40, 50] });
    expect(driver.editor.state.notice).toContain("50");
    expect(driver.editor.historyDepth).toBe(0);
    driver.key("Escape");
    expect(driver.editor.tools.picture()?.measure).toBeUndefined();
  });

  it("pans with the middle button and with space, whatever the tool", () => {
    const driver = new SheetDriver().tool("rectangle").down([50, 50], 1).move([60, 55]).up([60, 55], 1);
    expect(driver.editor.view).toMatchObject({ originXPx: 140, originYPx: 480 });
    driver.key(" ").down([50, 50]).move([40, 50]).up([40, 50]);
    expect(driver.editor.view).toMatchObject({ originXPx: 100, originYPx: 480 });
    expect(driver.paint).toHaveLength(0);
  });
});

describe("reading only", () => {
  it("selects and measures but changes nothing", () => {
    const driver = new SheetDriver({ paint: [box("a", 20, 20)] }, { readOnly: true });
    driver.key("b").drag([30, 25], [80, 60]);
    expect(driver.editor.state.tool).toBe("select");
    expect(driver.paint).toEqual([box("a", 20, 20)]);
    driver.click([30, 25]).key("Delete").key("ArrowUp").key("d", { ctrl: true });
    expect(driver.selection).toEqual(["paint:a"]);
    expect(driver.paint).toEqual([box("a", 20, 20)]);
    driver.key("m");
    expect(driver.editor.state.tool).toBe("measure");
  });
});
