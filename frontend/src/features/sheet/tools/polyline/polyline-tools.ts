import type { Length, Patch } from "@heddle/kernels/scene";
import { roundMm, type Xy } from "../../geometry/points";
import type { Tool, ToolMachine } from "../tool";
import { PolylineIdle } from "./idle";

/** A kind of patch that is drawn point by point. */
export interface PolylineKind {
  base: string;
  label: string;
  closed: boolean;
  /** Fewer points than this make no shape. */
  leastPoints: number;
  make: (id: string, medium: string, points: readonly Xy[]) => Patch;
}

const asWritten = (points: readonly Xy[]): [Length, Length][] =>
  points.map(([x, y]) => [roundMm(x), roundMm(y)]);

const POLYGON: PolylineKind = {
  base: "polygon",
  label: "Draw a polygon",
  closed: true,
  leastPoints: 3,
  make: (id, medium, points) => ({ kind: "polygon", id, medium, points: asWritten(points), holes: [] }),
};

const WALL: PolylineKind = {
  base: "wall",
  label: "Draw a wall",
  closed: false,
  leastPoints: 2,
  make: (id, _medium, points) => ({ kind: "wall", id, points: asWritten(points) }),
};

const rest = (kind: PolylineKind) => (machine: ToolMachine) => new PolylineIdle(machine, kind);

export const polygonTool: Tool = { id: "polygon", rest: rest(POLYGON) };
export const wallTool: Tool = { id: "wall", rest: rest(WALL) };
