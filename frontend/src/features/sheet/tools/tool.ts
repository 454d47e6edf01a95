import type { ResolvedPatch } from "@heddle/kernels/scene";
import type { SheetStore, ToolId } from "../document/store";
import type { BoxMm, Xy } from "../geometry/points";
import type { SnapReason } from "../geometry/snap";

/** One pointer event on the sheet, already in the section's millimetres. */
export interface SheetPointer {
  /** Where the pointer is. */
  at: Xy;
  /** Where it comes to rest: on a key point, an edge or the grid; the pointer's own place where snapping is off. */
  snapped: Xy;
  snapReason: SnapReason | null;
  px: { xPx: number; yPx: number };
  /** 0 main, 1 middle, 2 secondary. */
  button: number;
  shift: boolean;
  /** Turns snapping off while held. */
  alt: boolean;
  /** Ctrl or Command. */
  ctrl: boolean;
}

export interface SheetKey {
  key: string;
  shift: boolean;
  alt: boolean;
  ctrl: boolean;
}

/** What a tool shows over the drawing while it is at work; plain data, drawn by the line work. */
export interface ToolPicture {
  marquee?: BoxMm;
  /** Open or closed lines that follow the pointer. */
  lines?: { points: Xy[]; closed: boolean }[];
  /** A shape that is not in the document yet. */
  ghost?: { patch: ResolvedPatch; medium: string | null };
  measure?: { from: Xy; to: Xy };
  /** Where the next point would come to rest, and why. */
  snap?: { at: Xy; reason: SnapReason };
  /** Diameter of the brush at the pointer, in mm. */
  brush?: { at: Xy; widthMm: number };
}

/** The mark where a press would come to rest; null where it rests on nothing. */
export const snapPicture = (pointer: SheetPointer | null): ToolPicture | null =>
  pointer === null || pointer.snapReason === null
    ? null
    : { snap: { at: pointer.snapped, reason: pointer.snapReason } };

/** What states know of the machine that runs them. */
export interface ToolMachine {
  readonly store: SheetStore;
  /** Leaves the present state and enters `next`. */
  go(next: ToolState): void;
  /** Back to the tool's resting state. */
  rest(): void;
  /** mm within which a hit or a snap counts, at the present zoom. */
  readonly reachMm: number;
  /** Rests a point on a key point, an edge or the grid; what a gesture moves does not attract itself. */
  snap(at: Xy, pointer: SheetPointer): Xy;
}

/**
 * One state of a tool. Only the present state sees events; it goes on by handing the machine the next state.
 * No React, no DOM: a state works the same under a test's driver.
 */
export abstract class ToolState {
  readonly machine: ToolMachine;
  /** CSS cursor over the sheet. */
  cursor = "default";

  constructor(machine: ToolMachine) {
    this.machine = machine;
  }
  get store(): SheetStore {
    return this.machine.store;
  }

  enter(): void {}
  exit(): void {}
  pointerDown?(pointer: SheetPointer): void;
  pointerMove?(pointer: SheetPointer): void;
  pointerUp?(pointer: SheetPointer): void;
  doubleClick?(pointer: SheetPointer): void;
  /** True where the key was used up. */
  keyDown?(key: SheetKey): boolean;
  /** A lost pointer or another tool chosen: give up what is under way. */
  cancel(): void {}
  /** Escape. At rest a tool hands over to the select tool; at work it gives up what is under way. */
  escape(): void {
    this.cancel();
  }
  picture(): ToolPicture | null {
    return null;
  }
}

export interface Tool {
  id: ToolId;
  rest: (machine: ToolMachine) => ToolState;
}
