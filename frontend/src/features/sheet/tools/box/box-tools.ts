import type { Patch } from "@heddle/kernels/scene";
import type { BoxMm } from "../../geometry/points";
import { roundMm } from "../../geometry/points";
import type { Tool, ToolMachine } from "../tool";
import { BoxIdle } from "./idle";

/** A kind of patch that is drawn by dragging from corner to corner. */
export interface BoxKind {
  base: string;
  label: string;
  make: (id: string, medium: string, box: BoxMm) => Patch;
}

const RECTANGLE: BoxKind = {
  base: "rectangle",
  label: "Draw a rectangle",
  make: (id, medium, box) => ({
    kind: "rectangle",
    id,
    medium,
    x: roundMm(box.left),
    y: roundMm(box.bottom),
    width: roundMm(box.right - box.left),
    height: roundMm(box.top - box.bottom),
    angle: 0,
  }),
};

const ELLIPSE: BoxKind = {
  base: "ellipse",
  label: "Draw an ellipse",
  make: (id, medium, box) => ({
    kind: "ellipse",
    id,
    medium,
    x: roundMm((box.left + box.right) / 2),
    y: roundMm((box.bottom + box.top) / 2),
    rx: roundMm((box.right - box.left) / 2),
    ry: roundMm((box.top - box.bottom) / 2),
    angle: 0,
  }),
};

const rest = (kind: BoxKind) => (machine: ToolMachine) => new BoxIdle(machine, kind);

export const rectangleTool: Tool = { id: "rectangle", rest: rest(RECTANGLE) };
export const ellipseTool: Tool = { id: "ellipse", rest: rest(ELLIPSE) };
