import type { Tool } from "../tool";
import { BrushIdle } from "./idle";

export const brushTool: Tool = { id: "brush", rest: (machine) => new BrushIdle(machine) };
