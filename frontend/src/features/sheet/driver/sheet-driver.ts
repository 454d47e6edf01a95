import type { Medium, Patch, Scene } from "@heddle/kernels/scene";
import { toPx } from "../../../hooks/viewport";
import { SheetEditor } from "../document/editor";
import { pressKey } from "../document/keyboard";
import type { SheetStoreOptions, ToolId } from "../document/store";
import type { Xy } from "../geometry/points";
import type { RawPointer } from "../tools/toolbox";

/** An empty section of 200 × 100 mm with absorbing edges. */
export function emptyScene(part: Partial<Scene> = {}): Scene {
  return {
    format: "heddle-scene",
    version: 1,
    name: "Trial",
    notes: "",
    polarization: "TMz",
    section: { widthMm: 200, heightMm: 100 },
    band: { fromGHz: 1, toGHz: 3 },
    mesh: { cellsPerWavelength: 20, metal: "conformal" },
    background: "air",
    outOfPlane: { kind: "unbounded" },
    parameters: [],
    edges: { left: "absorbing", right: "absorbing", bottom: "absorbing", top: "absorbing" },
    media: [],
    paint: [],
    sources: [],
    ports: [],
    probes: [],
    limits: [],
    stop: { maxTimeNs: 100, decayDb: 60 },
    ...part,
  };
}

export const foam: Medium = {
  id: "foam",
  name: "Carbon foam",
  relativePermittivity: 1.8,
  relativePermeability: 1,
  conductivity: 0.05,
  magneticLoss: 0,
  electricPoles: [],
  magneticPoles: [],
};

interface Held {
  shift?: boolean;
  alt?: boolean;
  ctrl?: boolean;
}

/**
 * The real editor without a browser, in sentences: `new SheetDriver().tool("rectangle").drag([10, 10], [50, 30])`.
 * Places are millimetres of the section; the surface is 1000 × 600 pixels at 4 pixels a millimetre.
 */
export class SheetDriver {
  readonly editor: SheetEditor;
  #held: Held = {};

  constructor(part: Partial<Scene> = {}, options: SheetStoreOptions = {}) {
    this.editor = new SheetEditor(emptyScene(part), options);
    this.editor.resize(1000, 600);
    this.editor.setView({ pxPerMm: 4, originXPx: 100, originYPx: 500, widthPx: 1000, heightPx: 600 });
  }

  get document(): Scene {
    return this.editor.document;
  }
  get paint(): Patch[] {
    return this.document.paint;
  }
  get selection(): string[] {
    return [...this.editor.state.selection];
  }

  tool(tool: ToolId): this {
    this.editor.setTool(tool);
    return this;
  }
  medium(medium: string): this {
    this.editor.setMedium(medium);
    return this;
  }
  brush(widthMm: number): this {
    this.editor.setBrushWidth(widthMm);
    return this;
  }
  /** Modifier keys held from here on. */
  holding(held: Held): this {
    this.#held = held;
    return this;
  }

  down(at: Xy, button = 0): this {
    this.editor.tools.pointerDown(this.#raw(at, button));
    return this;
  }
  move(...path: Xy[]): this {
    for (const at of path) this.editor.tools.pointerMove(this.#raw(at, 0));
    return this;
  }
  up(at: Xy, button = 0): this {
    this.editor.tools.pointerUp(this.#raw(at, button));
    return this;
  }
  click(at: Xy): this {
    return this.move(at).down(at).up(at);
  }
  doubleClick(at: Xy): this {
    this.click(at).click(at);
    this.editor.tools.doubleClick(this.#raw(at, 0));
    return this;
  }
  /** Presses at the first place, passes through the others and lets go at the last. */
  drag(from: Xy, ...path: Xy[]): this {
    this.move(from)
      .down(from)
      .move(...path);
    return this.up(path.at(-1) ?? from);
  }
  key(key: string, held: Held = this.#held): this {
    const { shift = false, alt = false, ctrl = false } = held;
    pressKey(this.editor, { key, shift, alt, ctrl });
    return this;
  }
  undo(): this {
    return this.key("z", { ctrl: true });
  }
  redo(): this {
    return this.key("y", { ctrl: true });
  }

  #raw(at: Xy, button: number): RawPointer {
    const { shift = false, alt = false, ctrl = false } = this.#held;
    const px = toPx(this.editor.view, { xMm: at[0], yMm: at[1] });
    return { px, button, shift, alt, ctrl };
  }
}
